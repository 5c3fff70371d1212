import { elementKey } from '../decorations.ts';
import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import { calloutCost, crowdNear, crowdOf, directions, joinedBy } from '../routing/callouts.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { textWidth } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import { anchorFor } from './anchor-for.ts';
import { balloonScale } from './balloon-mark.ts';
import { cutBoxes } from './cuts.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { centredLine } from './text-shape.ts';
import { siteNameBoxes } from './site-part.ts';

type Tag = NonNullable<Look['decorations']['tags']>[number];

const textPx = 13.5;
const padPx = 7;
const heightPx = 21;
const barPx = 5;
const whole = 1_000_000;
/** How much of its length the bar leaves for what sticks out. */
const overShare = 0.24;
const distances = [26, 38, 52, 70, 92, 120, 150] as const;

const sizeOf = ({ text, fillPerMillion }: Tag, scale: number): { width: number; height: number } => ({
  width: Math.round(textWidth(text, textPx * scale, 600) + 2 * padPx * scale),
  height: (heightPx + (fillPerMillion === undefined ? 0 : barPx + 1)) * scale,
});

const boxAt = (centre: Point, { width, height }: { width: number; height: number }): Rect => ({
  x: Math.round(centre.x - width / 2),
  y: Math.round(centre.y - height / 2),
  width,
  height,
});

/** How full: an outlined bar with its end marked, and what doesn't fit beyond the mark, hatched by gaps. */
const fillBar = (box: Rect, tag: Tag, scale: number): readonly Shape[] => {
  if (tag.fillPerMillion === undefined) return [];
  const room = box.width - 2 * padPx * scale;
  const [x, y, height] = [box.x + padPx * scale, box.y + (heightPx - 2) * scale, barPx * scale];
  const end = room * (1 - overShare);
  const share = tag.fillPerMillion / whole;
  const over = Math.min(overShare * room, (share - 1) * end);
  const ink = paint(tag.strong === true ? 'strip-ink' : 'ink');
  return [
    {
      ...shape('rect', { x, y, width: end, height, fill: 'none', stroke: ink, strokeWidth: scale }),
      key: 'pipe',
    },
    { ...shape('rect', { x, y, width: Math.min(1, share) * end, height, fill: ink }), key: 'fill' },
    {
      ...shape('path', {
        d: `M${x + end} ${y - 2 * scale}v${height + 4 * scale}`,
        stroke: ink,
        strokeWidth: 2 * scale,
      }),
      key: 'end',
    },
    ...(over > 0
      ? [
          {
            ...shape('path', {
              d: `M${x + end} ${y + height / 2}h${over}`,
              stroke: ink,
              strokeWidth: height,
              strokeDasharray: `${2 * scale} ${2 * scale}`,
            }),
            key: 'over',
          },
        ]
      : []),
  ];
};

const tagMark = (tag: Tag, anchor: Point, box: Rect, scale: number): readonly Shape[] => {
  const strong = tag.strong === true;
  const centre = { x: box.x + box.width / 2, y: box.y + box.height / 2 };
  const leader = `M${centre.x} ${centre.y}L${anchor.x.toFixed(1)} ${anchor.y.toFixed(1)}`;
  return [
    {
      ...shape('path', { d: leader, stroke: paint('paper'), strokeWidth: 4.5 * scale }),
      key: 'leader-rim',
    },
    { ...shape('path', { d: leader, stroke: paint('ink'), strokeWidth: 1.4 * scale }), key: 'leader' },
    {
      ...shape('circle', {
        cx: anchor.x,
        cy: anchor.y,
        r: 3 * scale,
        fill: paint('ink'),
        stroke: paint('paper'),
        strokeWidth: 1.2,
      }),
      key: 'dot',
    },
    {
      ...shape('rect', {
        ...box,
        fill: paint(strong ? 'strip' : 'plate'),
        stroke: paint(strong ? 'paper' : 'ink'),
        strokeWidth: 1.4 * scale,
      }),
      key: 'plate',
    },
    {
      ...centredLine(
        tag.text,
        centre.x,
        box.y + (heightPx / 2) * scale - (tag.fillPerMillion === undefined ? 0 : scale),
        {
          sizePx: textPx * scale,
          weight: 600,
          anchor: 'middle',
          fill: paint(strong ? 'strip-ink' : 'ink'),
        },
      ),
      key: 'words',
    },
    ...fillBar(box, tag, scale),
  ];
};

/** Where a tag may point: a whole device at the middle of any side of its plate, the rest where they are known by. */
const anchorsOf = (geometry: SheetGeometry, tag: Tag, facts: DrawingFacts): readonly Point[] => {
  const { collection, id, port, member } = tag.at;
  const plate =
    collection === 'devices' && port === undefined && member === undefined
      ? geometry.devices.find((device) => device.id === id && device.kind !== 'ha-pair')?.plates[0]?.rect
      : undefined;
  if (plate !== undefined) {
    const { x, y, width, height } = plate;
    return [
      { x: x + width / 2, y },
      { x: x + width / 2, y: y + height },
      { x, y: y + height / 2 },
      { x: x + width, y: y + height / 2 },
    ];
  }
  const anchor = anchorFor(geometry, tag.at, facts);
  return anchor === undefined ? [] : [anchor];
};

/** Tags beside what they tell of, off plates, rings, names and one another. */
export const tagParts = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] => {
  const tags = look.decorations.tags ?? [];
  if (tags.length === 0) return [];
  const scale = balloonScale[look.level];
  let crowd = crowdOf(geometry, [
    ...cutBoxes(geometry, look).map((box) => ({ box })),
    ...siteNameBoxes(geometry, facts, look),
  ]);
  const strongFirst = [...tags].sort((x, y) => Number(y.strong === true) - Number(x.strong === true));
  return strongFirst.flatMap((tag) => {
    const size = sizeOf(tag, scale);
    let best: { readonly anchor: Point; readonly centre: Point; readonly box: Rect } | undefined;
    let cost = Infinity;
    for (const anchor of anchorsOf(geometry, tag, facts)) {
      const near = crowdNear(crowd, anchor);
      for (const distance of distances)
        for (const angle of directions) {
          // Measured from the plate's edge, so that a wide one stands no nearer than a small one.
          const reach = distance * scale;
          const centre = {
            x: anchor.x + Math.cos(angle) * (reach + size.width / 2 - heightPx / 2),
            y: anchor.y + Math.sin(angle) * reach,
          };
          const box = boxAt(centre, size);
          const now = calloutCost(near, anchor, centre, box);
          if (now >= cost - 1e-9) continue;
          cost = now;
          best = { anchor, centre, box };
        }
    }
    if (best === undefined) return [];
    crowd = joinedBy(crowd, { box: best.box, leader: [best.anchor, best.centre] });
    return [
      group(tagMark(tag, best.anchor, best.box, scale), {
        key: `tag-${elementKey(tag.at)}`,
        data: { ref: tag.at, part: 'tag' },
      }),
    ];
  });
};
