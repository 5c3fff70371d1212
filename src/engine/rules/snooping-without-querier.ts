import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { circuitFacts, segmentPathFacts, segmentsByForwarder } from './carried-segments.ts';
import { perFacts } from './facts.ts';
import { defineRule, type Fault } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { siteNameOf } from './places.ts';
import { listed } from './wording.ts';

const messages = {
  none: {
    words: 'no querier',
    sentence: (v: { readonly segment: string }) => `Nobody asks for group members on segment ${v.segment}`,
  },
  oneSite: {
    words: 'querier far away',
    sentence: (v: { readonly segment: string; readonly place: string }) =>
      `Group members of segment ${v.segment} are asked from ${v.place} alone`,
    why: 'While the tunnel is down nobody asks at the other sites: after four minutes their bridges forget the groups and cut receivers off from senders beside them.',
    seen: 'A cut of the WAN stops the streams within a site as well, some minutes later.',
  },
};

interface Watched {
  readonly segment: Id;
  readonly forwarders: readonly Id[];
  readonly snooping: readonly Id[];
  readonly asking: readonly Id[];
}

const watchedSegments = perFacts([...circuitFacts, 'segments'], (network): readonly Watched[] => {
  const { design } = network;
  const bySegment = new Map<Id, Id[]>();
  for (const [forwarder, segments] of segmentsByForwarder(network))
    for (const segment of segments) bySegment.set(segment, [...(bySegment.get(segment) ?? []), forwarder]);
  return [...bySegment].flatMap(([segment, list]): readonly Watched[] => {
    const { protocols } = entryOf(design.segments, segment);
    const forwarders = [...list].sort();
    const snooping = forwarders.filter((id) => entryOf(design.forwarders, id).multicast === 'snoop');
    if (snooping.length === 0 || !(protocols?.includes('multicast') || protocols?.includes('igmp')))
      return [];
    const asking = forwarders.filter((id) => {
      const { querier, gateway, device } = entryOf(design.forwarders, id);
      // RFC 3376 section 6: a router that forwards multicast asks on each of its networks.
      const isRouter =
        entryOf(design.devices, device).settings?.multicastRouting === true &&
        gateway?.addresses !== undefined;
      return querier ?? isRouter;
    });
    return [{ segment, forwarders, snooping, asking }];
  });
});

const siteOf = ({ design }: Network, forwarder: Id): Id =>
  entryOf(design.devices, entryOf(design.forwarders, forwarder).device).site;

/** Snooping forwarders at sites where nobody asks. */
const leftAlone = (network: Network, { snooping, asking }: Watched): readonly Id[] => {
  const sites = new Set(asking.map((id) => siteOf(network, id)));
  return snooping.filter((id) => !sites.has(siteOf(network, id)));
};

export const snoopingWithoutQuerier = defineRule({
  id: 'snooping-without-querier',
  title: 'Where bridges watch group membership, somebody at the site asks for it',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'A bridge that watches who joined a group forgets it unless a querier asks again. Without one, streams start when a host joins and end after about 260 seconds.',
  seen: 'Streams work at first and stop after four minutes; joining anew brings them back for as long again.',
  sources: [
    { document: 'RFC 3376', clause: 'section 8.4' },
    { document: 'RFC 4541', clause: 'section 2.1' },
  ],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    return watchedSegments(network).flatMap((watched): readonly Fault<typeof messages>[] => {
      const { segment, forwarders, asking, snooping } = watched;
      const { letter } = entryOf(design.segments, segment);
      const alone = leftAlone(network, watched);
      if (alone.length === 0) return [];
      const refs = (asking.length === 0 ? snooping : alone).map((id) => ({
        collection: 'forwarders' as const,
        id,
      }));
      const body = {
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment],
        properties: refs.flatMap((ref) => [
          { ref, path: ['querier'] },
          { ref, path: ['multicast'] },
        ]),
        basis: [...alone],
      };
      if (asking.length > 0)
        return [
          {
            message: 'oneSite',
            values: {
              segment: letter,
              place: listed([
                ...new Set(asking.map((id) => siteNameOf(design, entryOf(design.forwarders, id).device))),
              ]),
            },
            ...body,
            sources: [{ document: 'RFC 3376', clause: 'section 6.6.2' }],
          },
        ];
      const isStated = forwarders.every((id) => entryOf(design.forwarders, id).querier === false);
      return [
        {
          message: 'none',
          values: { segment: letter },
          ...body,
          ...(isStated
            ? {}
            : {
                severity: 'advisory' as const,
                severityReason: 'Nothing is said of queriers; perhaps a router on the segment asks.',
              }),
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const watched = watchedSegments(network).find(({ segment }) => segment === fault.identity?.[0]);
    if (watched === undefined) return [];
    const { design } = network;
    const alone = leftAlone(network, watched);
    const bySite = new Map(alone.map((id) => [siteOf(network, id), id]));
    // RFC 4541 section 2.1.1: a query from 0.0.0.0 makes no querier, so it takes an address.
    const canAsk = [...bySite.values()].every(
      (id) => (entryOf(design.forwarders, id).gateway?.addresses ?? []).length > 0,
    );
    const ask: Fix = {
      id: 'ask',
      label: bySite.size === 1 ? 'Let it ask' : 'Let each site ask',
      sentence: `Lets the segment’s forwarder at ${listed([...bySite.keys()].map((id) => entryOf(design.sites, id).name))} ask for group members; of several that ask the lowest address wins.`,
      patch: { forwarders: Object.fromEntries([...bySite.values()].map((id) => [id, { querier: true }])) },
    };
    const flood: Fix = {
      id: 'flood',
      label: 'Stop watching',
      sentence:
        'Lets the forwarders copy every group to all circuits; nothing is forgotten, and more is carried.',
      patch: { forwarders: Object.fromEntries(alone.map((id) => [id, { multicast: 'flood' }])) },
    };
    return canAsk ? [ask, flood] : [flood];
  },
});
