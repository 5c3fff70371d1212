import type { Design } from '../../engine/model/design.ts';
import type { Decorations } from '../decorations.ts';
import { noDecorations } from '../decorations.ts';
import type { SheetFrame, SheetGeometry } from '../geometry.ts';
import { anchorFor } from '../parts/anchor-for.ts';
import type { DrawingFacts } from '../parts/drawing-facts.ts';
import { octagon } from '../parts/severity-mark.ts';
import { drawSheet, sheetOfDesign } from '../sheets/draw-sheet.ts';
import { sheetFacts } from '../sheets/sheet-facts.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { Theme } from '../theme/tokens.ts';
import { sheetShapes } from './sheet-shapes.ts';
import { standaloneSvg } from './standalone-svg.ts';

/** Size of a card's picture; the sheet's proportions, 1 to √2, fill it. */
export const thumbnail = { width: 212, height: 150 } as const;
const octagonPx = 5;

const isText = ({ el }: Shape): boolean => el === 'text' || el === 'title';

/** Words would be a smear at this size. */
const withoutWords = (drawn: Shape): Shape =>
  drawn.children === undefined
    ? drawn
    : {
        ...drawn,
        children: drawn.children
          .filter((child): child is Shape => typeof child !== 'string' && !isText(child))
          .map(withoutWords),
      };

/** The title block as empty cells with a bar for the title: enough to see that this is a sheet. */
const blankTitleBlock = ({ titleBlock: { x, y, width, height } }: SheetFrame): Shape => {
  const row = height / 3;
  const [second, third] = [x + width * 0.23, x + width * 0.5];
  return group(
    [
      shape('rect', {
        x,
        y,
        width,
        height,
        fill: paint('paper'),
        stroke: paint('ink'),
        strokeWidth: 6,
      }),
      shape('path', {
        d: `M${x} ${y + row}H${third}M${x} ${y + 2 * row}H${x + width}M${second} ${y}v${height}M${third} ${y}v${height}`,
        stroke: paint('ink'),
        strokeWidth: 5,
        fill: 'none',
      }),
      shape('path', {
        d: `M${third + 24} ${y + row}H${x + width - 40}`,
        stroke: paint('ink'),
        strokeWidth: 12,
      }),
    ],
    { key: 'title-block' },
  );
};

/** Sites as plain frames: without their names nothing interrupts them. */
const siteFrames = (geometry: SheetGeometry): readonly Shape[] =>
  geometry.sites.map(({ id, rect, collapsed }) => ({
    ...shape('rect', {
      ...rect,
      fill: 'none',
      stroke: paint('ink-3'),
      strokeWidth: 3,
      ...(collapsed ? {} : { strokeDasharray: '30 8 5 8' }),
    }),
    key: id,
  }));

/** A solid octagon on every element that a blocking finding names. */
const faultOctagons = (
  geometry: SheetGeometry,
  facts: DrawingFacts,
  decorations: Decorations,
): readonly Shape[] => {
  const radius = (octagonPx * geometry.sheet.width) / thumbnail.width;
  return decorations.balloons.flatMap((balloon) => {
    const at = anchorFor(geometry, balloon.at, facts);
    if (balloon.severity !== 'blocking' || balloon.waived || at === undefined) return [];
    return [
      {
        ...shape('path', {
          d: octagon(at.x, at.y, radius),
          fill: paint('red'),
          stroke: paint('paper'),
          strokeWidth: radius / 5,
        }),
        key: `fault-${balloon.number}`,
      },
    ];
  });
};

export interface ThumbnailOptions {
  readonly theme: Theme;
  readonly tunnelSegments: ReadonlyMap<string, readonly string[]>;
  readonly decorations?: Decorations;
}

/** A design's first sheet as a small picture without words, for lists: shapes, cords, cuts and where findings block. */
export const thumbnailSvgText = (design: Design, options: ThumbnailOptions): string => {
  const geometry = drawSheet(design);
  const decorations = options.decorations ?? noDecorations;
  const facts = sheetFacts(sheetOfDesign(design), options.tunnelSegments);
  // Tones and ghosts belong to somebody's screen; a list shows the design itself.
  const layers = sheetShapes(geometry, {
    level: 'far',
    decorations: { ...noDecorations, cuts: decorations.cuts },
    facts,
  });
  return standaloneSvg(
    layers.map(({ name, shapes }) => {
      if (name === 'furniture') return { name, shapes: [blankTitleBlock(geometry.sheet)] };
      if (name === 'sites') return { name, shapes: siteFrames(geometry) };
      if (name === 'balloons') return { name, shapes: faultOctagons(geometry, facts, decorations) };
      return { name, shapes: shapes.map(withoutWords) };
    }),
    {
      title: design.meta.title,
      theme: options.theme,
      viewBox: geometry.sheet,
      size: thumbnail,
    },
  );
};
