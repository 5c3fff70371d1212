import type { LoopStep } from '../decorations.ts';
import type { Path, SheetGeometry } from '../geometry.ts';
import { joinPaths, pathAt, pathLength, reversePath } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { Level } from './level-of-detail.ts';
import type { Look } from './look.ts';

const chevron = 'M-4.5 -9L4 0L-4.5 9L-9.5 9L-1.6 0L-9.5 -9Z';

/** From one chevron to the next, their size, and what they keep clear of cuffs and ferrules. */
export const chevronRun: {
  readonly [level in Level]: { readonly pitchPx: number; readonly scale: number; readonly clearPx: number };
} = {
  near: { pitchPx: 26, scale: 1, clearPx: 15 },
  work: { pitchPx: 26, scale: 1, clearPx: 15 },
  plan: { pitchPx: 42, scale: 1.5, clearPx: 22 },
  far: { pitchPx: 84, scale: 3, clearPx: 44 },
};

export interface ChevronPlace {
  readonly x: number;
  readonly y: number;
  readonly degrees: number;
}

/** Places along a path, `phasePx` further on than at rest; those that drift out at the end come in again at the start. */
export const chevronPlaces = (path: Path, level: Level, phasePx = 0): readonly ChevronPlace[] => {
  const { pitchPx, clearPx } = chevronRun[level];
  const room = pathLength(path) - 2 * clearPx;
  if (room <= 0) return [];
  const count = Math.floor(room / pitchPx) + 1;
  // Centred at rest, so that both ends keep the same distance from their cuffs.
  const start = clearPx + (room - (count - 1) * pitchPx) / 2;
  const shift = ((phasePx % pitchPx) + pitchPx) % pitchPx;
  return Array.from({ length: count }, (_, i) => {
    let along = start + i * pitchPx + shift;
    if (along > clearPx + room) along -= count * pitchPx;
    if (along < clearPx) along = clearPx + room;
    const { x, y, angle } = pathAt(path, along);
    return { x, y, degrees: (angle * 180) / Math.PI };
  });
};

/** The way one step of a loop takes, in the loop's direction. Chevrons run from cuff to cuff, on bare cords from ferrule to ferrule. */
const pathOfStep = (step: LoopStep, geometry: SheetGeometry): Path | undefined => {
  const turn = (path: Path): Path => (step.direction === 'a-to-b' ? path : reversePath(path));
  if (step.collection === 'links') {
    const cable = geometry.cables.find((candidate) => candidate.links.includes(step.id));
    return cable === undefined || cable.noWay ? undefined : turn(cable.path);
  }
  for (const jacket of geometry.jackets) {
    const lane = jacket.lanes.find((candidate) => candidate.tunnel === step.id);
    if (lane === undefined || jacket.noWay) continue;
    return turn(
      jacket.kind === 'bare' ? joinPaths(lane.tails.a, lane.path, reversePath(lane.tails.b)) : lane.path,
    );
  }
  return undefined;
};

const round = (value: number): number => Math.round(value * 100) / 100;

/** Chevrons along every cord and cable of each loop, all turning the same way. `phasePx` lets them drift: 26 px is one pitch at every level. */
export const loopChevrons = (geometry: SheetGeometry, look: Look, phasePx = 0): readonly Shape[] =>
  look.decorations.loops.map(({ steps }, i) =>
    group(
      steps.map((step) => {
        const path = pathOfStep(step, geometry);
        if (path === undefined) return undefined;
        const { scale, pitchPx } = chevronRun[look.level];
        const places = chevronPlaces(path, look.level, (phasePx / chevronRun.near.pitchPx) * pitchPx);
        const size = step.collection === 'links' ? scale * 0.72 : scale;
        return group(
          places.map(({ x, y, degrees }, k) => ({
            ...shape('path', {
              d: chevron,
              className: 'chevron',
              transform: `translate(${round(x)} ${round(y)}) rotate(${round(degrees)})${size === 1 ? '' : ` scale(${size})`}`,
              fill: paint('red'),
              stroke: paint('paper'),
              strokeWidth: 2.2,
              strokeLinejoin: 'round',
              paintOrder: 'stroke',
            }),
            key: String(k),
          })),
          {
            key: `${step.collection}-${step.id}`,
            data: { ref: { collection: step.collection, id: step.id }, part: 'loop' },
          },
        );
      }),
      { key: `loop-${i}`, attrs: { className: 'loop' } },
    ),
  );
