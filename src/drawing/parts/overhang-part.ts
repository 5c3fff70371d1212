import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import { pathAt, pathLength } from '../path-geometry.ts';
import type { Callout } from '../routing/callouts.ts';
import { calloutCost, crowdNear, crowdOf, directions, joinedBy } from '../routing/callouts.ts';
import { textWidth } from '../text-width.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint, segmentPaint } from '../theme/paint.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { palettesOf } from './cord.ts';
import { textLine } from './text-shape.ts';

const pipePx = 62;
const barPx = 14;
/** The overhang is drawn larger than to scale, or 50 B in 1,500 would be a sliver, but never longer than half the pipe. */
const overPx = (packetBytes: number, mtuBytes: number): number =>
  Math.min(pipePx / 2, Math.max(10, ((packetBytes - mtuBytes) / mtuBytes) * pipePx * 4));

/** A packet in a pipe that is too small for it: walls, flanges, bar, and what sticks out in red. */
export const overhangPipe = (
  x: number,
  y: number,
  packetBytes: number,
  mtuBytes: number,
  core: string,
  wordsAbove = false,
): readonly Shape[] => {
  const over = overPx(packetBytes, mtuBytes);
  const wall = barPx / 2 + 4.6;
  const flange = wall + 3;
  return [
    {
      ...shape('rect', { x, y: y - wall, width: pipePx, height: 2 * wall, fill: paint('paper') }),
      key: 'inside',
    },
    { ...shape('rect', { x, y: y - barPx / 2, width: pipePx, height: barPx, fill: core }), key: 'bar' },
    {
      ...shape('rect', { x: x + pipePx, y: y - 8, width: over, height: 16, fill: paint('red') }),
      key: 'over',
    },
    {
      ...shape('path', {
        d: `M${x} ${y - wall}h${pipePx}M${x} ${y + wall}h${pipePx}`,
        stroke: paint('ink'),
        strokeWidth: 3.2,
      }),
      key: 'walls',
    },
    {
      ...shape('path', { d: `M${x} ${y - flange}v${2 * flange}`, stroke: paint('ink'), strokeWidth: 4 }),
      key: 'flange',
    },
    {
      ...shape('path', {
        d: `M${x + pipePx} ${y - flange}v${2 * flange}`,
        stroke: paint('red'),
        strokeWidth: 4,
      }),
      key: 'far-flange',
    },
    textLine(`${packetBytes} in ${mtuBytes}`, x + pipePx / 2, wordsAbove ? y - flange - 6 : y + flange + 15, {
      sizePx: 14,
      weight: 600,
      fill: paint('red'),
      anchor: 'middle',
      haloPx: 4,
      key: 'words',
    }),
  ];
};

/** A pipe with its words, and where it stands: the middle of the pipe, and the place on the cord that it explains. */
interface StandingPipe {
  readonly overhang: Look['decorations']['overhangs'][number];
  readonly place: Point;
  readonly centre: Point;
  readonly box: Rect;
}

const distances = [52, 66, 82, 100, 122, 148, 180, 215, 255] as const;
/** Where along the cord, from its end, the pipe may point. */
const offsets = [26, 48] as const;

/** The words stand on the far side of the pipe, where no leader strikes them through. */
const isBelow = (place: Point, centre: Point): boolean => place.y > centre.y;

const boxAt = ({ x, y }: Point, packetBytes: number, mtuBytes: number, wordsAbove: boolean): Rect => {
  const left = Math.max(pipePx / 2 + 3, textWidth(`${packetBytes} in ${mtuBytes}`, 14, 600) / 2 + 2);
  const right = Math.max(left, pipePx / 2 + overPx(packetBytes, mtuBytes) + 3);
  return { x: x - left, y: wordsAbove ? y - 34 : y - 18, width: left + right, height: 52 };
};

/** Where the pipes of all overhanging packets stand: near the end where they no longer fit, clear of what is there. */
const standingPipes = (geometry: SheetGeometry, look: Look): readonly StandingPipe[] => {
  if (look.level === 'far' || look.decorations.overhangs.length === 0) return [];
  let crowd = crowdOf(geometry);
  return look.decorations.overhangs.flatMap((overhang) => {
    const jacket = geometry.jackets.find((j) => j.lanes.some((l) => l.tunnel === overhang.tunnel));
    const lane = jacket?.lanes.find((l) => l.tunnel === overhang.tunnel);
    if (jacket === undefined || lane === undefined || jacket.noWay) return [];
    const length = pathLength(lane.path);
    let best: StandingPipe | undefined;
    let least = Infinity;
    for (const offset of offsets) {
      const off = Math.min(length / 2, offset);
      const { x, y } = pathAt(lane.path, overhang.end === 'a' ? off : length - off);
      const place = { x, y };
      const near = crowdNear(crowd, place);
      for (const distance of distances)
        for (const angle of directions) {
          const centre = { x: x + Math.cos(angle) * distance, y: y + Math.sin(angle) * distance };
          const box = boxAt(centre, overhang.packetBytes, overhang.mtuBytes, isBelow(place, centre));
          const cost = calloutCost(near, place, centre, box);
          if (cost >= least - 1e-9) continue;
          least = cost;
          best = { overhang, place, centre, box };
        }
    }
    if (best === undefined) return [];
    crowd = joinedBy(crowd, { box: best.box, leader: [best.place, best.centre] });
    return [best];
  });
};

/** Where the balloons point that belong to pipes: the near flange. */
export const overhangAnchors = (geometry: SheetGeometry, look: Look): ReadonlyMap<number, Point> =>
  new Map(
    standingPipes(geometry, look).flatMap(({ overhang, centre }) =>
      overhang.balloon === undefined
        ? []
        : [[overhang.balloon, { x: centre.x - pipePx / 2, y: centre.y }] as const],
    ),
  );

/** The room that pipes take with their leaders, for what is placed after them. */
export const overhangCallouts = (geometry: SheetGeometry, look: Look): readonly Callout[] =>
  standingPipes(geometry, look).map(({ box, place, centre }) => ({ box, leader: [place, centre] }));

/** Beside the cord, at the end where the packet no longer fits, the pipe with what overhangs and a leader to the place. */
export const overhangParts = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] =>
  standingPipes(geometry, look).flatMap(({ overhang, place, centre }) => {
    const tunnel = facts.tunnels[overhang.tunnel];
    if (tunnel === undefined) return [];
    const core = segmentPaint(palettesOf(tunnel.segments)[0] ?? 'none').core;
    const leader = `M${place.x.toFixed(1)} ${place.y.toFixed(1)}L${centre.x.toFixed(1)} ${centre.y.toFixed(1)}`;
    return [
      group(
        [
          {
            ...shape('path', { d: leader, stroke: paint('paper'), strokeWidth: 4.5 }),
            key: 'leader-halo',
          },
          { ...shape('path', { d: leader, stroke: paint('red'), strokeWidth: 1.6 }), key: 'leader' },
          {
            ...shape('circle', {
              cx: place.x,
              cy: place.y,
              r: 3.2,
              fill: paint('red'),
              stroke: paint('paper'),
              strokeWidth: 1.2,
            }),
            key: 'dot',
          },
          ...overhangPipe(
            centre.x - pipePx / 2,
            centre.y,
            overhang.packetBytes,
            overhang.mtuBytes,
            core,
            isBelow(place, centre),
          ),
        ],
        {
          key: `overhang-${overhang.tunnel}-${overhang.end}`,
          data: { ref: { collection: 'tunnels', id: overhang.tunnel }, part: 'overhang' },
        },
      ),
    ];
  });
