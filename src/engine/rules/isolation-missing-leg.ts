import type { Parting, SegmentReach } from '../flood/segment-reach.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, otherEnd } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import type { Leg } from './missing-leg.ts';
import { missingLegFix } from './missing-leg.ts';
import { isolatesTunnels, partedSegments } from './parted-segments.ts';
import { placesOf, siteNameOf } from './places.ts';

/** Two sites of a segment that meet only at a forwarder which keeps their tunnels apart. */
interface MissingLeg {
  readonly kind: 'leg';
  readonly segment: Id;
  readonly forwarder: Id;
  readonly group: string;
  readonly a: Leg;
  readonly b: Leg;
}
/** A forwarder that keeps all its tunnels apart, though its far ends have no other. */
interface SilentHub {
  readonly kind: 'hub';
  readonly segment: Id;
  readonly forwarder: Id;
  readonly group: string;
  readonly legs: readonly Leg[];
}

const isolatedLegs = (network: Network, forwarder: Id, group: string): readonly Leg[] =>
  (network.circuitsByForwarder.get(forwarder) ?? []).flatMap(({ circuit, device }) => {
    if (circuit.kind !== 'tunnel' || circuit.isolation !== group) return [];
    const tunnel = entryOf(network.design.tunnels, circuit.tunnel);
    const here = deviceOfTunnelEnd(network, tunnel, 'a') === device ? ('a' as const) : ('b' as const);
    return [{ tunnel: circuit.tunnel, end: otherEnd(here) }];
  });

const deviceOf = (network: Network, { tunnel, end }: Leg): Id =>
  deviceOfTunnelEnd(network, entryOf(network.design.tunnels, tunnel), end);

const siteOf = (network: Network, leg: Leg): Id =>
  entryOf(network.design.devices, deviceOf(network, leg)).site;

const pairKey = (a: string, b: string): string => [a, b].sort().join(' ');

const legOf = (
  network: Network,
  reach: SegmentReach,
  { barrier, from, to, path }: Parting,
): MissingLeg | undefined => {
  if (barrier.code !== 'isolation' || !isolatesTunnels(network, barrier.forwarder, barrier.group))
    return undefined;
  const legs = isolatedLegs(network, barrier.forwarder, barrier.group);
  const entered = path.at(-1)?.id;
  const a = legs.find(({ tunnel }) => tunnel === entered);
  const sitesOfGroup = (group: number): readonly Id[] => reach.groups[group]!.points.map(({ site }) => site);
  const b = legs.find((leg) => leg !== a && sitesOfGroup(to).includes(siteOf(network, leg)));
  if (a === undefined || b === undefined || !sitesOfGroup(from).includes(siteOf(network, a)))
    return undefined;
  return { kind: 'leg', segment: reach.segment, forwarder: barrier.forwarder, group: barrier.group, a, b };
};

/** Each two sites once, and a hub instead where all far ends of a group lack each other. */
const faultsOf = (network: Network): readonly (MissingLeg | SilentHub)[] =>
  partedSegments(network).flatMap((reach) => {
    const legs = new Map<string, MissingLeg>();
    for (const parting of reach.partings) {
      const leg = legOf(network, reach, parting);
      if (leg === undefined) continue;
      const key = pairKey(deviceOf(network, leg.a), deviceOf(network, leg.b));
      if (!legs.has(key)) legs.set(key, leg);
    }
    const hubs = new Map<string, SilentHub>();
    for (const { forwarder, group, segment } of legs.values()) {
      const spokes = isolatedLegs(network, forwarder, group);
      const devices = spokes.map((leg) => deviceOf(network, leg));
      const isHub = devices.every((a, i) => devices.slice(i + 1).every((b) => legs.has(pairKey(a, b))));
      if (isHub) hubs.set(`${forwarder} ${group}`, { kind: 'hub', segment, forwarder, group, legs: spokes });
    }
    const ofHubs = new Set(
      [...hubs.values()].flatMap(({ legs: spokes }) =>
        spokes.flatMap((x) => spokes.map((y) => pairKey(deviceOf(network, x), deviceOf(network, y)))),
      ),
    );
    return [...hubs.values(), ...[...legs].filter(([key]) => !ofHubs.has(key)).map(([, leg]) => leg)];
  });

const identityOf = (network: Network, fault: MissingLeg | SilentHub): readonly string[] =>
  fault.kind === 'hub'
    ? [fault.segment, fault.forwarder, fault.group]
    : [fault.segment, ...[deviceOf(network, fault.a), deviceOf(network, fault.b)].sort()];

/** Takes the group off every tunnel of the forwarder, so that it passes frames from one to another. */
const relayFix = (network: Network, { forwarder, group }: SilentHub): Fix => {
  const { design } = network;
  const { circuits, device } = entryOf(design.forwarders, forwarder);
  const freed: MergePatch = Object.fromEntries(
    Object.entries(circuits)
      .filter(([, circuit]) => circuit.isolation === group)
      .map(([id]) => [id, { isolation: null }]),
  );
  const name = entryOf(design.devices, device).name;
  return {
    id: 'relay',
    label: `Let ${name} relay`,
    sentence: `Takes the tunnels at ${siteNameOf(design, device)} out of isolation group ${group}, so that ${name} passes frames from one site to another.`,
    patch: { forwarders: { [forwarder]: { circuits: freed } } },
  };
};

const circuitFields = (network: Network, { forwarder, group }: MissingLeg | SilentHub) =>
  (network.circuitsByForwarder.get(forwarder) ?? [])
    .filter(({ circuit }) => circuit.isolation === group)
    .map(({ id }) => ({
      ref: { collection: 'forwarders' as const, id: forwarder },
      path: ['circuits', id, 'isolation'],
    }));

const hubFault = (network: Network, hub: SilentHub) => {
  const { design } = network;
  const { device } = entryOf(design.forwarders, hub.forwarder);
  return {
    message: 'hub' as const,
    values: {
      hub: siteNameOf(design, device),
      segment: entryOf(design.segments, hub.segment).letter,
    },
    elements: [
      { collection: 'devices' as const, id: device },
      { collection: 'forwarders' as const, id: hub.forwarder },
      ...hub.legs.map(({ tunnel }) => ({ collection: 'tunnels' as const, id: tunnel })),
    ],
    identity: identityOf(network, hub),
    properties: circuitFields(network, hub),
    basis: hub.legs.map(({ tunnel }) => tunnel),
  };
};

const legFault = (network: Network, leg: MissingLeg) => {
  const { design } = network;
  const { device } = entryOf(design.forwarders, leg.forwarder);
  const [a, b] = [deviceOf(network, leg.a), deviceOf(network, leg.b)];
  const places = placesOf(design, a, b);
  return {
    message: 'leg' as const,
    values: {
      placeA: places.a,
      placeB: places.b,
      segment: entryOf(design.segments, leg.segment).letter,
    },
    elements: [a, b, device].map((id) => ({ collection: 'devices' as const, id })),
    identity: identityOf(network, leg),
    properties: circuitFields(network, leg),
    basis: [leg.a.tunnel, leg.b.tunnel],
  };
};

export const isolationMissingLeg = defineRule({
  id: 'isolation-missing-leg',
  title: 'Sites whose tunnels a gateway keeps apart have a tunnel of their own',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'Where tunnels are in one isolation group no gateway passes a frame from one to another. Two sites without a tunnel of their own then never hear each other, though both hear everybody else.',
  seen: 'Two sites reach a third and not each other. Every tunnel is up, and nothing is logged.',
  sources: [
    { document: 'RFC 4762', clause: 'section 4.4' },
    { document: 'RFC 4664', clause: 'section 3.4.1' },
  ],
  messages: {
    leg: {
      words: 'tunnel missing',
      sentence: (v: { readonly placeA: string; readonly placeB: string; readonly segment: string }) =>
        `${v.placeA} and ${v.placeB} have no tunnel for segment ${v.segment}`,
    },
    hub: {
      words: 'hub isolates',
      sentence: (v: { readonly hub: string; readonly segment: string }) =>
        `${v.hub} keeps its tunnels of segment ${v.segment} apart`,
    },
  },
  check: (network) =>
    faultsOf(network).map((fault) =>
      fault.kind === 'hub' ? hubFault(network, fault) : legFault(network, fault),
    ),
  fixes: (found, network, context) => {
    const fault = faultsOf(network).find(
      (other) => identityOf(network, other).join(' ') === found.identity?.join(' '),
    );
    if (fault === undefined) return [];
    if (fault.kind === 'leg') {
      const leg = missingLegFix(network, fault.a, fault.b, context);
      return leg === undefined ? [] : [leg];
    }
    const [a, b, ...more] = fault.legs;
    const leg =
      a === undefined || b === undefined || more.length > 0
        ? undefined
        : missingLegFix(network, a, b, context);
    return [relayFix(network, fault), ...(leg === undefined ? [] : [leg])];
  },
});
