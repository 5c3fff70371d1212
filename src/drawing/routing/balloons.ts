import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import { textWidth } from '../text-width.ts';
import type { Callout } from './callouts.ts';
import { calloutCost, crowdNear, crowdOf, directions, freePlaceCost, joinedBy } from './callouts.ts';

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

export interface BalloonOptions {
  readonly before?: readonly PlacedBalloon[];
  /** Fault marks, which stay uncovered. */
  readonly marks?: readonly Callout[];
  /** How much larger than usual balloons and words are drawn. */
  readonly scale?: number;
}

const distances = [44, 60, 75, 90, 110, 130, 155, 180, 215] as const;
const leastRadius = 14;
const wordSize = 14.5;
const wordGap = 6;

interface Candidate {
  readonly centre: Point;
  readonly box: Rect;
  readonly words?: PlacedBalloon['words'];
}

const candidate = (
  anchor: BalloonAnchor,
  distance: number,
  angle: number,
  scale: number,
): readonly Candidate[] => {
  const radius = leastRadius * scale;
  const at = { x: anchor.at.x + Math.cos(angle) * distance, y: anchor.at.y + Math.sin(angle) * distance };
  const centre = { x: Math.round(at.x * 2) / 2, y: Math.round(at.y * 2) / 2 };
  const own = { x: centre.x - radius, y: centre.y - radius, width: 2 * radius, height: 2 * radius };
  if (anchor.words === undefined) return [{ centre, box: own }];
  const width = textWidth(anchor.words, wordSize * scale, 600);
  const sides = Math.cos(angle) < -0.01 ? (['end', 'start'] as const) : (['start', 'end'] as const);
  return sides.map((side) => {
    const x = side === 'start' ? centre.x + radius + wordGap : centre.x - radius - wordGap;
    const rect = { x: side === 'start' ? x : x - width, y: centre.y - 9 * scale, width, height: 18 * scale };
    return {
      centre,
      box: {
        x: Math.min(own.x, rect.x),
        y: own.y,
        width: width + wordGap + 2 * radius,
        height: own.height,
      },
      words: { text: anchor.words!, at: { x, y: centre.y + 5 * scale }, anchor: side, rect },
    };
  });
};

const places = (anchor: BalloonAnchor, scale: number): readonly Candidate[] =>
  distances.flatMap((distance) =>
    directions.flatMap((angle) => candidate(anchor, distance * scale, angle, scale)),
  );

const cheapest = (candidates: readonly Candidate[], costOf: (c: Candidate) => number): Candidate => {
  let best = candidates[0]!;
  let cost = costOf(best);
  for (const c of candidates) {
    const now = costOf(c);
    if (now >= cost - 1e-9) continue;
    cost = now;
    best = c;
  }
  return best;
};

/** A balloon whose words would cover something goes without them where that covers less: the list has them too. */
const withoutWordsInTheWay = (
  best: Candidate,
  { number, at }: BalloonAnchor,
  scale: number,
  costOf: (c: Candidate) => number,
): Candidate => {
  const cost = costOf(best);
  if (best.words === undefined || cost < freePlaceCost) return best;
  const bare = cheapest(places({ number, at }, scale), costOf);
  return costOf(bare) < cost - freePlaceCost / 2 ? bare : best;
};

/**
 * Where balloons float and their leaders run: near their anchors, off plates, labels and one another, across as few
 * cords as can be, without their words where only those are in the way. In the order of their numbers. A balloon that had a place before keeps it while that is still free.
 */
export const placeBalloons = (
  geometry: SheetGeometry,
  anchors: readonly BalloonAnchor[],
  { before = [], marks = [], scale = 1 }: BalloonOptions = {},
): readonly PlacedBalloon[] => {
  let crowd = crowdOf(geometry, marks);
  const kept = new Map(before.map((balloon) => [balloon.number, balloon]));
  return [...anchors]
    .sort((a, b) => a.number - b.number)
    .map((anchor): PlacedBalloon => {
      const was = kept.get(anchor.number);
      const near = crowdNear(crowd, anchor.at);
      const costOf = ({ centre, box }: Candidate): number => calloutCost(near, anchor.at, centre, box);
      const candidates = places(anchor, scale);
      const same =
        was !== undefined && was.anchor.x === anchor.at.x && was.anchor.y === anchor.at.y
          ? candidates.find(
              (c) =>
                c.centre.x === was.centre.x &&
                c.centre.y === was.centre.y &&
                c.words?.anchor === was.words?.anchor &&
                costOf(c) < freePlaceCost,
            )
          : undefined;
      const best = same ?? cheapest(candidates, costOf);
      const { centre, box, words } = withoutWordsInTheWay(best, anchor, scale, costOf);
      crowd = joinedBy(crowd, { box, leader: [anchor.at, centre] });
      return { number: anchor.number, anchor: anchor.at, centre, ...(words === undefined ? {} : { words }) };
    });
};
