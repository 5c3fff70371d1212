import type { Design } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf } from '../network/network.ts';

/** How the tunnels of a segment hang together, and where one more site would be joined. */
export interface SegmentShape {
  readonly kind: 'alone' | 'pair' | 'hub' | 'mesh' | 'other';
  /** Sites that its tunnels join, in order of id. */
  readonly joined: readonly Id[];
  readonly tunnels: readonly Id[];
  /** Sites that a further one is joined to so that the shape stays; [] where a person has to say. */
  readonly partners: readonly Id[];
  /** Sites of which one may be chosen where the shape leaves a choice. */
  readonly choices: readonly Id[];
}

const siteOf = (network: Network, device: Id): Id => entryOf(network.design.devices, device).site;

/** Whether each forwarder that ends these tunnels keeps them from exchanging frames. */
const areIsolated = (network: Network, tunnels: readonly Id[]): boolean =>
  tunnels.every((id) =>
    (network.circuitsByTunnel.get(id) ?? []).every(({ circuit }) => circuit.isolation !== undefined),
  );

/** Of two sites the one that more associations end at; undefined where neither is ahead. */
const busier = (network: Network, sites: readonly Id[]): Id | undefined => {
  const count = (site: Id): number =>
    Object.values(network.design.associations).filter(({ a, b }) =>
      [a, b].some(({ device }) => siteOf(network, device) === site),
    ).length;
  const [first, second] = [...sites].sort((a, b) => count(b) - count(a));
  return first !== undefined && second !== undefined && count(first) > count(second) ? first : undefined;
};

/** The shape of a segment as its tunnels draw it now. */
export const segmentShape = (design: Design, segment: Id): SegmentShape => {
  const network = indexNetwork(design);
  const tunnels = [...tunnelSegments(network)]
    .filter(([, carried]) => carried.includes(segment))
    .map(([id]) => id);
  const pairs = new Map<string, readonly [Id, Id]>();
  for (const id of tunnels) {
    const tunnel = entryOf(design.tunnels, id);
    const [a, b] = (['a', 'b'] as const)
      .map((end) => siteOf(network, deviceOfTunnelEnd(network, tunnel, end)))
      .sort() as [Id, Id];
    if (a !== b) pairs.set(`${a} ${b}`, [a, b]);
  }
  const joined = [...new Set([...pairs.values()].flat())].sort();
  const common = { joined, tunnels };
  if (pairs.size === 0) {
    const places = Object.keys(design.segments[segment]?.sites ?? {}).sort();
    const partners = places.length === 1 ? places : [];
    return { kind: 'alone', ...common, partners, choices: places };
  }
  if (
    joined.length > 2 &&
    pairs.size === (joined.length * (joined.length - 1)) / 2 &&
    areIsolated(network, tunnels)
  )
    return { kind: 'mesh', ...common, partners: joined, choices: [] };
  const hub = joined.find((site) => [...pairs.values()].every((pair) => pair.includes(site)));
  if (pairs.size > 1 && hub !== undefined)
    return { kind: 'hub', ...common, partners: [hub], choices: joined };
  const likely = pairs.size === 1 ? busier(network, joined) : undefined;
  return {
    kind: pairs.size === 1 ? 'pair' : 'other',
    ...common,
    partners: likely === undefined ? [] : [likely],
    choices: joined,
  };
};
