import type { ElementRef } from '../../engine/model/design.ts';
import type { Point, SheetGeometry } from '../geometry.ts';
import { longestRun, pathAt } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import { anchorFor } from './anchor-for.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Level } from './level-of-detail.ts';
import type { Look } from './look.ts';
import { centredLine } from './text-shape.ts';

const radii = { near: 11.5, work: 11.5, plan: 16, far: 28 } as const;

/** Beside a cable rather than on it, above a level run and right of an upright one. */
const hopSpot = (
  geometry: SheetGeometry,
  ref: ElementRef,
  facts: DrawingFacts,
  level: Level,
): Point | undefined => {
  const anchor = anchorFor(geometry, ref, facts);
  if (anchor === undefined || ref.collection !== 'links') return anchor;
  const cable = geometry.cables.find((candidate) => candidate.links.includes(ref.id));
  const run = cable === undefined ? undefined : longestRun(cable.path);
  if (cable === undefined || run === undefined) return anchor;
  const off = radii[level] + 4;
  const upright = Math.abs(Math.sin(pathAt(cable.path, (run.from + run.to) / 2).angle)) > 0.7;
  return upright ? { x: anchor.x + off, y: anchor.y } : { x: anchor.x, y: anchor.y - off };
};

/** The numbers of a trace's steps where they happen. */
export const hopMarks = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] =>
  (look.decorations.hops ?? []).flatMap((hop) => {
    const at = hopSpot(geometry, hop.at, facts, look.level);
    if (at === undefined) return [];
    const radius = radii[look.level];
    return [
      group(
        [
          shape('circle', {
            cx: at.x,
            cy: at.y,
            r: radius,
            fill: paint(hop.failing ? 'red' : 'strip'),
            stroke: paint('paper'),
            strokeWidth: 1.5,
          }),
          centredLine(String(hop.number), at.x, at.y, {
            sizePx: radius * 1.13,
            weight: 700,
            anchor: 'middle',
            fill: paint(hop.failing ? 'red-ink' : 'strip-ink'),
          }),
        ],
        { key: `hop-${hop.number}`, data: { ref: hop.at, part: 'hop' } },
      ),
    ];
  });
