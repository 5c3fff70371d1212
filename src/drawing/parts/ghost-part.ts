import type { Side } from '../../engine/model/layout.ts';
import type { Path, Point, Rect, SheetGeometry } from '../geometry.ts';
import { pathAt, pathData, pathLength } from '../path-geometry.ts';
import type { Crowd } from '../routing/callouts.ts';
import { crowdOf } from '../routing/callouts.ts';
import { overlap, runRect } from '../routing/rects.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { textWidth } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import { plugSpot } from './plug-spot.ts';
import type { Look } from './look.ts';
import { textLine } from './text-shape.ts';

const acceptPx = 26;
const jogRadius = 7;

const level = (side: Side): boolean => side === 'left' || side === 'right';

/** Straight where the ends face each other, else with one or two square corners. */
const ghostPath = (from: Spot, to: Spot): Path => {
  const straight: Path = [
    { kind: 'move', to: from.at },
    { kind: 'line', to: to.at },
  ];
  const [dx, dy] = [to.at.x - from.at.x, to.at.y - from.at.y];
  if (Math.abs(dx) < 2 || Math.abs(dy) < 2) return straight;
  const r = Math.min(jogRadius, Math.abs(dx) / 2, Math.abs(dy) / 2);
  const corners: readonly Point[] =
    level(from.side) && level(to.side)
      ? [
          { x: from.at.x + dx / 2, y: from.at.y },
          { x: from.at.x + dx / 2, y: to.at.y },
        ]
      : level(from.side)
        ? [{ x: to.at.x, y: from.at.y }]
        : level(to.side)
          ? [{ x: from.at.x, y: to.at.y }]
          : [
              { x: from.at.x, y: from.at.y + dy / 2 },
              { x: to.at.x, y: from.at.y + dy / 2 },
            ];
  const points = [from.at, ...corners, to.at];
  const towards = (a: Point, b: Point): Point => {
    const length = Math.hypot(b.x - a.x, b.y - a.y) || 1;
    return { x: a.x + ((b.x - a.x) / length) * r, y: a.y + ((b.y - a.y) / length) * r };
  };
  return [
    { kind: 'move', to: from.at },
    ...corners.flatMap((corner, i) => {
      const before = points[i] ?? corner;
      const after = points[i + 2] ?? corner;
      const turn =
        (corner.x - before.x) * (after.y - corner.y) - (corner.y - before.y) * (after.x - corner.x);
      return [
        { kind: 'line' as const, to: towards(corner, before) },
        { kind: 'arc' as const, to: towards(corner, after), radius: r, clockwise: turn > 0 },
      ];
    }),
    { kind: 'line', to: to.at },
  ];
};

interface Spot {
  readonly at: Point;
  readonly side: Side;
}

const hollowEnd = ({ x, y }: Point, key: string): Shape => ({
  ...shape('circle', {
    cx: x,
    cy: y,
    r: 6,
    fill: paint('plate'),
    stroke: paint('blue'),
    strokeWidth: 2.2,
  }),
  key,
});

const acceptSquare = (at: Point): Shape => {
  const half = acceptPx / 2;
  return group(
    [
      shape('rect', {
        x: at.x - half,
        y: at.y - half,
        width: acceptPx,
        height: acceptPx,
        rx: 3,
        fill: paint('blue'),
      }),
      shape('path', {
        d: `M${at.x - 6.5} ${at.y}h13M${at.x} ${at.y - 6.5}v13`,
        stroke: paint('blue-ink'),
        strokeWidth: 2.4,
      }),
    ],
    { key: 'accept' },
  );
};

interface StandingGhost {
  readonly ghost: Look['decorations']['ghosts'][number];
  readonly from: Point;
  readonly to: Point;
  readonly path: Path;
  /** Where it is accepted. */
  readonly middle: Point;
  readonly label: GhostLabel;
}

interface GhostLabel {
  readonly x: number;
  readonly baseline: number;
  readonly width: number;
}

const standingGhosts = (geometry: SheetGeometry, look: Look): readonly StandingGhost[] => {
  if (look.decorations.ghosts.length === 0) return [];
  const crowd = crowdOf(geometry);
  return look.decorations.ghosts.flatMap((ghost) => {
    const from = plugSpot(geometry, ghost.from, ghost.to);
    const to = plugSpot(geometry, ghost.to, ghost.from);
    if (from === undefined || to === undefined) return [];
    const path = ghostPath(from, to);
    const middle = pathAt(path, pathLength(path) / 2);
    return [
      { ghost, from: from.at, to: to.at, path, middle, label: labelFor(ghost.label, middle, path, crowd) },
    ];
  });
};

const labelRect = ({ x, baseline, width }: GhostLabel): Rect => ({ x, y: baseline - 12, width, height: 15 });

/** Beside the square, on the side where the words cover least. */
const labelFor = (words: string, { x, y }: Point, path: Path, crowd: Crowd): GhostLabel => {
  const width = textWidth(words, 13, 600);
  const off = acceptPx / 2;
  const candidates: readonly GhostLabel[] = [
    { x: x - width / 2, baseline: y + off + 15, width },
    { x: x + off + 8, baseline: y + 4.5, width },
    { x: x - width / 2, baseline: y - off - 6, width },
    { x: x - off - 8 - width, baseline: y + 4.5, width },
    { x: x - off, baseline: y + off + 15, width },
    { x: x + off - width, baseline: y + off + 15, width },
    { x: x - off, baseline: y - off - 6, width },
    { x: x - width / 2, baseline: y + off + 28, width },
  ];
  const own = path.slice(1).map(({ to }, i) => runRect(path[i]!.to, to, 2, 2));
  const covered = (label: GhostLabel): number => {
    const rect = labelRect(label);
    const hits = (rects: readonly Rect[]): number => rects.filter((other) => overlap(other, rect)).length;
    return 10 * hits(crowd.solid) + 3 * hits(crowd.cords) + 3 * hits(own);
  };
  return candidates.reduce((best, next) => (covered(next) < covered(best) ? next : best));
};

/** The room that ghosts' squares and words take, for what is placed after them. */
export const ghostBoxes = (geometry: SheetGeometry, look: Look): readonly Rect[] =>
  standingGhosts(geometry, look).flatMap(({ middle, label }) => [
    { x: middle.x - acceptPx / 2, y: middle.y - acceptPx / 2, width: acceptPx, height: acceptPx },
    labelRect(label),
  ]);

/** Cables that would cure something, in blue pencil, each with a square that accepts it. */
export const ghostParts = (geometry: SheetGeometry, look: Look): readonly Shape[] =>
  standingGhosts(geometry, look).map(({ ghost, from, to, path, middle, label }) => {
    const words = look.level === 'near' || look.level === 'work';
    return group(
      [
        {
          ...shape('path', {
            d: pathData(path),
            fill: 'none',
            stroke: paint('blue'),
            strokeWidth: 2.6,
            strokeDasharray: '7 5',
          }),
          key: 'line',
        },
        hollowEnd(from, 'from'),
        hollowEnd(to, 'to'),
        acceptSquare(middle),
        words &&
          ghost.label !== '' &&
          textLine(ghost.label, label.x, label.baseline, {
            sizePx: 13,
            weight: 600,
            fill: paint('blue'),
            haloPx: 4,
            key: 'label',
          }),
      ],
      { key: ghost.id, data: { part: 'accept' }, attrs: { className: 'ghost' } },
    );
  });
