import type { Design } from '../../engine/model/design.ts';
import type { Layout } from '../../engine/model/layout.ts';
import { combOrder } from '../routing/combs.ts';
import { isManifold } from '../routing/ring-seats.ts';
import { cornerRadii } from '../routing/corners.ts';
import { byText } from '../routing/rects.ts';
import { routeSheetOnce } from '../routing/route.ts';
import type { RoutedSheet } from '../routing/route.ts';

const mostTrials = 240;
const mostJackets = 60;

export interface Score {
  readonly total: number;
  readonly steps: number;
}

/** How far a routed sheet is from a clean one; 0 is clean. `steps` counts only what moving columns can mend. */
export const scoreOf = ({ cords }: RoutedSheet): Score => {
  const { crossings, overlaps, tracked, ways } = cords;
  const skewed = crossings.filter(({ under, over, at }) =>
    [under, over].some(({ way, run }) => {
      const { corners } = ways[way]!;
      const radii = cornerRadii(ways[way]!);
      return [run, run + 1].some((i) => {
        const corner = corners[i];
        const radius = radii[i - 1];
        if (corner === undefined || radius === undefined) return false;
        const least = Math.min(radius, ways[way]!.cord.leastRadius);
        return Math.abs(corner.x - at.x) + Math.abs(corner.y - at.y) < least;
      });
    }),
  ).length;
  const lost = ways.filter((way) => way.found === 'none').length;
  const searched = ways.filter((way) => way.found === 'search').length;
  const steps = 200 * (overlaps.length + lost) + 200 * tracked.conflicts + 6 * tracked.doglegs;
  return { total: steps + 2 * crossings.length + 3 * skewed + 3 * tracked.tight + searched * 0.01, steps };
};

/** Swaps neighbouring groups of combs where that makes the sheet cleaner, and keeps the order where it differs from the computed one. */
export const refine = (design: Design, start: Layout): Layout => {
  let layout = start;
  let routed = routeSheetOnce({ ...design, layout });
  let score = scoreOf(routed).total;
  if (score === 0 || routed.furnished.bundles.length > mostJackets) return layout;
  let trials = 0;
  for (;;) {
    let gained = false;
    const endpoints = [...routed.furnished.seats]
      .filter((seat) => seat.groups.length > 1 && !isManifold(seat.groups.length, seat.side))
      .map((seat) => seat.endpoint)
      .sort(byText);
    for (const endpoint of endpoints) {
      const { seats, bands } = routed.furnished;
      const seat = seats.find((s) => s.endpoint === endpoint)!;
      const byEndpoint = new Map(seats.map((s) => [s.endpoint, s]));
      let order = combOrder({ ...design, layout }, seat, byEndpoint, bands).map((group) => group.bundle.id);
      for (let i = 0; i + 1 < order.length; i += 1) {
        if (trials >= mostTrials) return layout;
        trials += 1;
        const swapped = [...order];
        [swapped[i], swapped[i + 1]] = [swapped[i + 1]!, swapped[i]!];
        const candidate: Layout = {
          ...layout,
          endpoints: { ...layout.endpoints, [endpoint]: { ...layout.endpoints?.[endpoint], order: swapped } },
        };
        const next = routeSheetOnce({ ...design, layout: candidate });
        const better = scoreOf(next).total;
        if (better >= score - 1e-9) continue;
        layout = candidate;
        routed = next;
        score = better;
        order = swapped;
        gained = true;
      }
    }
    if (!gained || score === 0) return layout;
  }
};
