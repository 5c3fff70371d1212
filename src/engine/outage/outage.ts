import type { AttachmentPoint } from '../flood/attachment-points.ts';
import type { ElementRef } from '../model/design.ts';
import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Path } from '../network/association-path.ts';
import { tunnelPath } from '../network/association-path.ts';
import type { TunnelReason } from '../network/can-come-up.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { Answer } from '../wire/problem.ts';
import type { Casualties } from './casualties.ts';
import { casualtiesOf } from './casualties.ts';
import type { SegmentSpread } from './segment-losses.ts';
import { segmentLosses, segmentSpreads, touchedSpreads } from './segment-losses.ts';
import type { Change } from './standing.ts';
import { standingAfter } from './standing.ts';

/** Two points of a segment that no longer exchange frames, though both are in service. */
export interface PartedPair {
  readonly a: AttachmentPoint;
  readonly b: AttachmentPoint;
  /** Which ways have gone. */
  readonly lost: 'both' | 'a-to-b' | 'b-to-a';
}
export interface SegmentOutage {
  readonly segment: Id;
  /** How many pairs of points are parted. */
  readonly pairCount: number;
  /** Points that no longer reach, or are reached by, any other that they were joined with. */
  readonly cutOff: readonly AttachmentPoint[];
  /** Only where they were asked for, in order of the points. */
  readonly pairs?: readonly PartedPair[];
}
export interface MovedTunnel {
  readonly tunnel: Id;
  readonly from: Extract<Path, { ok: true }>;
  readonly to: Extract<Path, { ok: true }>;
}
export interface Outage {
  /** Segments that lose something, in order of id. */
  readonly segments: readonly SegmentOutage[];
  readonly pairCount: number;
  /** Points that are out of service themselves; pairs with them are not counted. */
  readonly gone: readonly AttachmentPoint[];
  /** Tunnels that came up and no longer do; with the reasons where they don't just lack what has failed. */
  readonly tunnelsDown: readonly { readonly tunnel: Id; readonly reasons: readonly TunnelReason[] }[];
  /** Tunnels that run over other landings now. */
  readonly tunnelsMoved: readonly MovedTunnel[];
  /** Pairs that have changed over, with the member that forwards now. */
  readonly failedOver: readonly { readonly device: Id; readonly active: Member }[];
}

export interface OutageOptions {
  /** Lists each parted pair; a failed hub may part very many. */
  readonly pairs?: boolean;
}

const isGone = (
  { device, port }: AttachmentPoint,
  casualties: Casualties,
  ports: ReadonlySet<string>,
): boolean => casualties.devices.has(device) || (port !== undefined && ports.has(`${device}/${port}`));

const segmentOutage = (
  spread: SegmentSpread,
  change: Change,
  isOut: (point: AttachmentPoint) => boolean,
  withPairs: boolean,
): SegmentOutage | undefined => {
  const { ways, spreads, joined } = spread;
  const count = ways.points.length;
  const losses = segmentLosses(spread, change);
  if (losses.size === 0) return undefined;
  const gone = new Set<number>();
  ways.points.forEach((point, i) => {
    if (isOut(point)) gone.add(i);
  });
  const isLost = (from: number, to: number): boolean => has(losses.get(from), to);
  const lostByPoint = new Int32Array(count);
  const pairs: PartedPair[] = [];
  let pairCount = 0;
  for (const [from, targets] of losses) {
    if (gone.has(from)) continue;
    for (const to of targets) {
      if (gone.has(to)) continue;
      lostByPoint[from]! += 1;
      lostByPoint[to]! += 1;
      const isBoth = isLost(to, from);
      if (isBoth && from > to) continue;
      pairCount += 1;
      if (!withPairs) continue;
      const [a, b] = [Math.min(from, to), Math.max(from, to)];
      pairs.push({
        a: ways.points[a]!,
        b: ways.points[b]!,
        lost: isBoth ? 'both' : from < to ? 'a-to-b' : 'b-to-a',
      });
    }
  }
  if (pairCount === 0) return undefined;
  const reaches = (from: number, to: number): number => (spreads[from]!.position[count + to]! >= 0 ? 1 : 0);
  const hadWays = (point: number): number => {
    let had = joined[point]!;
    for (const other of gone) had -= reaches(point, other) + reaches(other, point);
    return had;
  };
  const cutOff = ways.points.filter((_point, i) => lostByPoint[i]! > 0 && lostByPoint[i] === hadWays(i));
  return {
    segment: ways.segment,
    pairCount,
    cutOff,
    ...(withPairs ? { pairs } : {}),
  };
};

/** Whether an ordered list holds a number. */
const has = (list: readonly number[] | undefined, wanted: number): boolean => {
  let [low, high] = [0, list?.length ?? 0];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (list![middle]! < wanted) low = middle + 1;
    else high = middle;
  }
  return list?.[low] === wanted;
};

const tunnelsAfter = (
  network: Network,
  casualties: Casualties,
  change: Change,
): Pick<Outage, 'tunnelsDown' | 'tunnelsMoved'> => {
  const before = tunnelStates(network);
  const after = change.after === undefined ? undefined : tunnelStates(change.after);
  const down = new Map<Id, readonly TunnelReason[]>();
  for (const tunnel of casualties.tunnels) if (before.get(tunnel)!.up) down.set(tunnel, []);
  const tunnelsMoved: MovedTunnel[] = [];
  for (const tunnel of change.touched) {
    const state = after!.get(tunnel)!;
    if (before.get(tunnel)!.up && !state.up) down.set(tunnel, state.reasons);
    const [from, to] = [tunnelPath(network, tunnel), tunnelPath(change.after!, tunnel)];
    if (state.up && from.ok && to.ok && (from.landingA !== to.landingA || from.landingB !== to.landingB))
      tunnelsMoved.push({ tunnel, from, to });
  }
  return {
    tunnelsDown: [...down]
      .sort(([x], [y]) => (x < y ? -1 : 1))
      .map(([tunnel, reasons]) => ({ tunnel, reasons })),
    tunnelsMoved,
  };
};

const failedOver = (network: Network, { members }: Casualties): Outage['failedOver'] =>
  [...members]
    .filter(([id, lost]) => {
      const device = entryOf(network.design.devices, id);
      return device.kind === 'ha-pair' && (device.active ?? 1) === lost;
    })
    .sort(([x], [y]) => (x < y ? -1 : 1))
    .map(([device, lost]) => ({ device, active: lost === 1 ? 2 : 1 }));

/** What casualties part, on an index that is there already. */
export const outageOf = (
  network: Network,
  failed: readonly ElementRef[],
  casualties: Casualties,
  options: OutageOptions = {},
): Outage => {
  const change = standingAfter(network, casualties);
  const ports = new Set(failed.flatMap(({ id, port }) => (port === undefined ? [] : [`${id}/${port}`])));
  const isOut = (point: AttachmentPoint): boolean => isGone(point, casualties, ports);
  const segments = touchedSpreads(network, change)
    .map((spread) => segmentOutage(spread, change, isOut, options.pairs === true))
    .filter((one) => one !== undefined);
  const gone = new Map<string, AttachmentPoint>();
  if (casualties.devices.size > 0 || ports.size > 0)
    for (const { ways } of segmentSpreads(network))
      for (const point of ways.points)
        if (isOut(point)) gone.set(`${point.device}/${point.port ?? ''}`, point);
  return {
    segments,
    pairCount: segments.reduce((sum, { pairCount }) => sum + pairCount, 0),
    gone: [...gone].sort(([x], [y]) => (x < y ? -1 : 1)).map(([, point]) => point),
    ...tunnelsAfter(network, casualties, change),
    failedOver: failedOver(network, casualties),
  };
};

/**
 * Which hosts (of a site that has none: a port in its VLAN) of which segments no longer reach which, once the elements named
 * have failed, measured against the design as it is. Sites, devices, ports, members of pairs, links, tunnels, associations
 * and transports can fail; pairs fail over, ways fall back on the next landing, aggregates and spanning trees on what is left.
 */
export const outage = (
  design: DesignFacts,
  failed: readonly ElementRef[],
  options: OutageOptions = {},
): Answer<Outage> => {
  const network = indexNetwork(design);
  const answer = casualtiesOf(network, failed);
  if (!answer.ok) return answer;
  return { ok: true, ...outageOf(network, failed, answer.casualties, options) };
};
