import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import { textWidth } from '../text-width.ts';
import { cableBoxes, jacketBoxes } from './free-places.ts';
import { contains, covers, grown, overlap } from './rects.ts';

export interface BalloonAnchor {
  readonly number: number;
  readonly at: Point;
  /** Two or three words beside the balloon. */
  readonly words?: string;
}
export interface PlacedBalloon {
  readonly number: number;
  readonly anchor: Point;
  readonly centre: Point;
  /** Where the words begin or end, on their baseline. */
  readonly words?: {
    readonly text: string;
    readonly at: Point;
    readonly anchor: 'start' | 'end';
    readonly rect: Rect;
  };
}

const distances = [60, 90, 130, 180] as const;
const radius = 14;
const wordSize = 14.5;
const wordGap = 6;

/** 16 directions, level and upright ones first, diagonals last. */
const angles: readonly number[] = [0, 8, 4, 12, 2, 6, 10, 14, 1, 3, 5, 7, 9, 11, 13, 15]
  .map((step, i) => ({ step, i }))
  .sort((a, b) => Number(a.step % 4 === 2) - Number(b.step % 4 === 2) || a.i - b.i)
  .map(({ step }) => (step * Math.PI) / 8);

const meetsRect = (p: Point, q: Point, rect: Rect): boolean => {
  // Liang and Barsky's clipping: is any part of the leader inside?
  const [dx, dy] = [q.x - p.x, q.y - p.y];
  let [t0, t1] = [0, 1];
  for (const [d, room] of [
    [-dx, p.x - rect.x],
    [dx, rect.x + rect.width - p.x],
    [-dy, p.y - rect.y],
    [dy, rect.y + rect.height - p.y],
  ] as const) {
    if (d === 0) {
      if (room < 0) return false;
      continue;
    }
    const t = room / d;
    if (d < 0) t0 = Math.max(t0, t);
    else t1 = Math.min(t1, t);
    if (t0 > t1) return false;
  }
  return true;
};

interface Candidate {
  readonly centre: Point;
  readonly box: Rect;
  readonly words?: PlacedBalloon['words'];
}

const candidate = (anchor: BalloonAnchor, distance: number, angle: number): readonly Candidate[] => {
  const at = { x: anchor.at.x + Math.cos(angle) * distance, y: anchor.at.y + Math.sin(angle) * distance };
  const centre = { x: Math.round(at.x * 2) / 2, y: Math.round(at.y * 2) / 2 };
  const own = { x: centre.x - radius, y: centre.y - radius, width: 2 * radius, height: 2 * radius };
  if (anchor.words === undefined) return [{ centre, box: own }];
  const width = textWidth(anchor.words, wordSize, 600);
  const sides = Math.cos(angle) < -0.01 ? (['end', 'start'] as const) : (['start', 'end'] as const);
  return sides.map((side) => {
    const x = side === 'start' ? centre.x + radius + wordGap : centre.x - radius - wordGap;
    const rect = { x: side === 'start' ? x : x - width, y: centre.y - 9, width, height: 18 };
    return {
      centre,
      box: {
        x: Math.min(own.x, rect.x),
        y: own.y,
        width: width + wordGap + 2 * radius,
        height: own.height,
      },
      words: { text: anchor.words!, at: { x, y: centre.y + 5 }, anchor: side, rect },
    };
  });
};

/**
 * Where balloons float and their leaders run: near their anchors, off plates, labels and one another, across as few
 * cords as can be. In the order of their numbers. A balloon that had a place before keeps it while that is still free.
 */
export const placeBalloons = (
  geometry: SheetGeometry,
  anchors: readonly BalloonAnchor[],
  before: readonly PlacedBalloon[] = [],
): readonly PlacedBalloon[] => {
  const solid: Rect[] = [
    geometry.sheet.titleBlock,
    geometry.sheet.legend,
    ...geometry.devices.map((device) => device.rect),
    ...geometry.rings.flatMap((ring) => [
      ring.label.rect,
      { x: ring.centre.x - 14, y: ring.centre.y - 14, width: 28, height: 28 },
      ...ring.groups.flatMap((group) => group.ferrules.map((ferrule) => ferrule.rect)),
    ]),
    ...geometry.cables.flatMap((cable) => (cable.label === undefined ? [] : [cable.label.rect])),
    ...geometry.bands.map((band) => band.text.rect),
    ...geometry.notes.map((note) => note.rect),
    ...geometry.sites.map((site) => ({ x: site.rect.x + 16, y: site.rect.y - 10, width: 120, height: 20 })),
  ];
  const cords = [...jacketBoxes(geometry.jackets), ...cableBoxes(geometry.cables)];
  const room = geometry.sheet.frame;
  const costOf = (anchor: BalloonAnchor, { centre, box }: Candidate): number => {
    const space = grown(box, 2);
    const hits = solid.filter((rect) => overlap(rect, space)).length + (covers(room, space) ? 0 : 3);
    const under = cords.filter((rect) => overlap(rect, space)).length;
    const crossed = cords.filter(
      (rect) => !contains(rect, anchor.at) && meetsRect(anchor.at, centre, rect),
    ).length;
    const over = solid.filter(
      (rect) => !contains(grown(rect, 1), anchor.at) && meetsRect(anchor.at, centre, rect),
    ).length;
    return (
      1000 * hits +
      300 * under +
      200 * over +
      40 * crossed +
      Math.hypot(centre.x - anchor.at.x, centre.y - anchor.at.y)
    );
  };
  const kept = new Map(before.map((balloon) => [balloon.number, balloon]));
  return [...anchors]
    .sort((a, b) => a.number - b.number)
    .map((anchor): PlacedBalloon => {
      const was = kept.get(anchor.number);
      const candidates = distances.flatMap((distance) =>
        angles.flatMap((angle) => candidate(anchor, distance, angle)),
      );
      const same =
        was !== undefined && was.anchor.x === anchor.at.x && was.anchor.y === anchor.at.y
          ? candidates.find(
              (c) =>
                c.centre.x === was.centre.x &&
                c.centre.y === was.centre.y &&
                c.words?.anchor === was.words?.anchor &&
                costOf(anchor, c) < 300,
            )
          : undefined;
      let best = same;
      let cost = Infinity;
      if (best === undefined)
        for (const c of candidates) {
          const now = costOf(anchor, c);
          if (now >= cost - 1e-9) continue;
          cost = now;
          best = c;
        }
      const { centre, box, words } = best!;
      solid.push(box);
      return { number: anchor.number, anchor: anchor.at, centre, ...(words === undefined ? {} : { words }) };
    });
};
