import type { Id } from '../model/scalars.ts';
import type { Path } from '../network/association-path.ts';
import { landingFamilies, landingOf, landingSpeaks, tunnelPath } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf } from '../network/network.ts';
import { associationEndOf } from '../network/selectors-cover.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { perEntry } from './facts.ts';
import { lowerSegment } from './packet-size-fixes.ts';
import { capacitiesOf, innerTagsOf, needOf, type Tight } from './segment-capacity.ts';
import { capacityOnPath } from './tunnel-capacity.ts';

/** Landings that the tunnel's end names, the first included; none where it names none and every one will do. */
const namedLandings = (network: Network, id: Id, end: End): readonly Id[] => {
  const { design } = network;
  const tunnel = entryOf(design.tunnels, id);
  const association =
    tunnel.association === undefined ? undefined : entryOf(design.associations, tunnel.association);
  const side = association === undefined ? undefined : associationEndOf(network, tunnel, association, end);
  const via =
    association === undefined ? tunnel[end].via : side === undefined ? undefined : association[side].via;
  return Object.values(via ?? {}).map(({ landing }) => landing);
};

const mayUse = (network: Network, id: Id, end: End): readonly Id[] => {
  const device = deviceOfTunnelEnd(network, entryOf(network.design.tunnels, id), end);
  const named = namedLandings(network, id, end);
  return (named.length > 0 ? named : (network.landingsByDevice.get(device) ?? [])).filter(
    (landing) =>
      network.design.links[landing]?.kind === 'landing' &&
      landingOf(network, landing).device === device &&
      landingSpeaks(network, landing),
  );
};

/** The paths that a tunnel may turn to when its first one fails. */
export const otherPaths = perEntry(
  'tunnels',
  ['associations', 'endpoints', 'gateways', 'landings', 'carriers'],
  (network, id): readonly Extract<Path, { ok: true }>[] => {
    const [atA, atB] = [mayUse(network, id, 'a'), mayUse(network, id, 'b')];
    if (atA.length < 2 && atB.length < 2) return [];
    const first = tunnelPath(network, id);
    if (!first.ok) return [];
    return atA.flatMap((landingA) =>
      atB.flatMap((landingB): readonly Extract<Path, { ok: true }>[] => {
        const { transport } = landingOf(network, landingA);
        if (landingOf(network, landingB).transport !== transport) return [];
        if (landingA === first.landingA && landingB === first.landingB) return [];
        const family = landingFamilies(network, landingA).find((each) =>
          landingFamilies(network, landingB).includes(each),
        );
        return family === undefined ? [] : [{ ok: true, transport, landingA, landingB, family }];
      }),
    );
  },
);

interface Small extends Tight {
  readonly segment: Id;
  readonly transport: Id;
  readonly needBytes: number;
}

/** For each segment the narrowest path that one of its tunnels may turn to, where the paths in use are wide enough. */
const smallPaths = (network: Network): readonly Small[] => {
  const worst = new Map<Id, Small>();
  for (const [tunnel, segments] of tunnelSegments(network)) {
    const paths = segments.length === 0 ? [] : otherPaths(network, tunnel);
    for (const path of paths)
      for (const segment of segments) {
        const needBytes = needOf(network, segment)?.needBytes ?? 0;
        const capacity = capacityOnPath(network, tunnel, innerTagsOf(network, tunnel, segment), path);
        if (capacity === undefined || capacity.largestBytes >= needBytes) continue;
        if (capacity.largestBytes >= (worst.get(segment)?.largestBytes ?? Infinity)) continue;
        worst.set(segment, { ...capacity, tunnel, segment, transport: path.transport, needBytes });
      }
  }
  if (worst.size === 0) return [];
  const capacities = capacitiesOf(network);
  return [...worst.values()].filter(
    ({ segment, needBytes }) => (capacities.get(segment)?.[0]?.largestBytes ?? Infinity) >= needBytes,
  );
};

export const secondPathTooSmall = defineRule({
  id: 'second-path-too-small',
  title: 'Packets that fit the first path of a tunnel fit the others, too',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'Packet sizes were planned for the path in use. On the one that a tunnel turns to when that fails, full packets no longer fit, and hosts aren’t told.',
  seen: 'All is well until the failover; then pings still work, and transfers hang until the first path is back.',
  sources: [{ document: 'RFC 4459', clause: 'section 3.3' }],
  messages: {
    small: {
      words: 'second path small',
      sentence: (v: {
        readonly tunnel: string;
        readonly transport: string;
        readonly largestBytes: number;
        readonly needBytes: number;
      }) => `${v.tunnel} takes ${v.largestBytes} bytes over ${v.transport}, not ${v.needBytes}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return smallPaths(network).map(({ segment, tunnel, transport, largestBytes, needBytes }) => ({
      message: 'small',
      values: {
        tunnel: entryOf(design.tunnels, tunnel).name,
        transport: entryOf(design.transports, transport).name,
        largestBytes,
        needBytes,
      },
      elements: [
        { collection: 'tunnels' as const, id: tunnel },
        { collection: 'segments' as const, id: segment },
        { collection: 'transports' as const, id: transport },
      ],
      identity: [segment],
      properties: [{ ref: { collection: 'segments' as const, id: segment }, path: ['mtu'] }],
      basis: [largestBytes, needBytes, transport],
    }));
  },
  fixes: (fault, network) => {
    const small = smallPaths(network).filter(({ segment }) => segment === fault.identity?.[0]);
    return small.length === 0 ? [] : lowerSegment(network, small[0]!.segment, small);
  },
});
