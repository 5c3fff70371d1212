import type { Seating } from './arrangement.ts';
import type { SiteGraphFacts } from './site-graph.ts';

/** Heights of sites with the gap that follows them, to fill columns evenly. */
type HeightOf = (site: string) => number;

/** Cuts a list into `count` contiguous chunks of nearly equal height, each at most `room` high where that can be. */
const chunks = (
  sites: readonly string[],
  count: number,
  heightOf: HeightOf,
  room: number,
  taken: readonly number[],
): readonly (readonly string[])[] => {
  const result: string[][] = Array.from({ length: count }, () => []);
  let left = sites.reduce((sum, site) => sum + heightOf(site), 0) + taken.reduce((sum, h) => sum + h, 0);
  let next = 0;
  for (let c = 0; c < count; c += 1) {
    const share = left / (count - c);
    let filled = taken[c] ?? 0;
    while (next < sites.length) {
      const height = heightOf(sites[next]!);
      const isLast = c === count - 1;
      if (!isLast && (filled + height > room || filled + height / 2 > share)) break;
      result[c]!.push(sites[next]!);
      filled += height;
      next += 1;
    }
    left -= filled;
  }
  return result;
};

/** Up to so many limbs a walk may go to and fro between all columns. */
export const mostMixedLimbs = 4;

const around = (hub: string, others: readonly string[]): readonly string[] => {
  const above = Math.floor(others.length / 2);
  return [...others.slice(0, above), hub, ...others.slice(above)];
};

/** The ways in which sites may take their columns with `limbs` limbs, the plainest first. */
export const seatings = (
  facts: SiteGraphFacts,
  limbs: number,
  heightOf: HeightOf,
  room: number,
): readonly Seating[] => {
  const [main, ...others] = facts.transports;
  const on = (site: string, transport: string): boolean => facts.landedOn.get(site)?.has(transport) ?? false;
  const home = (site: string): number => {
    if (main === undefined || on(site, main)) return -1;
    return others.findIndex((t) => on(site, t));
  };
  const further = others.map((_, i) => facts.order.filter((site) => home(site) === i));
  const free = facts.order.filter((site) => home(site) < 0);
  // A site on a further transport too stands best between both bands; a pair's one bracket faces both from the far left.
  const between = free.filter((site) => others.some((t) => on(site, t)) && !facts.hasPair.has(site));
  const pairsOnBoth = free.filter((site) => others.some((t) => on(site, t)) && facts.hasPair.has(site));
  const rest = free.filter((site) => !between.includes(site) && !pairsOnBoth.includes(site));
  const hub = facts.hub !== undefined && home(facts.hub) < 0 ? facts.hub : undefined;
  const strayHub = facts.hub !== undefined && hub === undefined ? facts.hub : undefined;
  const furtherAll = further.map((sites, i) =>
    strayHub !== undefined && home(strayHub) === i ? around(strayHub, sites) : sites,
  );
  const seat = (columns: readonly (readonly string[])[]): Seating => ({ columns, further: furtherAll });
  const empty = (): string[][] => Array.from({ length: 2 * limbs }, () => []);
  const result: Seating[] = [];

  if (hub !== undefined) {
    const spokes = free.filter((site) => !pairsOnBoth.includes(site));
    // Spread over both sides of the band, those on a further transport stay on its side of it.
    const nearFirst = [...between, ...rest];
    const withHub = around(hub, pairsOnBoth);
    const alone = empty();
    alone[0] = [...withHub];
    if (limbs === 1) alone[1] = [...spokes];
    else
      chunks(spokes, limbs, heightOf, room, []).forEach((chunk, i) => {
        alone[2 * i + 1] = [...chunk];
      });
    result.push(seat(alone));
    const order = [1, 0, ...Array.from({ length: 2 * (limbs - 1) }, (_, i) => i + 2)];
    const taken = order.map((c) => (c === 0 ? withHub.reduce((sum, site) => sum + heightOf(site), 0) : 0));
    const spread = empty();
    chunks(nearFirst, order.length, heightOf, room, taken).forEach((chunk, i) => {
      const column = order[i]!;
      spread[column] = column === 0 ? [...around(hub, [...pairsOnBoth, ...chunk])] : [...chunk];
    });
    result.push(seat(spread));
    return result;
  }
  if (limbs > mostMixedLimbs) {
    // In so many columns neighbours stay close only where each limb takes its sites from one stretch of the walk.
    const far = empty();
    chunks(free, limbs, heightOf, 2 * room, []).forEach((chunk, limb) => {
      const filled = [0, 0] as [number, number];
      for (const site of chunk) {
        const column = filled[0] <= filled[1] + 0.5 ? 0 : 1;
        far[2 * limb + column]!.push(site);
        filled[column] += heightOf(site);
      }
    });
    return [seat(far)];
  }
  const columns = empty();
  const heights = columns.map(() => 0);
  const put = (site: string, column: number): void => {
    columns[column]!.push(site);
    heights[column]! += heightOf(site);
  };
  for (const site of free) {
    const height = heightOf(site);
    const last = columns.length - 1;
    if (pairsOnBoth.includes(site)) put(site, 0);
    else if (between.includes(site) && heights[last]! + height <= room + 16) put(site, last);
    else {
      const least = heights.reduce((best, h, i) => (h < heights[best]! - 0.5 ? i : best), 0);
      put(site, least);
    }
  }
  return [seat(columns)];
};
