import type { Side } from '../../engine/model/layout.ts';
import type { Path, Point, SheetGeometry } from '../geometry.ts';
import { pathAt, pathData, pathLength } from '../path-geometry.ts';
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

/** Cables that would cure something, in blue pencil, each with a square that accepts it. */
export const ghostParts = (geometry: SheetGeometry, look: Look): readonly Shape[] =>
  look.decorations.ghosts.flatMap((ghost) => {
    const from = plugSpot(geometry, ghost.from, ghost.to);
    const to = plugSpot(geometry, ghost.to, ghost.from);
    if (from === undefined || to === undefined) return [];
    const path = ghostPath(from, to);
    const middle = pathAt(path, pathLength(path) / 2);
    const words = look.level === 'near' || look.level === 'work';
    const upright = Math.abs(Math.sin(middle.angle)) > 0.7;
    const width = textWidth(ghost.label, 13, 600);
    return [
      group(
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
          hollowEnd(from.at, 'from'),
          hollowEnd(to.at, 'to'),
          acceptSquare(middle),
          words &&
            ghost.label !== '' &&
            textLine(
              ghost.label,
              upright ? middle.x + acceptPx / 2 + 8 : middle.x - width / 2,
              upright ? middle.y + 4.5 : middle.y + acceptPx / 2 + 15,
              { sizePx: 13, weight: 600, fill: paint('blue'), haloPx: 4, key: 'label' },
            ),
        ],
        { key: ghost.id, data: { part: 'accept' }, attrs: { className: 'ghost' } },
      ),
    ];
  });
