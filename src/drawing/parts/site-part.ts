import { elementKey } from '../decorations.ts';
import type { Rect, SheetGeometry, SiteGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { fitText } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import { cornerTicks } from './highlight.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, tonesOf } from './look.ts';
import { site as size } from './sizes.ts';
import { capShift, fittedLines } from './text-shape.ts';

const nameSizes = { near: 16, work: 16, plan: 23, far: 44 } as const;
const leastNameSizes = { near: 12, work: 13, plan: 18, far: 30 } as const;
const aroundName = 10;
const countsPx = 13;

/** The lid of a collapsed site, and on its lower edge what it keeps back. */
const lid = (
  site: SiteGeometry,
  facts: DrawingFacts,
  look: Look,
  colour: Parameters<typeof paint>[0],
): readonly Shape[] => {
  const { x, y, width, height } = site.rect;
  const words = facts.keptBack[site.id] ?? '';
  const isRead = (look.level === 'near' || look.level === 'work') && words !== '';
  const fitted = fitText(words, { maxWidthPx: width - 2 * aroundName - 16, sizePx: countsPx, minSizePx: 11 });
  const middle = y + height;
  const plateWidth = fitted.widthPx + 12;
  const plateX = site.free === 'right' ? x + width - size.nameAt + 6 - plateWidth : x + size.nameAt - 6;
  return [
    {
      ...shape('rect', {
        x,
        y,
        width,
        height,
        fill: paint('raise'),
        stroke: paint(colour),
        strokeWidth: look.level === 'far' ? 4 : look.level === 'plan' ? 2.6 : 1.8,
      }),
      key: 'lid',
    },
    ...(isRead
      ? [
          {
            ...shape('rect', {
              x: plateX,
              y: middle - 9,
              width: plateWidth,
              height: 18,
              fill: paint('paper'),
              stroke: paint(colour),
              strokeWidth: 1,
            }),
            key: 'counts-plate',
          },
          ...fittedLines(fitted, words, plateX + 6, middle + fitted.sizePx * capShift, 0, {
            fill: paint(colour === 'ink-3' ? 'ink-2' : colour),
          }).map((line) => ({ ...line, key: 'counts' })),
        ]
      : []),
  ];
};

const fittedName = ({ id, rect }: SiteGeometry, facts: DrawingFacts, { level }: Look) =>
  fitText(facts.sites[id] ?? '', {
    maxWidthPx: Math.max(60, rect.width - size.nameAt - 24),
    sizePx: nameSizes[level],
    minSizePx: leastNameSizes[level],
    weight: 600,
  });

/** Where the sites' names stand at a level of detail: what is set beside elements keeps off them. */
export const siteNameBoxes = (
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): readonly { readonly box: Rect }[] =>
  geometry.sites.map((site) => {
    const { widthPx, sizePx } = fittedName(site, facts, look);
    const { x, y } = site.rect;
    return { box: { x: x + size.nameAt, y: y - sizePx * 0.6, width: widthPx, height: sizePx * 1.2 } };
  });

/** A site: a chain line that its name interrupts at the top; a collapsed one a plate with a lid. */
export const sitePart = (site: SiteGeometry, facts: DrawingFacts, look: Look): Shape => {
  const ref = { collection: 'sites', id: site.id } as const;
  const tones = tonesOf(look, ref);
  const { x, y, width, height } = site.rect;
  const name = facts.sites[site.id] ?? '';
  const fitted = fittedName(site, facts, look);
  const nameWidth = fitted.widthPx;
  const far = look.level === 'far';
  const gapFrom = x + size.nameAt - aroundName;
  const gapTo = Math.min(x + width, x + size.nameAt + nameWidth + aroundName);
  const marked = tones.includes('selected') || tones.includes('hovered');
  const colour = marked ? 'blue' : tones.includes('failed') || tones.includes('fault') ? 'red' : 'ink-3';
  const nameGap = site.collapsed && {
    ...shape('rect', {
      x: gapFrom,
      y: y - fitted.sizePx * 0.6,
      width: gapTo - gapFrom,
      height: fitted.sizePx * 1.2,
      fill: paint('paper'),
    }),
    key: 'name-gap',
  };
  return group(
    [
      ...(site.collapsed ? lid(site, facts, look, colour) : []),
      nameGap,
      !site.collapsed && {
        // The line starts right of the name and ends left of it, so that the gap lets bands and lines beneath show.
        ...shape('path', {
          d: `M${gapTo} ${y}H${x + width}V${y + height}H${x}V${y}H${gapFrom}`,
          fill: 'none',
          stroke: paint(colour),
          strokeWidth: far ? 3 : look.level === 'plan' ? 1.8 : 1.2,
          strokeDasharray: far ? '30 8 5 8' : '16 4 2.5 4',
        }),
        key: 'frame',
      },
      ...fittedLines(fitted, name, x + size.nameAt, y + fitted.sizePx * capShift, 0, {
        weight: 600,
        fill: paint(marked ? 'blue' : 'ink'),
      }),
      tones.includes('selected') && cornerTicks(site.rect),
    ],
    {
      key: elementKey(ref),
      data: { ref, part: 'site' },
      ...(tones.includes('dimmed') || tones.includes('removed') ? { attrs: { opacity: dimmedOpacity } } : {}),
    },
  );
};
