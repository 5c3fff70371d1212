import { tunnelSegments } from '../flood/tunnel-segments.ts';
import type { Network } from '../network/network.ts';
import { bridgesOfTunnel } from './bridged-ends.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { tunnelDevices } from './places.ts';

interface Crossing {
  readonly tunnel: string;
  readonly zones: readonly [string, string];
}

/** Tunnels that bridge a segment between sites of two zones, for segments that nobody asked to be filtered. */
const crossings = (network: Network): ReadonlyMap<string, readonly Crossing[]> => {
  const { design } = network;
  const bySegment = new Map<string, Crossing[]>();
  for (const [tunnel, segments] of tunnelSegments(network)) {
    const { a, b } = tunnelDevices(design, design.tunnels[tunnel]!);
    const [zoneA, zoneB] = [a, b].map((device) => design.sites[design.devices[device]!.site]!.zone);
    if (zoneA === undefined || zoneB === undefined || zoneA === zoneB) continue;
    for (const segment of segments)
      // What must be filtered is told by the check for that.
      if (
        design.segments[segment]!.mustBeFiltered !== true &&
        bridgesOfTunnel(network, tunnel, segment).length > 0
      )
        bySegment.set(segment, [
          ...(bySegment.get(segment) ?? []),
          { tunnel, zones: [zoneA, zoneB].sort() as [string, string] },
        ]);
  }
  return bySegment;
};

export const zonesJoinedUnfiltered = defineRule({
  id: 'zones-joined-unfiltered',
  title: 'Segments cross from one zone to another through a filter',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'A bridge hands frames on below every rule of the firewall: hosts of the two zones are neighbours, whatever was decided about their traffic.',
  seen: 'Hosts of one zone reach all ports of the other’s; the firewall’s log shows nothing of it.',
  sources: [{ document: 'RFC 3378', clause: 'section 6' }, 'common practice, no source'],
  messages: {
    joined: {
      words: 'zones joined',
      sentence: (v: { readonly segment: string; readonly zoneA: string; readonly zoneB: string }) =>
        `Segment ${v.segment} joins zones ${v.zoneA} and ${v.zoneB} unfiltered`,
    },
  },
  check: (network) =>
    [...crossings(network)].map(([segment, all]) => {
      const [zoneA, zoneB] = all[0]!.zones;
      const ref = { collection: 'segments', id: segment } as const;
      return {
        message: 'joined',
        values: { segment: network.design.segments[segment]!.letter, zoneA, zoneB },
        elements: [ref, ...all.map(({ tunnel }) => ({ collection: 'tunnels' as const, id: tunnel }))],
        identity: [segment],
        properties: [{ ref, path: ['mustBeFiltered'] }],
        basis: all.map(({ tunnel, zones }) => `${tunnel} ${zones.join(' ')}`),
      };
    }),
});
