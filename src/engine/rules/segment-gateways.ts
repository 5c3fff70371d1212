import type { Entry } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { circuitFacts, segmentsByForwarder } from './carried-segments.ts';
import { perFacts } from './facts.ts';

/** A forwarder with an inside address on a segment. */
export interface SegmentGateway {
  readonly forwarder: Id;
  readonly device: Id;
  readonly site: Id;
  readonly gateway: NonNullable<Entry<'forwarders'>['gateway']>;
}

/** The gateways of each segment that has any, in order of forwarder. */
export const segmentGateways = perFacts(
  circuitFacts,
  (network): ReadonlyMap<Id, readonly SegmentGateway[]> => {
    const { design } = network;
    const bySegment = new Map<Id, SegmentGateway[]>();
    for (const [forwarder, segments] of segmentsByForwarder(network)) {
      const { device, gateway } = entryOf(design.forwarders, forwarder);
      if (gateway === undefined) continue;
      for (const segment of segments)
        bySegment.set(segment, [
          ...(bySegment.get(segment) ?? []),
          { forwarder, device, site: entryOf(design.devices, device).site, gateway },
        ]);
    }
    for (const list of bySegment.values()) list.sort((a, b) => (a.forwarder < b.forwarder ? -1 : 1));
    return bySegment;
  },
);

/** What is read to know them. */
export const segmentGatewayFacts = ['forwarders', 'gateways', 'addressing', 'sites'] as const;

/** Where gateways stand: their sites by name, the devices' own names where two share a site. */
export const gatewayPlaces = (
  { design }: Network,
  gateways: readonly SegmentGateway[],
): readonly string[] => {
  const isApart = new Set(gateways.map(({ site }) => site)).size === gateways.length;
  return gateways.map(({ site, device }) =>
    isApart ? entryOf(design.sites, site).name : entryOf(design.devices, device).name,
  );
};
