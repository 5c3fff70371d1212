import type { AttachmentPoint } from '../flood/attachment-points.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import type { Outage } from './outage.ts';
import { segmentSpreads } from './segment-losses.ts';

/** How a site's points of a segment stand to those of its other sites: reach all that they did, some, none; or are out of service. */
export type Reach = 'reaches' | 'partly' | 'parted' | 'out-of-service';
export interface SiteReach {
  readonly segment: Id;
  readonly site: Id;
  readonly reach: Reach;
  /** Points of the segment at the site, those out of service included. */
  readonly points: number;
  /** Pairs with points of other sites that exchanged frames, and how many of them no longer do, both in service. */
  readonly pairs: number;
  readonly lostPairs: number;
}

const pointKey = ({ device, port }: AttachmentPoint): string => `${device}/${port ?? ''}`;
const pairKey = (x: AttachmentPoint, y: AttachmentPoint): string =>
  [pointKey(x), pointKey(y)].sort().join(' ');

/**
 * Segment by segment and site by site, what is left of the ways between sites after an outage whose pairs were asked for. In
 * order of segment and site. A pair counts as lost where either way has gone.
 */
export const siteReach = (network: Network, outage: Outage): readonly SiteReach[] => {
  const gone = new Set(outage.gone.map(pointKey));
  const lostOf = new Map(
    outage.segments.map(({ segment, pairs = [] }) => [
      segment,
      new Set(pairs.map(({ a, b }) => pairKey(a, b))),
    ]),
  );
  return segmentSpreads(network).flatMap(({ ways, spreads }): readonly SiteReach[] => {
    const { points, segment } = ways;
    const lost = lostOf.get(segment);
    const reaches = (from: number, to: number): boolean => spreads[from]!.position[points.length + to]! >= 0;
    const sites = [...new Set(points.map(({ site }) => site))].sort();
    return sites.map((site): SiteReach => {
      let [count, inService, pairs, lostPairs] = [0, 0, 0, 0];
      points.forEach((point, i) => {
        if (point.site !== site) return;
        count += 1;
        if (gone.has(pointKey(point))) return;
        inService += 1;
        points.forEach((other, k) => {
          if (other.site === site || gone.has(pointKey(other))) return;
          if (!reaches(i, k) && !reaches(k, i)) return;
          pairs += 1;
          if (lost?.has(pairKey(point, other)) === true) lostPairs += 1;
        });
      });
      const reach: Reach =
        inService === 0
          ? 'out-of-service'
          : lostPairs === 0
            ? 'reaches'
            : lostPairs === pairs
              ? 'parted'
              : 'partly';
      return { segment, site, reach, points: count, pairs, lostPairs };
    });
  });
};
