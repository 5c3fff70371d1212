import type { Decorations } from '../decorations.ts';
import { elementKey } from '../decorations.ts';
import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import { calloutCost, crowdNear, crowdOf, directions, joinedBy } from '../routing/callouts.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import { anchorFor } from './anchor-for.ts';
import { balloonScale } from './balloon-mark.ts';
import { placedBalloons } from './balloon-part.ts';
import { cutBoxes } from './cuts.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { centredLine } from './text-shape.ts';

type Flag = NonNullable<Decorations['flags']>[number];

const widthPx = 26;
const heightPx = 21;
const foldPx = 7;
const distances = [30, 42, 56, 74, 96, 122, 152] as const;
const balloonRadiusPx = 14;

/** A slip of paper with its corner folded: no finding looks like it. Solid where a change is suggested. */
const slip = ({ count, suggests }: Flag, anchor: Point, { x, y, width, height }: Rect): readonly Shape[] => {
  const scale = width / widthPx;
  const fold = foldPx * scale;
  const ink = paint('blue');
  const centre = { x: x + width / 2, y: y + height / 2 };
  const leader = `M${centre.x} ${centre.y}L${anchor.x.toFixed(1)} ${anchor.y.toFixed(1)}`;
  return [
    { ...shape('path', { d: leader, stroke: paint('paper'), strokeWidth: 4.5 * scale }), key: 'leader-rim' },
    {
      ...shape('path', {
        d: leader,
        stroke: ink,
        strokeWidth: 1.4 * scale,
        strokeDasharray: `${3 * scale} ${2.4 * scale}`,
      }),
      key: 'leader',
    },
    {
      ...shape('path', {
        d: `M${x} ${y}h${width - fold}l${fold} ${fold}v${height - fold}h${-width}z`,
        fill: suggests ? ink : paint('paper'),
        stroke: suggests ? paint('paper') : ink,
        strokeWidth: 1.6 * scale,
      }),
      key: 'paper',
    },
    {
      ...shape('path', {
        d: `M${x + width - fold} ${y}v${fold}h${fold}`,
        fill: 'none',
        stroke: suggests ? paint('paper') : ink,
        strokeWidth: 1.4 * scale,
      }),
      key: 'fold',
    },
    {
      ...centredLine(
        suggests ? `±${count}` : String(count),
        centre.x - (suggests ? 1 : 0),
        centre.y + scale,
        {
          sizePx: 13 * scale,
          weight: 700,
          anchor: 'middle',
          fill: suggests ? paint('paper') : ink,
        },
      ),
      key: 'count',
    },
  ];
};

/** Slips of threads beside what they are about, off plates, names, balloons and one another. */
export const commentSlips = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] => {
  const flags = look.decorations.flags ?? [];
  if (flags.length === 0) return [];
  const scale = balloonScale[look.level];
  const radius = balloonRadiusPx * scale;
  let crowd = crowdOf(geometry, [
    ...cutBoxes(geometry, look).map((box) => ({ box })),
    ...placedBalloons(geometry, facts, look).map(({ centre, anchor, words }) => ({
      box: {
        x: Math.min(centre.x - radius, words?.rect.x ?? Infinity),
        y: centre.y - radius,
        width: 2 * radius + (words?.rect.width ?? 0),
        height: 2 * radius,
      },
      leader: [anchor, centre] as const,
    })),
  ]);
  return flags.flatMap((flag) => {
    const anchor = anchorFor(geometry, flag.at, facts);
    if (anchor === undefined) return [];
    const near = crowdNear(crowd, anchor);
    const size = { width: widthPx * scale, height: heightPx * scale };
    let best: { readonly centre: Point; readonly box: Rect } | undefined;
    let cost = Infinity;
    for (const distance of distances)
      for (const angle of directions) {
        const centre = {
          x: Math.round(anchor.x + Math.cos(angle) * distance * scale),
          y: Math.round(anchor.y + Math.sin(angle) * distance * scale),
        };
        const box = { x: centre.x - size.width / 2, y: centre.y - size.height / 2, ...size };
        const now = calloutCost(near, anchor, centre, box);
        if (now >= cost - 1e-9) continue;
        cost = now;
        best = { centre, box };
      }
    if (best === undefined) return [];
    crowd = joinedBy(crowd, { box: best.box, leader: [anchor, best.centre] });
    return [
      group(slip(flag, anchor, best.box), {
        key: `slip-${elementKey(flag.at)}`,
        data: { ref: flag.at, part: 'slip' },
      }),
    ];
  });
};
