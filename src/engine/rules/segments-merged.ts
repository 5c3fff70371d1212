import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import { accessVlan, circuitRemovesTag, isTrunk } from '../network/frame-tags.ts';
import type { CircuitAt, Network, PortGroup } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf, segmentsAt } from '../network/network.ts';
import { removalPatch } from '../flood/removal-patch.ts';
import { circuitFacts, segmentPathFacts, segmentsOfCircuit } from './carried-segments.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { perEntry, perFacts } from './facts.ts';
import type { Fix } from './finding.ts';
import { siteNameOf, tunnelPlaces } from './places.ts';
import { portLabel, portRef } from './port-label.ts';
import { keepsTags, tagModeOf } from './tag-mode.ts';
import { listed } from './wording.ts';

interface Words {
  readonly segments: string;
}

const messages = {
  vlan: {
    words: 'VLAN used twice',
    sentence: (v: Words & { readonly vlan: number; readonly site: string }) =>
      `Segments ${v.segments} are both VLAN ${v.vlan} at ${v.site}`,
  },
  native: {
    words: 'native VLANs differ',
    sentence: (
      v: Words & { readonly a: number; readonly b: number; readonly placeA: string; readonly placeB: string },
    ) => `Untagged is VLAN ${v.a} at ${v.placeA}, ${v.b} at ${v.placeB}`,
    why: 'What leaves one end untagged in its native VLAN comes in at the other in another one: the two VLANs, and the segments in them, are one network.',
  },
  forwarder: {
    words: 'segments merged',
    sentence: (v: Words & { readonly forwarder: string; readonly place: string }) =>
      `${v.forwarder} at ${v.place} merges segments ${v.segments}`,
  },
  tunnel: {
    words: 'segments merged',
    sentence: (v: Words & { readonly tunnel: string }) => `${v.tunnel} merges segments ${v.segments}`,
    why: 'The forwarders at the tunnel’s ends serve different segments: what leaves as the one arrives as the other.',
  },
  tagged: {
    words: 'segments merged',
    sentence: (v: Words & { readonly tunnel: string; readonly vlan: number }) =>
      `Tag ${v.vlan} in ${v.tunnel} is segment ${v.segments}`,
    why: 'The tunnel keeps tags, and one tag means another segment at each end: what leaves as the one arrives as the other.',
  },
};
type Found = Fault<typeof messages>;

const letters = ({ design }: Network, segments: Iterable<Id>): readonly string[] =>
  [...segments]
    .map((id) => entryOf(design.segments, id).letter)
    .sort((a, b) => a.length - b.length || (a < b ? -1 : 1));

const segmentRefs = (segments: readonly Id[]): readonly ElementRef[] =>
  segments.map((id) => ({ collection: 'segments', id }));

const byVlan = perFacts(['addressing', 'sites'], (network): readonly Found[] =>
  [...network.segmentsBySiteVlan]
    .filter(([, segments]) => segments.length > 1)
    .map(([key, segments]): Found => {
      const [site, vlan] = key.split('/') as [Id, string];
      return {
        message: 'vlan',
        values: {
          segments: listed(letters(network, segments)),
          vlan: Number(vlan),
          site: entryOf(network.design.sites, site).name,
        },
        elements: [{ collection: 'sites', id: site }, ...segmentRefs(segments)],
        identity: ['vlan', site, ...segments],
        properties: segmentRefs(segments).map((ref) => ({ ref, path: ['sites', site, 'vlan'] })),
        basis: [Number(vlan)],
      };
    }),
);

/** The VLAN that a switch gives to untagged frames of the port. */
const untaggedVlan = ({ design }: Network, { device, port }: PortGroup): number | undefined => {
  const { kind, ports } = entryOf(design.devices, device);
  const entry = ports[port];
  if (kind !== 'switch' || entry === undefined) return undefined;
  return isTrunk(entry) ? entry.nativeVlan : accessVlan(entry);
};

const byNative = perFacts(['devices', 'cables', 'addressing'], (network): readonly Found[] =>
  network.bundles.flatMap(({ a, b, alive }): readonly Found[] => {
    const [vlanA, vlanB] = [untaggedVlan(network, a), untaggedVlan(network, b)];
    const [cable] = alive;
    if (cable === undefined || vlanA === undefined || vlanB === undefined || vlanA === vlanB) return [];
    const site = (group: PortGroup): Id => entryOf(network.design.devices, group.device).site;
    const [atA, atB] = [segmentsAt(network, site(a), vlanA), segmentsAt(network, site(b), vlanB)];
    if (atA.length === 0 || atB.length === 0 || atA.some((id) => atB.includes(id))) return [];
    const fieldOf = ({ device, port }: PortGroup): string =>
      isTrunk(entryOf(network.design.devices, device).ports[port]!) ? 'nativeVlan' : 'vlan';
    return [
      {
        message: 'native',
        values: {
          segments: listed(letters(network, [...atA, ...atB])),
          a: vlanA,
          b: vlanB,
          placeA: entryOf(network.design.devices, a.device).name,
          placeB: entryOf(network.design.devices, b.device).name,
        },
        elements: [{ collection: 'links', id: cable }, portRef(a.device, a.port), portRef(b.device, b.port)],
        identity: ['native', cable],
        properties: [a, b].map((group) => ({
          ref: portRef(group.device, group.port),
          path: [fieldOf(group)],
        })),
        basis: [vlanA, vlanB],
        sources: ['common practice, no source'],
      },
    ];
  }),
);

interface Brought {
  readonly at: CircuitAt;
  readonly segments: readonly Id[];
}

/** Circuits of a forwarder whose frames are untagged inside, with the segments that they bring in. */
const untaggedInside = perEntry(
  'forwarders',
  ['gateways', 'addressing'],
  (network, forwarder): readonly Brought[] =>
    network.circuitsByForwarder.get(forwarder)!.flatMap((at): readonly Brought[] => {
      const { circuit } = at;
      if (circuit.kind !== 'port' || (circuit.vlans !== 'untagged' && !circuitRemovesTag(circuit))) return [];
      const segments = segmentsOfCircuit(network, at.device, circuit);
      return segments.length === 0 ? [] : [{ at, segments }];
    }),
);

const untaggedSegments = perEntry(
  'forwarders',
  ['gateways', 'addressing'],
  (network, forwarder): readonly Id[] => [
    ...new Set(untaggedInside(network, forwarder).flatMap(({ segments }) => segments)),
  ],
);

const isIsolated = (one: CircuitAt, other: CircuitAt): boolean =>
  one.circuit.isolation !== undefined && one.circuit.isolation === other.circuit.isolation;

const byForwarder = perFacts([...circuitFacts, 'sites'], (network): readonly Found[] =>
  [...network.circuitsByForwarder.keys()].flatMap((forwarder): readonly Found[] => {
    const inside = untaggedInside(network, forwarder);
    const joined = inside.filter((one) =>
      inside.some(
        (other) =>
          other !== one &&
          !isIsolated(one.at, other.at) &&
          !other.segments.some((id) => one.segments.includes(id)),
      ),
    );
    if (joined.length === 0) return [];
    const segments = [...new Set(joined.flatMap((one) => one.segments))].sort();
    const ref: ElementRef = { collection: 'forwarders', id: forwarder };
    const { name, device } = entryOf(network.design.forwarders, forwarder);
    return [
      {
        message: 'forwarder',
        values: {
          segments: listed(letters(network, segments)),
          forwarder: name,
          place: siteNameOf(network.design, device),
        },
        elements: [ref, ...segmentRefs(segments)],
        identity: ['forwarder', forwarder],
        properties: joined.map(({ at }) => ({ ref, path: ['circuits', at.id, 'vlans'] })),
        basis: segments,
      },
    ];
  }),
);

/** Forwarders that hold the tunnel at one of its ends. */
const holders = (network: Network, tunnel: Id, end: 'a' | 'b'): readonly CircuitAt[] => {
  const device = deviceOfTunnelEnd(network, entryOf(network.design.tunnels, tunnel), end);
  return (network.circuitsByTunnel.get(tunnel) ?? []).filter((at) => at.device === device);
};

/** Segments whose frames are untagged inside the forwarders of one end. */
const untaggedAt = (network: Network, tunnel: Id, end: 'a' | 'b'): readonly Id[] => {
  const [first, ...others] = holders(network, tunnel, end);
  const own = first === undefined ? [] : untaggedSegments(network, first.forwarder);
  return others.length === 0
    ? own
    : [...new Set([...own, ...others.flatMap(({ forwarder }) => untaggedSegments(network, forwarder))])];
};

/** Segments by the tag that they keep inside the forwarders of one end. */
const keptTags = (network: Network, tunnel: Id, end: 'a' | 'b'): ReadonlyMap<number, Id> => {
  const kept = new Map<number, Id>();
  for (const { forwarder, device } of holders(network, tunnel, end)) {
    const { site } = entryOf(network.design.devices, device);
    for (const { circuit } of network.circuitsByForwarder.get(forwarder) ?? [])
      if (circuit.kind === 'port' && keepsTags(circuit))
        for (const segment of segmentsOfCircuit(network, device, circuit)) {
          const vlan = entryOf(network.design.segments, segment).sites[site]?.vlan;
          if (vlan !== undefined) kept.set(circuit.translate?.[String(vlan)] ?? vlan, segment);
        }
  }
  return kept;
};

/** What tunnels would merge, were they all up. */
const byTunnel = perFacts([...circuitFacts, 'tunnels', 'endpoints', 'sites'], (network): readonly Found[] =>
  network.tunnelIds.flatMap((tunnel): readonly Found[] => {
    const { design } = network;
    const entry = entryOf(design.tunnels, tunnel);
    const ref: ElementRef = { collection: 'tunnels', id: tunnel };
    const [atA, atB] = [untaggedAt(network, tunnel, 'a'), untaggedAt(network, tunnel, 'b')];
    if (atA.length > 0 && atB.length > 0 && !atA.some((id) => atB.includes(id))) {
      return [
        {
          message: 'tunnel',
          values: {
            segments: listed(letters(network, [...atA, ...atB])),
            tunnel: entry.name,
          },
          elements: [ref, ...segmentRefs([...atA, ...atB].sort())],
          identity: ['tunnel', tunnel],
          basis: [...atA, ...atB].sort(),
        },
      ];
    }
    const isKept = ends.every(
      (end) => tagModeOf(network, entry, end, deviceOfTunnelEnd(network, entry, end)) !== 'strip',
    );
    if (!isKept) return [];
    const [tagsA, tagsB] = [keptTags(network, tunnel, 'a'), keptTags(network, tunnel, 'b')];
    const crossed = [...tagsA.keys()]
      .filter((vlan) => tagsB.has(vlan) && tagsB.get(vlan) !== tagsA.get(vlan))
      .sort((a, b) => a - b);
    const [vlan] = crossed;
    if (vlan === undefined) return [];
    const places = tunnelPlaces(design, entry);
    const [segmentA, segmentB] = [tagsA.get(vlan)!, tagsB.get(vlan)!];
    return [
      {
        message: 'tagged',
        values: {
          segments: `${entryOf(design.segments, segmentA).letter} at ${places.a}, ${entryOf(design.segments, segmentB).letter} at ${places.b}`,
          tunnel: entry.name,
          vlan,
        },
        elements: [ref, ...segmentRefs([segmentA, segmentB].sort())],
        identity: ['tagged', tunnel],
        basis: crossed,
      },
    ];
  }),
);

const nativeFixes = (network: Network, fault: Found): readonly Fix[] => {
  const [, a, b] = fault.elements;
  if (fault.message !== 'native' || a?.port === undefined || b?.port === undefined) return [];
  const { values } = fault;
  return [
    { at: b, vlan: values.a },
    { at: a, vlan: values.b },
  ].map(({ at, vlan }) => {
    const port = entryOf(network.design.devices, at.id).ports[at.port!]!;
    const change: MergePatch = isTrunk(port) ? { nativeVlan: vlan } : { vlan };
    return {
      id: `set-${at.id}-${at.port!}`,
      label: `Set ${entryOf(network.design.devices, at.id).name} to ${vlan}`,
      sentence: `Puts untagged frames at ${portLabel(network.design, at.id, at.port!)} into VLAN ${vlan}.`,
      patch: { devices: { [at.id]: { ports: { [at.port!]: change } } } },
    };
  });
};

/** Takes one of the circuits out of the forwarder that merges them. */
const circuitFixes = (network: Network, forwarder: Id): readonly Fix[] => {
  const { name, circuits } = entryOf(network.design.forwarders, forwarder);
  return untaggedInside(network, forwarder).flatMap(({ at, segments }): readonly Fix[] => {
    const { letter } = entryOf(network.design.segments, segments[0]!);
    return Object.keys(circuits).length < 2
      ? []
      : [
          {
            id: `drop-${at.id}`,
            label: `Take ${letter} out of ${name}`,
            sentence: `Takes the circuit of segment ${letter} out of ${name}; give it a forwarder of its own.`,
            patch: { forwarders: { [forwarder]: { circuits: { [at.id]: null } } } },
          },
        ];
  });
};

export const segmentsMerged = defineRule({
  id: 'segments-merged',
  title: 'Frames of one segment never get into another',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'Two segments become one network: hosts hear the broadcasts, the DHCP servers and the gateways of the other, and whatever kept the two apart is passed by.',
  seen: 'Hosts get addresses of the wrong subnet, and address conflicts are logged at sites that share nothing.',
  sources: [{ document: 'RFC 8365', clause: 'section 5.1' }, 'common practice, no source'],
  messages,
  check: (network): readonly Found[] => [
    ...byVlan(network),
    ...byNative(network),
    ...byForwarder(network),
    ...byTunnel(network).filter(
      ({ elements: [tunnel] }) => tunnelStates(network).get(tunnel!.id)?.up === true,
    ),
  ],
  fixes: (fault, network) => {
    const [first] = fault.elements;
    switch (fault.message) {
      case 'native':
        return nativeFixes(network, fault);
      case 'forwarder':
        return circuitFixes(network, first!.id);
      case 'tunnel':
        return [
          {
            id: 'remove-tunnel',
            label: `Remove ${fault.values.tunnel}`,
            sentence: `Removes ${fault.values.tunnel} with its circuits at both ends.`,
            patch: removalPatch(network, { tunnels: [first!.id] }),
          },
        ];
      default:
        return [];
    }
  },
});
