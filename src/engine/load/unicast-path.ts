import type { AttachmentPoint, PlacedPoint } from '../flood/attachment-points.ts';
import { attachmentPoints } from '../flood/attachment-points.ts';
import type { FloodGraph } from '../flood/flood-graph.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import { classBit } from '../flood/frame-classes.ts';
import type { Source } from '../flood/reach.ts';
import { startsOf, walk } from '../flood/reach.ts';
import type { Entry } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { untagged } from '../network/frame-tags.ts';
import type { End, Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';

/** One crossing of a cable (or aggregate) or a tunnel, on the way that learned frames take. */
export interface Crossing {
  readonly collection: 'links' | 'tunnels';
  /** The first live cable, where several are aggregated. */
  readonly id: Id;
  /** The index of the bundle of cables, for cables. */
  readonly bundle?: number;
  readonly from: End;
  readonly tags: Tags;
  /** The device that the crossing ends in. */
  readonly into: Id;
}

type Place = Entry<'demands'>['from'];

const knownPoints = perNetwork((_network) => new Map<Id, readonly PlacedPoint[]>());

const pointsOf = (network: Network, segment: Id): readonly PlacedPoint[] => {
  const known = knownPoints(network);
  const points = known.get(segment) ?? attachmentPoints(floodGraph(network), segment).points;
  known.set(segment, points);
  return points;
};

/** Where a demand begins or ends: its host, or for a site the first host of the segment there, else a port in its VLAN. */
export const pointOf = (network: Network, segment: Id, at: Place): PlacedPoint | undefined => {
  const points = pointsOf(network, segment);
  if ('site' in at) return points.find(({ point }) => point.site === at.site);
  const known = points.find(({ point }) => point.device === at.host && point.port === undefined);
  if (known !== undefined) return known;
  // A host of another segment, or of none, sends all the same.
  const device = entryOf(network.design.devices, at.host);
  const [place] = floodGraph(network).forwarding.places.byDevice.get(at.host) ?? [];
  return device.kind !== 'host' || place === undefined
    ? undefined
    : { point: { site: device.site, device: at.host }, place };
};

const sourceOf = ({ point, at }: PlacedPoint): Source =>
  at === undefined
    ? { host: point.device }
    : {
        device: point.device,
        port: point.port!,
        member: at.group.member,
        ...(at.tags === untagged ? {} : { vlan: at.tags }),
      };

/** Whether a crossing ends at the point: in the host, or in a place that would hand the frame to the port. */
const endsAt = (graph: FloodGraph, node: number, { place, at }: PlacedPoint): boolean => {
  if (graph.into[node] !== place.index) return false;
  if (at === undefined) return true;
  let isThere = false;
  graph.forwarding.arrive(
    graph.element[node]!,
    graph.direction[node] as 0 | 1,
    graph.tags[node]!,
    (reached, ordinal, inside) => {
      isThere ||= reached === place && graph.forwarding.wouldLeave(place, ordinal, inside, at.ordinal);
    },
  );
  return isThere;
};

const crossingOf = (graph: FloodGraph, node: number): Crossing => {
  const { network } = graph;
  const element = graph.element[node]!;
  const bundle = network.bundles[element];
  return {
    ...(bundle === undefined
      ? { collection: 'tunnels', id: network.tunnelIds[element - network.firstTunnelElement]! }
      : { collection: 'links', id: (bundle.alive[0] ?? bundle.cables[0])!, bundle: element }),
    from: graph.direction[node] === 0 ? 'a' : 'b',
    tags: graph.tags[node]!,
    into: graph.forwarding.places.all[graph.into[node]!]!.device,
  };
};

/** The frame whose flooding shows the way: an ARP request, or neighbour discovery where the segment carries IPv6 alone. */
export const frameOf = (network: Network, segment: Id): 'arp' | 'ipv6' => {
  const { protocols } = entryOf(network.design.segments, segment);
  return protocols?.includes('ipv6') === true && !protocols.includes('ipv4') ? 'ipv6' : 'arp';
};

/**
 * The crossings of frames between two points once bridges have learned: the shortest way on which the first broadcast got
 * there. Undefined where none does.
 */
export const unicastPath = (
  network: Network,
  segment: Id,
  from: PlacedPoint,
  to: PlacedPoint,
): readonly Crossing[] | undefined => {
  const graph = floodGraph(network);
  if (isSame(from.point, to.point)) return [];
  const starts = startsOf(network, graph, sourceOf(from));
  const seen = walk(graph, starts, classBit(frameOf(network, segment)), undefined);
  const last = seen.order.find((node) => endsAt(graph, node, to));
  if (last === undefined) return undefined;
  const path: Crossing[] = [];
  for (let node = last; node >= 0; node = seen.from.get(node)!) path.unshift(crossingOf(graph, node));
  return path;
};

const isSame = (a: AttachmentPoint, b: AttachmentPoint): boolean =>
  a.device === b.device && a.port === b.port;
