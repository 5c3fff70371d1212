import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import { strip } from '../parts/sizes.ts';
import { cableBoxes, jacketBoxes, trunkBoxes } from './free-places.ts';
import { contains, covers, frameLines, grown, overlap } from './rects.ts';

// Balloons and fault marks stand beside what they point at, with a leader. Where they stand is a matter of what they
// would cover and what the leader would cross.

/** What a callout may come to lie on or its leader may cross. */
export interface Crowd {
  /** Callouts stay inside it. */
  readonly room: Rect;
  /** Plates, rings, ferrules, words, marks and callouts placed before. */
  readonly solid: readonly Rect[];
  /** Names on plates, which no leader should strike through. */
  readonly names: readonly Rect[];
  readonly cords: readonly Rect[];
  /** Thin lines: frames of sites and edges of bands. */
  readonly lines: readonly Rect[];
  /** Leaders of callouts placed before. */
  readonly leaders: readonly (readonly [Point, Point])[];
}

/** Something that stands beside what it points at. */
export interface Callout {
  readonly box: Rect;
  readonly leader?: readonly [Point, Point];
}

/** Everything on a sheet that callouts keep off. */
export const crowdOf = (geometry: SheetGeometry, marks: readonly Callout[] = []): Crowd => ({
  room: geometry.sheet.frame,
  solid: [
    geometry.sheet.titleBlock,
    geometry.sheet.legend,
    ...geometry.devices.flatMap(({ plates, bracket }) => [
      ...plates.map((plate) => plate.rect),
      ...(bracket === undefined ? [] : [bracket.rect]),
    ]),
    ...geometry.jackets.flatMap((jacket) => jacket.cuffs.map((cuff) => cuff.rect)),
    ...geometry.rings.flatMap((ring) => [
      ring.label.rect,
      { x: ring.centre.x - 14, y: ring.centre.y - 14, width: 28, height: 28 },
      ...ring.groups.flatMap((group) => group.ferrules.map((ferrule) => ferrule.rect)),
    ]),
    ...geometry.cables.flatMap((cable) => (cable.label === undefined ? [] : [cable.label.rect])),
    ...geometry.bands.map((band) => band.text.rect),
    ...geometry.notes.map((note) => note.rect),
    ...geometry.sites.map((site) => ({ x: site.rect.x + 16, y: site.rect.y - 10, width: 120, height: 20 })),
    ...geometry.devices.flatMap(({ kind, plates }) =>
      kind === 'ha-pair' ? [{ x: plates[0]!.rect.x, y: plates[0]!.rect.y - 24, width: 106, height: 20 }] : [],
    ),
    ...marks.map(({ box }) => box),
  ],
  names: geometry.devices.flatMap(({ kind, plates }) =>
    plates.map(({ rect }) =>
      kind === 'host'
        ? rect
        : { x: rect.x + strip.nameAt - 6, y: rect.y + 4, width: rect.width - strip.nameAt - 14, height: 19 },
    ),
  ),
  cords: [...jacketBoxes(geometry.jackets), ...trunkBoxes(geometry.trunks), ...cableBoxes(geometry.cables)],
  lines: [
    ...geometry.sites.flatMap((site) => frameLines(site.rect)),
    ...geometry.bands.flatMap((band) => band.limbs.flatMap(frameLines)),
  ],
  leaders: marks.flatMap(({ leader }) => (leader === undefined ? [] : [leader])),
});

const farthestPx = 460;

/** The part of a crowd that a callout of this anchor may come near. */
export const crowdNear = (crowd: Crowd, { x, y }: Point): Crowd => {
  const reach = { x: x - farthestPx, y: y - farthestPx, width: 2 * farthestPx, height: 2 * farthestPx };
  const near = (rects: readonly Rect[]): readonly Rect[] => rects.filter((rect) => overlap(rect, reach));
  return {
    ...crowd,
    solid: near(crowd.solid),
    names: near(crowd.names),
    cords: near(crowd.cords),
    lines: near(crowd.lines),
  };
};

/** The crowd with one more callout in it. */
export const joinedBy = (crowd: Crowd, { box, leader }: Callout): Crowd => ({
  ...crowd,
  solid: [...crowd.solid, box],
  leaders: leader === undefined ? crowd.leaders : [...crowd.leaders, leader],
});

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

const leadersCross = ([p, q]: readonly [Point, Point], [r, s]: readonly [Point, Point]): boolean => {
  const side = (a: Point, b: Point, c: Point): number =>
    (b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x);
  return side(p, q, r) * side(p, q, s) < 0 && side(r, s, p) * side(r, s, q) < 0;
};

/** A place that costs less than this covers nothing but cords. */
export const freePlaceCost = 1000;

/** What it costs to put a box here with a leader to its anchor; the distance alone where nothing is in the way. */
export const calloutCost = (crowd: Crowd, anchor: Point, centre: Point, box: Rect): number => {
  const space = grown(box, 2);
  const leader = [anchor, centre] as const;
  const count = (rects: readonly Rect[], meets: (rect: Rect) => boolean): number =>
    rects.reduce((sum, rect) => sum + (meets(rect) ? 1 : 0), 0);
  const covered = count(crowd.solid, (rect) => overlap(rect, space)) + (covers(crowd.room, space) ? 0 : 3);
  const passed = (rect: Rect): boolean => meetsRect(anchor, centre, rect);
  return (
    1000 * covered +
    500 * count(crowd.cords, (rect) => overlap(rect, space)) +
    200 * count(crowd.solid, (rect) => !contains(grown(rect, 1), anchor) && passed(rect)) +
    150 * count(crowd.names, passed) +
    40 * count(crowd.cords, (rect) => !contains(rect, anchor) && passed(rect)) +
    30 * count(crowd.lines, (rect) => overlap(rect, box)) +
    crowd.leaders.reduce(
      (sum, other) =>
        sum + (leadersCross(leader, other) ? 150 : 0) + (meetsRect(other[0], other[1], space) ? 400 : 0),
      0,
    ) +
    Math.hypot(centre.x - anchor.x, centre.y - anchor.y)
  );
};

/** 24 directions: level and upright ones first, the others by how far they are from those. */
export const directions: readonly number[] = Array.from({ length: 24 }, (_, step) => step)
  .sort((a, b) => {
    const off = (step: number): number => Math.min(step % 6, 6 - (step % 6));
    return off(a) - off(b) || a - b;
  })
  .map((step) => (step * Math.PI) / 12);
