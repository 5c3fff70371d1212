import type { Protocol } from '../model/intent.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { segmentsThrough } from './multicast-dropped-on-path.ts';
import { siteNameOf } from './places.ts';
import { counted, listed } from './wording.ts';

// IEEE 802.1Q-2022 table 8-1 (read in a driver's comment that quotes it): a bridge passes on none of 01-80-C2-00-00-00 to 0f.
const reserved: readonly { readonly protocol: Protocol; readonly octet: string; readonly name: string }[] = [
  { protocol: 'lacp', octet: '02', name: 'LACP' },
  { protocol: 'eapol', octet: '03', name: '802.1X' },
  { protocol: 'spanning-tree', octet: '00', name: 'Spanning tree' },
  { protocol: 'lldp', octet: '0e', name: 'LLDP' },
];

/** Whether a forwarder keeps frames to the group to itself. Of a cross-connect that is known only where its profile says so. */
const stops = ({ design }: Network, forwarder: Id, octet: string): boolean => {
  const { kind, device, spanningTree } = entryOf(design.forwarders, forwarder);
  const { profile, settings } = entryOf(design.devices, device);
  const treatment =
    profile === undefined ? undefined : entryOf(design.profiles, profile).reservedGroups?.[octet];
  // A bridge that takes part in the tree itself joins both sides' trees into one.
  if (octet === '00' && (spanningTree ?? settings?.spanningTree)?.mode === 'on') return false;
  return treatment === undefined ? kind === 'bridge' : treatment !== 'pass';
};

interface Stopped {
  readonly segment: Id;
  readonly protocols: readonly (typeof reserved)[number][];
  readonly forwarders: readonly Id[];
}

const stoppedNeeds = (network: Network): readonly Stopped[] => {
  const { design } = network;
  const bySegment = new Map<Id, Id[]>();
  const needed = new Map(
    Object.entries(design.segments).flatMap(([id, { protocols }]) => {
      const asked = reserved.filter(({ protocol }) => protocols?.includes(protocol));
      return asked.length === 0 ? [] : [[id, asked] as const];
    }),
  );
  if (needed.size === 0) return [];
  for (const forwarder of network.circuitsByForwarder.keys())
    for (const segment of segmentsThrough(network, forwarder)) {
      const list = bySegment.get(segment);
      if (list !== undefined) list.push(forwarder);
      else if (needed.has(segment)) bySegment.set(segment, [forwarder]);
    }
  return [...bySegment].flatMap(([segment, list]): readonly Stopped[] => {
    const protocols = needed
      .get(segment)!
      .filter(({ octet }) => list.some((id) => stops(network, id, octet)));
    const forwarders = list.filter((id) => protocols.some(({ octet }) => stops(network, id, octet))).sort();
    return protocols.length === 0 ? [] : [{ segment, protocols, forwarders }];
  });
};

export const reservedGroupNotPassed = defineRule({
  id: 'reserved-group-not-passed',
  title: 'Protocols between neighbours are not expected across bridges',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'LACP, 802.1X, LLDP and spanning tree go to group addresses that every bridge keeps to itself: they are meant for the neighbour on the cable. Only a one-to-one cross-connect whose equipment passes them carries them on.',
  seen: 'Aggregates across the overlay never form, hosts are never authenticated, neighbours shown are the local gateway’s; plain traffic works.',
  sources: [{ document: 'IEEE 802.1Q', clause: 'section 8.6.3' }],
  messages: {
    stopped: {
      words: 'reserved group stopped',
      sentence: (v: {
        readonly protocols: string;
        readonly segment: string;
        readonly where: string;
        readonly verb: string;
      }) => `${v.protocols} of segment ${v.segment} ${v.verb} at ${v.where}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return stoppedNeeds(network).map(({ segment, protocols, forwarders }) => {
      const [first] = forwarders;
      const { name, device } = entryOf(design.forwarders, first!);
      const ref = { collection: 'segments' as const, id: segment };
      const isMild = protocols.every(({ protocol }) => protocol === 'lldp');
      return {
        message: 'stopped',
        values: {
          protocols: listed(protocols.map((each) => each.name)),
          verb: protocols.length === 1 ? 'ends' : 'end',
          segment: entryOf(design.segments, segment).letter,
          where:
            forwarders.length === 1
              ? `${name} at ${siteNameOf(design, device)}`
              : counted(forwarders.length, 'forwarder', 'forwarders'),
        },
        elements: [ref, ...forwarders.map((id) => ({ collection: 'forwarders' as const, id }))],
        identity: [segment],
        properties: [{ ref, path: ['protocols'] }],
        basis: [...protocols.map(({ protocol }) => protocol), ...forwarders],
        ...(isMild
          ? {
              severity: 'advisory' as const,
              severityReason: 'Neighbours that are shown locally are usually what is wanted.',
            }
          : {}),
      };
    });
  },
  fixes: (fault, network) => {
    const found = stoppedNeeds(network).find(({ segment }) => segment === fault.identity?.[0]);
    if (found === undefined) return [];
    const gone = found.protocols.map(({ protocol }) => protocol);
    const { protocols = [], name } = entryOf(network.design.segments, found.segment);
    return [
      {
        id: 'drop-need',
        label: `Don’t promise ${fault.values.protocols}`,
        sentence: `Takes ${fault.values.protocols} off what ${name} must carry; it is set up at each site for itself.`,
        patch: {
          segments: { [found.segment]: { protocols: protocols.filter((each) => !gone.includes(each)) } },
        },
      },
    ];
  },
});
