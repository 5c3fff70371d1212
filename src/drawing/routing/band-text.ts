import type { Design, Entry } from '../../engine/model/design.ts';
import type { BandText, Rect } from '../geometry.ts';
import { band as bandSizes } from '../parts/sizes.ts';
import { wrapText } from '../text-width.ts';
import type { BandPlace } from './bands.ts';
import type { Occupied } from './free-places.ts';
import { bottom, overlap, right } from './rects.ts';

const fromEnd = 12;
const textWidthNeeded = 88;
const turnedStrip = 20;
const turnedLength = 220;
const nameHeight = 24;

interface Interval {
  readonly from: number;
  readonly to: number;
}

/** Stretches of a line that no blocker covers. */
const freeIntervals = (from: number, to: number, blocked: readonly Interval[]): readonly Interval[] => {
  const free: Interval[] = [];
  let at = from;
  for (const interval of [...blocked].sort((a, b) => a.from - b.from)) {
    if (interval.from > at) free.push({ from: at, to: Math.min(to, interval.from) });
    at = Math.max(at, interval.to);
  }
  if (at < to) free.push({ from: at, to });
  return free.filter((interval) => interval.to > interval.from);
};

/** The longest, and among equals the last. */
const longest = (intervals: readonly Interval[]): Interval | undefined =>
  intervals.reduce<Interval | undefined>(
    (best, next) => (best === undefined || next.to - next.from >= best.to - best.from - 0.5 ? next : best),
    undefined,
  );

/** Where in a free stretch the words go: at the foot or the head of the band, else in the middle. */
const settle = (free: Interval, from: number, to: number, height: number): number => {
  if (free.to >= to - 0.5) return Math.max(free.from, to - fromEnd - height);
  if (free.from <= from + 0.5) return Math.min(free.to - height, from + fromEnd);
  return (free.from + free.to - height) / 2;
};

/** How high the words of a transport stand in a band of this width. */
const wordsHeight = (transport: Entry<'transports'> | undefined, name: string, width: number): number => {
  const { always, nameLine, latency, mtu, mtuUnderLatency, loss } = bandSizes.words;
  const hasLatency = transport?.latencyUs !== undefined;
  return (
    always +
    nameLine * (wrapText(name, width - 16, 15, 600).length - 1) +
    (hasLatency ? latency : 0) +
    (transport?.mtu === undefined ? 0 : hasLatency ? mtuUnderLatency : mtu) +
    (transport?.lossPpm === undefined ? 0 : loss)
  );
};

/** Where a band's words stand: in its longest free stretch, turned along its edge, beside it on paper, or its name alone. */
export const bandText = (
  design: Design,
  band: BandPlace,
  cords: readonly Rect[],
  landings: readonly Rect[],
  taken: Occupied,
  frame: Rect,
): BandText => {
  const blockers = [...cords, ...landings.map((bar) => ({ ...bar, y: bar.y - 4, height: bar.height + 8 }))];
  const name = design.transports[band.id]?.name ?? band.id;
  const level = band.orientation === 'horizontal';
  const places = level ? (band.header === undefined ? band.limbs : [...band.limbs, band.header]) : band.limbs;
  const heightIn = (width: number): number => wordsHeight(design.transports[band.id], name, width);

  const stretches = places.flatMap((rect) => {
    const here = blockers.filter((box) => overlap(box, rect));
    if (level) {
      if (rect.height < heightIn(bandSizes.width)) return [];
      const free = longest(
        freeIntervals(
          rect.x,
          right(rect),
          here.map((b) => ({ from: b.x - 6, to: right(b) + 6 })),
        ),
      );
      if (free === undefined || free.to - free.from < bandSizes.width) return [];
      const x = settle(free, rect.x, right(rect), bandSizes.width);
      const height = Math.min(rect.height, heightIn(bandSizes.width));
      return [
        {
          size: free.to - free.from,
          rect: { x, y: rect.y + (rect.height - height) / 2, width: bandSizes.width, height },
        },
      ];
    }
    const free = longest(
      freeIntervals(
        rect.y,
        bottom(rect),
        here.map((b) => ({ from: b.y - 4, to: bottom(b) + 4 })),
      ),
    );
    const height = heightIn(rect.width);
    if (free === undefined || free.to - free.from < height || rect.width < textWidthNeeded) return [];
    const y = settle(free, rect.y, bottom(rect), height);
    return [{ size: free.to - free.from, rect: { x: rect.x, y, width: rect.width, height } }];
  });
  const best = [...stretches].sort((a, b) => b.size - a.size || b.rect.y - a.rect.y)[0];
  if (best !== undefined) return { mode: 'in', rect: best.rect };

  for (const rect of band.limbs) {
    const edges: readonly Rect[] = level
      ? [
          { ...rect, height: turnedStrip },
          { ...rect, y: bottom(rect) - turnedStrip, height: turnedStrip },
        ]
      : [
          { ...rect, width: turnedStrip },
          { ...rect, x: right(rect) - turnedStrip, width: turnedStrip },
        ];
    for (const edge of edges) {
      const here = blockers.filter((box) => overlap(box, edge));
      const free = level
        ? longest(
            freeIntervals(
              edge.x,
              right(edge),
              here.map((b) => ({ from: b.x, to: right(b) })),
            ),
          )
        : longest(
            freeIntervals(
              edge.y,
              bottom(edge),
              here.map((b) => ({ from: b.y, to: bottom(b) })),
            ),
          );
      if (free === undefined || free.to - free.from < turnedLength) continue;
      const at = (free.from + free.to - turnedLength) / 2;
      return {
        mode: 'turned',
        rect: level ? { ...edge, x: at, width: turnedLength } : { ...edge, y: at, height: turnedLength },
      };
    }
  }
  const limb = band.limbs[0]!;
  const width = bandSizes.width;
  const height = heightIn(width);
  for (let y = bottom(limb) - height - fromEnd; y > limb.y; y -= 20)
    for (const x of [right(limb) + 8, limb.x - 8 - width]) {
      const rect = { x, y, width, height };
      const inFrame = x > frame.x && x + width < right(frame) && bottom(rect) < bottom(frame);
      if (inFrame && !taken.hits(rect) && !cords.some((box) => overlap(box, rect)))
        return { mode: 'beside', rect };
    }
  const top = longest(
    freeIntervals(
      limb.y,
      bottom(limb),
      blockers.filter((box) => overlap(box, limb)).map((b) => ({ from: b.y, to: bottom(b) })),
    ),
  );
  const y = top === undefined ? limb.y + 4 : (top.from + top.to - nameHeight) / 2;
  return { mode: 'name-only', rect: { x: limb.x, y, width: limb.width, height: nameHeight } };
};
