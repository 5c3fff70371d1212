import type { Id } from '../model/scalars.ts';
import { untagged } from '../network/frame-tags.ts';
import { changesBetween } from '../network/changes.ts';
import type { Answer, Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';
import type { AttachmentPoint, PlacedPoint } from './attachment-points.ts';
import { attachmentPoints } from './attachment-points.ts';
import type { Barrier } from './barrier.ts';
import type { Ending } from './find-barrier.ts';
import { findBarriers } from './find-barrier.ts';
import type { FloodGraph } from './flood-graph.ts';
import { floodGraph } from './flood-graph.ts';
import type { FrameClass } from './frame-classes.ts';
import { classBit } from './frame-classes.ts';
import type { Place } from './places.ts';
import { devicesArrivedAt } from './places.ts';
import { startsOf, walk } from './reach.ts';
import { segmentReaches } from './segment-nodes.ts';
import type { FloodStep } from './storm.ts';
import { touchedDevices } from './touched-devices.ts';

/** Points whose broadcasts reach the same others and that are reached by the same. */
export interface PointGroup {
  readonly points: readonly AttachmentPoint[];
}
/** One direction in which two groups of a segment don't hear each other. */
export interface Parting {
  /** Indices into `groups`. */
  readonly from: number;
  readonly to: number;
  /** Where frames end, and why. */
  readonly barrier: Barrier;
  /** The crossings that they do make. */
  readonly path: readonly FloodStep[];
  /** What would stop them further on, were it not for the first. */
  readonly further: readonly Barrier[];
}
export interface SegmentReach {
  readonly segment: Id;
  /** The frame that was followed: an ARP request, or IPv6 neighbour discovery where the segment carries IPv6 alone. */
  readonly frame: FrameClass;
  readonly groups: readonly PointGroup[];
  readonly partings: readonly Parting[];
  /** Sites of the segment at which nothing has its VLAN. */
  readonly unattachedSites: readonly Id[];
}

/** Points in the same VLAN of a switch, or behind the same circuit of a gateway, hear and are heard alike. */
const entryKey = (graph: FloodGraph, { point, place, at }: PlacedPoint): string => {
  const { forwarding, network } = graph;
  const keys = new Set<string>();
  const note = (reached: Place, ordinal: number, inside: number): void => {
    keys.add(`${reached.index} ${reached.kind === 'switch' ? '' : ordinal} ${inside}`);
  };
  let isAlone = false;
  if (at !== undefined) forwarding.enter(at.group, at.tags, note);
  else
    forwarding.leave(place, -1, untagged, (element, direction, tags) => {
      const bundle = network.bundles[element]!;
      // Several cables in one port: nothing is flooded back to where it came from, so that those on them don't hear each other.
      if ((direction === 0 ? bundle.b : bundle.a).bundles.length > 1) isAlone = true;
      forwarding.arrive(element, direction, tags, note);
    });
  return isAlone || keys.size === 0 ? `alone ${point.device}` : [...keys].sort().join('|');
};

interface Cluster {
  readonly first: PlacedPoint;
  readonly all: readonly PlacedPoint[];
}

const clustersOf = (graph: FloodGraph, points: readonly PlacedPoint[]): readonly Cluster[] => {
  const byKey = new Map<string, PlacedPoint[]>();
  for (const placed of points) {
    const key = entryKey(graph, placed);
    const list = byKey.get(key);
    if (list === undefined) byKey.set(key, [placed]);
    else list.push(placed);
  }
  return [...byKey.values()].map((all) => ({ first: all[0]!, all }));
};

/** Which clusters the broadcast of each reaches. */
const reachOf = (
  graph: FloodGraph,
  clusters: readonly Cluster[],
  classes: number,
): readonly ReadonlySet<number>[] => {
  const { network, forwarding } = graph;
  const clustersAt = new Map<number, number[]>();
  clusters.forEach(({ first }, i) => {
    const list = clustersAt.get(first.place.index);
    if (list === undefined) clustersAt.set(first.place.index, [i]);
    else list.push(i);
  });
  return clusters.map(({ first }, own) => {
    const reached = new Set([own]);
    const { point } = first;
    const starts = startsOf(
      network,
      graph,
      first.at === undefined
        ? { host: point.device }
        : {
            device: point.device,
            port: point.port!,
            member: first.at.group.member,
            ...(first.at.tags === untagged ? {} : { vlan: first.at.tags }),
          },
    );
    const arriveAt = (index: number, ordinal: number, inside: number): void => {
      for (const i of clustersAt.get(index) ?? []) {
        const { place, at } = clusters[i]!.first;
        if (at === undefined || forwarding.wouldLeave(place, ordinal, inside, at.ordinal)) reached.add(i);
      }
    };
    if (first.at !== undefined)
      forwarding.enter(first.at.group, first.at.tags, (place, ordinal, inside) =>
        arriveAt(place.index, ordinal, inside),
      );
    for (const node of walk(graph, starts, classes, undefined).order)
      if (clustersAt.has(graph.into[node]!))
        forwarding.arrive(
          graph.element[node]!,
          graph.direction[node] as 0 | 1,
          graph.tags[node]!,
          (place, ordinal, inside) => arriveAt(place.index, ordinal, inside),
        );
    return reached;
  });
};

/** Clusters that reach the same others and are reached by the same, and each other. */
const groupsOf = (reached: readonly ReadonlySet<number>[]): readonly (readonly number[])[] => {
  const all = reached.map((_set, i) => i);
  if (all.length > 0 && reached.every((set) => set.size === all.length)) return [all];
  const alike = new Map<string, number[]>();
  for (const i of all) {
    const hears = all.map((k) => (reached[k]!.has(i) ? 1 : 0)).join('');
    const isHeard = all.map((k) => (reached[i]!.has(k) ? 1 : 0)).join('');
    const key = `${hears} ${isHeard}`;
    const list = alike.get(key);
    if (list === undefined) alike.set(key, [i]);
    else list.push(i);
  }
  // Those that neither reach nor hear one another may still be alike towards all others: they stay apart.
  return [...alike.values()].flatMap((list) =>
    list.every((i) => list.every((k) => reached[i]!.has(k))) ? [list] : list.map((i) => [i]),
  );
};

const compute = (graph: FloodGraph, segment: Id, devicesPast: Set<Id>): SegmentReach => {
  const { network } = graph;
  const { protocols } = entryOf(network.design.segments, segment);
  const frame = protocols?.includes('ipv6') === true && !protocols.includes('ipv4') ? 'ipv6' : 'arp';
  const { points, unattachedSites } = attachmentPoints(graph, segment);
  const clusters = clustersOf(graph, points);
  const reached = reachOf(graph, clusters, classBit(frame));
  const groups = groupsOf(reached);
  const partings: Parting[] = [];
  groups.forEach((own, from) => {
    const missed = groups.flatMap((other, to) => (reached[own[0]!]!.has(other[0]!) ? [] : [to]));
    if (missed.length === 0) return;
    const targets = missed.map((to) => clusters[groups[to]![0]!]!.first);
    const source = clusters[own[0]!]!.first;
    const endings = isCabled(source)
      ? findBarriers(graph, segment, classBit(frame), source, targets, devicesPast)
      : new Map<AttachmentPoint, Ending>();
    missed.forEach((to, i) => {
      const lonely = [source, targets[i]!].find((placed) => !isCabled(placed));
      const ending: Ending | undefined =
        lonely === undefined
          ? endings.get(targets[i]!.point)
          : { barrier: { code: 'not-cabled', device: lonely.point.device }, path: [], further: [] };
      if (ending !== undefined) partings.push({ from, to, ...ending });
    });
  });
  return {
    segment,
    frame,
    groups: groups.map((list) => ({
      points: list.flatMap((i) => clusters[i]!.all.map(({ point }) => point)),
    })),
    partings: mirrored(partings),
    unattachedSites,
  };
};

/** Where one way is explained and the way back just finds nothing that leads on, it ends at the same thing. */
const mirrored = (partings: readonly Parting[]): readonly Parting[] => {
  const byWay = new Map(partings.map((parting) => [`${parting.from} ${parting.to}`, parting]));
  return partings.map((parting) => {
    const back = byWay.get(`${parting.to} ${parting.from}`);
    return parting.barrier.code === 'not-joined' && back !== undefined && back.barrier.code !== 'not-joined'
      ? { ...parting, barrier: back.barrier }
      : parting;
  });
};

const isCabled = ({ place }: PlacedPoint): boolean =>
  place.kind !== 'host' || place.ports.some(({ group }) => group.bundles.length > 0);

interface Known {
  readonly reach: SegmentReach;
  /** Devices behind the barriers that were looked past. */
  readonly devicesPast: ReadonlySet<Id>;
}
type Answers = Map<Id, Known>;

/** The answers of an earlier version that no change has anything to do with. */
const keptAnswers = ({ network: before, value }: Answer<Answers>, now: Network): Answers => {
  const graph = floodGraph(before);
  if (graph.identity === floodGraph(now).identity) return new Map(value);
  const touched = [...touchedDevices(before, now)];
  const touchedSites = new Set(
    touched.flatMap((id) => [before, now].flatMap(({ design }) => design.devices[id]?.site ?? [])),
  );
  const isTouched = new Set(touched);
  const isChanged = new Set<Id>();
  for (const { design } of [before, now])
    for (const id of touched) {
      const device = design.devices[id];
      if (device?.kind === 'host' && device.segment !== undefined) isChanged.add(device.segment);
    }
  const meets = devicesArrivedAt(before).map((device) => isTouched.has(device));
  for (const { id } of changesBetween(before.design, now.design).segments) isChanged.add(id);
  const kept: Answers = new Map();
  for (const { segment, nodes } of segmentReaches(graph)) {
    const known = value.get(segment);
    if (
      known !== undefined &&
      !isChanged.has(segment) &&
      !Object.keys(entryOf(now.design.segments, segment).sites).some((site) => touchedSites.has(site)) &&
      !touched.some((device) => known.devicesPast.has(device)) &&
      !nodes.some((node) => meets[graph.element[node]! * 2 + graph.direction[node]!])
    )
      kept.set(segment, known);
  }
  return kept;
};

const answersOf = perNetwork((network, earlier?: Answer<Answers>): Answers =>
  earlier === undefined ? new Map() : keptAnswers(earlier, network),
);

/**
 * Who of a segment hears whom: groups of hosts (of a site without hosts: a port in its VLAN), and for each two groups that
 * don't hear each other, one way, where frames end and why.
 */
export const segmentReach = (network: Network, segment: Id): SegmentReach => {
  const answers = answersOf(network);
  const before = answers.get(segment);
  if (before !== undefined) return before.reach;
  const devicesPast = new Set<Id>();
  const reach = compute(floodGraph(network), segment, devicesPast);
  answers.set(segment, { reach, devicesPast });
  return reach;
};
