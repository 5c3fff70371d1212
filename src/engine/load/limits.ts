import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { landingOf } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { entryOf, otherEnd } from '../network/network.ts';
import type { Missing } from '../wire/tunnel-stack.ts';
import type { GatewayWork, Hop, HopLoad } from './carried-direction.ts';

/**
 * The kinds of limit: what a port's speed carries with Ethernet around it, what was ordered of a transport for one landing in
 * one direction (IP packets), what a gateway forwards or encrypts in bits and in packets, and of one flow.
 */
export type LimitKind =
  'port-speed' | 'transport-rate' | 'gateway-rate' | 'gateway-packets' | 'gateway-one-flow';

/** A limit that traffic comes up against, by what it measures. */
export interface Limit {
  /** The same for the same limit. */
  readonly key: string;
  readonly kind: LimitKind;
  /** A cable, a landing, a device's port or a device. */
  readonly element: ElementRef;
  /** Along a cable; `out` and `in` of a port or landing, seen from its device. */
  readonly direction?: 'a-to-b' | 'b-to-a' | 'out' | 'in';
  readonly cipher?: 'plain' | 'encrypted';
  /** bit/s, or packets/s for `gateway-packets`; absent where nobody has said. */
  readonly most?: number;
  /** For `transport-rate`: whose figure it is. */
  readonly of?: ElementRef;
  readonly missing?: Missing;
}
export interface LimitUse {
  readonly limit: Limit;
  readonly measure: keyof HopLoad;
}

const speedOf = (network: Network, device: Id, port: Id): number | undefined =>
  entryOf(network.design.devices, device).ports[port]?.speedBps;
const speedMissing = (device: Id, port: Id): Missing => ({
  ref: { collection: 'devices', id: device },
  path: ['ports', port, 'speedBps'],
});

/** Cables of a bundle as one: the speeds of those alive added up; `oneFlow` takes one of them. */
export const cableSpeed = (
  network: Network,
  bundle: number,
): { readonly mostBps?: number; readonly oneFlowBps?: number; readonly missing?: Missing } => {
  let mostBps = 0;
  let oneFlowBps = Infinity;
  for (const id of network.bundles[bundle]!.alive) {
    const cable = entryOf(network.design.links, id);
    if (cable.kind !== 'cable') continue;
    const speeds = [cable.a, cable.b].map((plug) => ({
      plug,
      bps: speedOf(network, plug.device, plug.port),
    }));
    const known = speeds.flatMap(({ bps }) => (bps === undefined ? [] : [bps]));
    // Two ports agree on the speed that both have: one that is known is taken for both.
    if (known.length === 0) return { missing: speedMissing(cable.a.device, cable.a.port) };
    const bps = Math.min(...known);
    mostBps += bps;
    oneFlowBps = Math.min(oneFlowBps, bps);
  }
  return { mostBps, oneFlowBps };
};

const cableLimit = (network: Network, { crossing }: Hop): LimitUse => {
  const direction = crossing.from === 'a' ? 'a-to-b' : 'b-to-a';
  const { mostBps, missing } = cableSpeed(network, crossing.bundle!);
  return {
    measure: 'wireRateBps',
    limit: {
      key: `links ${crossing.id} ${direction}`,
      kind: 'port-speed',
      element: { collection: 'links', id: crossing.id },
      direction,
      ...(mostBps === undefined ? {} : { most: mostBps }),
      ...(missing === undefined ? {} : { missing }),
    },
  };
};

const landingLimits = (network: Network, landing: Id, direction: 'out' | 'in'): readonly LimitUse[] => {
  const { device, port, transport, rateUpBps, rateDownBps } = landingOf(network, landing);
  const speed = speedOf(network, device, port);
  const own = direction === 'out' ? rateUpBps : rateDownBps;
  const shared = entryOf(network.design.transports, transport).rateBps;
  const ordered = own ?? shared;
  const of: ElementRef =
    own === undefined ? { collection: 'transports', id: transport } : { collection: 'links', id: landing };
  return [
    {
      measure: 'wireRateBps',
      limit: {
        key: `devices ${device} ${port} ${direction}`,
        kind: 'port-speed',
        element: { collection: 'devices', id: device, port },
        direction,
        ...(speed === undefined ? { missing: speedMissing(device, port) } : { most: speed }),
      },
    },
    {
      measure: 'outerRateBps',
      limit: {
        key: `links ${landing} ${direction}`,
        kind: 'transport-rate',
        element: { collection: 'links', id: landing },
        direction,
        of,
        ...(ordered === undefined
          ? { missing: { ref: { collection: 'transports', id: transport }, path: ['rateBps'] } }
          : { most: ordered }),
      },
    },
  ];
};

/** The limits that a hop meets: its cable, or at both ends of a tunnel the WAN port and what was ordered. */
export const hopLimits = (network: Network, hop: Hop): readonly LimitUse[] => {
  if (hop.crossing.collection === 'links') return [cableLimit(network, hop)];
  if (hop.tunnel === undefined) return [];
  const landings: Record<End, Id> = { a: hop.tunnel.path.landingA, b: hop.tunnel.path.landingB };
  const { from } = hop.crossing;
  return [
    ...landingLimits(network, landings[from], 'out'),
    ...landingLimits(network, landings[otherEnd(from)], 'in'),
  ];
};

/** The limits that a gateway sets, from its profile. Rates count the hosts' packets, packets/s the frames that it handles. */
export const gatewayLimits = (
  network: Network,
  { device, cipher }: Pick<GatewayWork, 'device' | 'cipher'>,
): {
  readonly rate: LimitUse;
  readonly packets: LimitUse;
  readonly oneFlow: { readonly mostBps?: number; readonly limit: Limit };
} => {
  const { profile } = entryOf(network.design.devices, device);
  const figures = profile === undefined ? undefined : entryOf(network.design.profiles, profile)[cipher];
  const element: ElementRef = { collection: 'devices', id: device };
  const limit = (kind: LimitKind, property: keyof NonNullable<typeof figures>): Limit => {
    const most = figures?.[property];
    const missing: Missing =
      profile === undefined
        ? { ref: element, path: ['profile'] }
        : { ref: { collection: 'profiles', id: profile }, path: [cipher, property] };
    return {
      key: `devices ${device} ${cipher} ${kind}`,
      kind,
      element,
      cipher,
      ...(most === undefined ? { missing } : { most }),
    };
  };
  const oneFlow = limit('gateway-one-flow', 'oneFlowBps');
  return {
    rate: { measure: 'innerRateBps', limit: limit('gateway-rate', 'manyFlowsBps') },
    packets: { measure: 'framesPerSecond', limit: limit('gateway-packets', 'packetsPerSecond') },
    oneFlow: { limit: oneFlow, ...(oneFlow.most === undefined ? {} : { mostBps: oneFlow.most }) },
  };
};
