import type { SheetGeometry } from '../geometry.ts';
import { pathAt, pathLength } from '../path-geometry.ts';
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
    textLine(`${packetBytes} in ${mtuBytes}`, x + pipePx / 2, y + flange + 15, {
      sizePx: 14,
      weight: 600,
      fill: paint('red'),
      anchor: 'middle',
      haloPx: 4,
      key: 'words',
    }),
  ];
};

/** Beside the cord, at the end where the packet no longer fits, the pipe with what overhangs and a leader to the place. */
export const overhangParts = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] =>
  look.level === 'far'
    ? []
    : look.decorations.overhangs.flatMap((overhang) => {
        const jacket = geometry.jackets.find((j) => j.lanes.some((l) => l.tunnel === overhang.tunnel));
        const lane = jacket?.lanes.find((l) => l.tunnel === overhang.tunnel);
        const tunnel = facts.tunnels[overhang.tunnel];
        if (jacket === undefined || lane === undefined || tunnel === undefined || jacket.noWay) return [];
        const length = pathLength(lane.path);
        const off = Math.min(length / 2, 26);
        const place = pathAt(lane.path, overhang.end === 'a' ? off : length - off);
        // Beside the jacket on its lower or right side, clear of it.
        const clear = jacket.width / 2 + 46;
        const right = { x: -Math.sin(place.angle), y: Math.cos(place.angle) };
        const side = Math.abs(right.y) > 0.3 ? Math.sign(right.y) : Math.sign(right.x);
        const centre = { x: place.x + right.x * side * clear, y: place.y + right.y * side * clear };
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
              ...overhangPipe(centre.x - pipePx / 2, centre.y, overhang.packetBytes, overhang.mtuBytes, core),
            ],
            {
              key: `overhang-${overhang.tunnel}-${overhang.end}`,
              data: { ref: { collection: 'tunnels', id: overhang.tunnel }, part: 'overhang' },
            },
          ),
        ];
      });
