import { findStorms } from '../flood/find-storms.ts';
import type { FloodGraph } from '../flood/flood-graph.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import { classBit } from '../flood/frame-classes.ts';
import { isolationCure } from '../flood/isolation-cure.ts';
import { reach, startsOf, walk } from '../flood/reach.ts';
import { removalPatch } from '../flood/removal-patch.ts';
import { segmentReaches } from '../flood/segment-nodes.ts';
import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf, otherEnd } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { standbyFix } from './standby-fix.ts';
import { cableName } from './storm-cuts.ts';
import { counted, countWord, listed } from './wording.ts';

/** Tells which segments' ways form no tree: in a tree nothing can arrive twice, and most segments need no closer look. */
const meetingAgain = (graph: FloodGraph): ((nodes: readonly number[]) => boolean) => {
  const elements = graph.network.firstTunnelElement + graph.network.tunnelIds.length;
  const ends = new Int32Array(2 * elements);
  const parent = new Int32Array(graph.forwarding.places.all.length);
  const rootOf = (place: number): number => {
    let at = place;
    while (parent[at] !== at) at = parent[at] = parent[parent[at]!]!;
    return at;
  };
  // A crossing into which two places send, as both members of an active pair do into one tunnel.
  const sentFrom = new Int32Array(graph.nodeCount).fill(-1);
  const isSentTwice = new Uint8Array(graph.nodeCount);
  for (let node = 0; node < graph.nodeCount; node += 1) {
    const place = graph.into[node]!;
    for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1) {
      const target = graph.edgeTo[edge]!;
      if (sentFrom[target]! >= 0 && sentFrom[target] !== place) isSentTwice[target] = 1;
      sentFrom[target] = place;
    }
  }
  return (nodes) => {
    for (const node of nodes) {
      if (isSentTwice[node] === 1) return true;
      const place = graph.into[node]!;
      ends[2 * graph.element[node]!] = ends[2 * graph.element[node]! + 1] = -1;
      if (place >= 0) parent[place] = place;
    }
    for (const node of nodes) {
      const place = graph.into[node]!;
      const at = 2 * graph.element[node]! + graph.direction[node]!;
      if (place < 0) continue;
      // With two tags on one wire there are two ways along it.
      if (ends[at]! >= 0) return true;
      ends[at] = place;
      const back = ends[at ^ 1]!;
      if (back < 0) continue;
      const [a, b] = [rootOf(place), rootOf(back)];
      if (a === b) return true;
      parent[a] = b;
    }
    return false;
  };
};

/** One host of those that are plugged into the same device: they flood alike. */
const senders = (network: Network, segment: Id): readonly Id[] => {
  const byDevice = new Map<string, Id>();
  for (const host of network.hostsBySegment.get(segment) ?? []) {
    const [at] = network.cablesByDevice.get(host) ?? [];
    const cable = at === undefined ? undefined : entryOf(network.design.links, at.cable);
    const far = cable?.kind === 'cable' ? cable[otherEnd(at!.end)].device : host;
    if (!byDevice.has(far)) byDevice.set(far, host);
  }
  return [...byDevice.values()];
};

/** Crossings that lie on a way from the sender to the receiver, each after those before it, with how many ways take it. */
const waysThrough = (network: Network, sender: Id, receiver: Id) => {
  const graph = floodGraph(network);
  const starts = new Set(startsOf(network, graph, { host: sender }));
  const { order } = walk(graph, [...starts], classBit('arp'), undefined);
  const next = new Map<number, readonly number[]>();
  const before = new Map<number, number[]>(order.map((node) => [node, []]));
  for (const node of order) {
    const after = new Array<number>();
    for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1)
      if ((graph.edgeClasses[edge]! & classBit('arp')) !== 0) after.push(graph.edgeTo[edge]!);
    next.set(node, after);
    for (const target of after) before.get(target)!.push(node);
  }
  const isEnd = (node: number): boolean =>
    graph.forwarding.places.all[graph.into[node]!]?.device === receiver;
  const onWay = new Set(order.filter(isEnd));
  for (const node of onWay) for (const earlier of before.get(node)!) onWay.add(earlier);
  const open = new Map([...onWay].map((node) => [node, before.get(node)!.length]));
  const sorted = [...onWay].filter((node) => open.get(node) === 0);
  // No storm is in reach, so that every crossing's turn comes.
  for (const node of sorted)
    for (const target of next.get(node)!) {
      const left = (open.get(target) ?? 0) - 1;
      open.set(target, left);
      if (left === 0 && onWay.has(target)) sorted.push(target);
    }
  const waysTo = new Map<number, number>();
  for (const node of sorted)
    waysTo.set(
      node,
      before.get(node)!.reduce((sum, one) => sum + waysTo.get(one)!, starts.has(node) ? 1 : 0),
    );
  const waysFrom = new Map<number, number>();
  for (const node of [...sorted].reverse())
    waysFrom.set(
      node,
      next.get(node)!.reduce((sum, one) => sum + (waysFrom.get(one) ?? 0), isEnd(node) ? 1 : 0),
    );
  return new Map(sorted.map((node) => [node, waysTo.get(node)! * waysFrom.get(node)!]));
};

/** The tunnels and cables by which the ways from the sender to the receiver differ: those that not all of them take. */
const differingWays = (network: Network, sender: Id, receiver: Id, copies: number): readonly ElementRef[] => {
  const graph = floodGraph(network);
  const byElement = new Map<number, number>();
  for (const [node, ways] of waysThrough(network, sender, receiver)) {
    const element = graph.element[node]!;
    byElement.set(element, (byElement.get(element) ?? 0) + ways);
  }
  return [...byElement]
    .filter(([, ways]) => ways < copies)
    .map(([element]): ElementRef => {
      const bundle = network.bundles[element];
      return bundle === undefined
        ? { collection: 'tunnels', id: network.tunnelIds[element - network.firstTunnelElement]! }
        : { collection: 'links', id: bundle.cables[0]! };
    });
};

interface Doubled {
  readonly segments: readonly Id[];
  readonly sender: Id;
  readonly receiver: Id;
  readonly copies: number;
  /** In order of collection (tunnels first) and id. */
  readonly ways: readonly ElementRef[];
}

const keyOf = ({ collection, id }: ElementRef): string => `${collection === 'tunnels' ? 0 : 1} ${id}`;

const doubledIn = (network: Network, segment: Id): Doubled | undefined => {
  let first: Omit<Doubled, 'ways' | 'segments'> | undefined;
  const ways = new Map<string, ElementRef>();
  for (const sender of senders(network, segment))
    for (const { host, copies } of reach(network, { host: sender }).deliveries) {
      if (copies === 'endless' || copies < 2 || host === sender) continue;
      for (const ref of differingWays(network, sender, host, copies)) ways.set(keyOf(ref), ref);
      first ??= { sender, receiver: host, copies };
    }
  return first === undefined
    ? undefined
    : {
        ...first,
        segments: [segment],
        ways: [...ways].sort(([a], [b]) => (a < b ? -1 : 1)).map(([, r]) => r),
      };
};

/** What arrives twice without end being in sight: a storm is told of by itself. Segments on the same ways are one fault. */
const doubledBroadcasts = (network: Network): readonly Doubled[] => {
  const graph = floodGraph(network);
  const stormy = new Set(findStorms(graph).flatMap(({ segments }) => segments));
  const mayMeetAgain = meetingAgain(graph);
  const byWays = new Map<string, Doubled>();
  for (const { segment, nodes } of segmentReaches(graph)) {
    if (stormy.has(segment) || !mayMeetAgain(nodes)) continue;
    const found = doubledIn(network, segment);
    if (found === undefined) continue;
    const key = found.ways.map(keyOf).join(', ');
    const before = byWays.get(key);
    byWays.set(key, before === undefined ? found : { ...before, segments: [...before.segments, segment] });
  }
  return [...byWays.values()];
};

export const broadcastDeliveredTwice = defineRule({
  id: 'broadcast-delivered-twice',
  title: 'A broadcast reaches every host once',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'There are two ways for one frame, and what keeps them from being a loop (an isolation group at one side, say) doesn’t keep copies from arriving by both. Bridges learn a sender now on one way, now on the other.',
  seen: 'Every broadcast and multicast is received twice, the sender hears its own come back perhaps; duplicate replies to ping; addresses that move between two ports, with losses meanwhile.',
  sources: [
    { document: 'RFC 8365', clause: 'section 8.3.1' },
    { document: 'RFC 7432', clause: 'section 8.3' },
  ],
  messages: {
    twice: {
      words: 'delivered twice',
      sentence: (v: {
        readonly segments: string;
        readonly sender: string;
        readonly receiver: string;
        readonly copies: string;
      }) => `A broadcast in ${v.segments} from ${v.sender} reaches ${v.receiver} in ${v.copies} copies`,
    },
  },
  check: (network) => {
    const { design } = network;
    return doubledBroadcasts(network).map(({ segments, sender, receiver, copies, ways }) => {
      const letters = segments.map((id) => entryOf(design.segments, id).letter);
      return {
        message: 'twice' as const,
        values: {
          segments: `${letters.length === 1 ? 'segment' : 'segments'} ${listed(letters)}`,
          sender: entryOf(design.devices, sender).name,
          receiver: entryOf(design.devices, receiver).name,
          copies: countWord(copies),
        },
        elements: [...ways, ...segments.map((id): ElementRef => ({ collection: 'segments', id }))],
        identity: ways.map(({ id }) => id),
        basis: [...segments],
        properties: ways.flatMap(({ collection, id }) =>
          collection === 'tunnels'
            ? (network.circuitsByTunnel.get(id) ?? []).map((at) => ({
                ref: { collection: 'forwarders' as const, id: at.forwarder },
                path: ['circuits', at.id, 'isolation'],
              }))
            : [],
        ),
      };
    });
  },
  fixes: (fault, network) => {
    const key = fault.identity?.join(' ');
    const found = doubledBroadcasts(network).find(({ ways }) => ways.map(({ id }) => id).join(' ') === key);
    if (found === undefined) return [];
    const idsOf = (collection: ElementRef['collection']): readonly Id[] =>
      found.ways.flatMap((ref) => (ref.collection === collection ? [ref.id] : []));
    const [tunnels, cables] = [idsOf('tunnels'), idsOf('links')];
    const cure = isolationCure(network, { tunnels, cables: [] });
    const isolation: readonly Fix[] =
      cure === undefined
        ? []
        : [
            {
              id: 'isolate',
              label: 'Isolate the tunnels everywhere',
              sentence: `Puts the ${counted(tunnels.length, 'tunnel', 'tunnels')} into isolation group ${cure.group} at every site, so that no gateway passes a frame from one to another.`,
              patch: cure.patch,
            },
          ];
    const members = found.ways.flatMap(({ collection, id }): readonly Id[] => {
      const link = collection === 'links' ? entryOf(network.design.links, id) : undefined;
      return link?.kind === 'cable' ? [link.a.device, link.b.device] : [];
    });
    const removals: readonly { readonly name: string; readonly patch: Fix['patch'] }[] = [
      ...tunnels.map((id) => ({
        name: entryOf(network.design.tunnels, id).name,
        patch: removalPatch(network, { tunnels: [id] }),
      })),
      ...cables.map((id) => ({
        name: cableName(network, id),
        patch: removalPatch(network, { cables: [id] }),
      })),
    ];
    // Each is tried before it is offered, at the price of a run of all checks.
    const triedAtMost = 4;
    return [
      ...standbyFix(network, members),
      ...isolation,
      ...removals.slice(0, triedAtMost).map(({ name, patch }, i) => ({
        id: `remove-${i}`,
        label: `Remove ${name}`,
        sentence: `Removes ${name}, so that one way is left.`,
        patch,
      })),
    ];
  },
});
