import type { Rect, SheetFrame } from '../geometry.ts';
import { legendColumns } from '../routing/sheet-frame.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { fitText } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import { cordSample, letterSquare } from './cord.ts';
import type { SegmentFacts } from './drawing-facts.ts';
import type { Level } from './level-of-detail.ts';
import { capShift, centredLine, fittedLines } from './text-shape.ts';

const headerPx = 25;
/** Where each column begins, from the legend's left edge. */
const column = { cord: 14, name: 112, vlan: 240, subnet: 312, carries: 448 } as const;
const squarePx = 19;
const samplePx = 66;

interface CellOptions {
  readonly sizePx?: number;
  readonly bold?: boolean;
  /** Numbers and subnets shrink instead of being cut. */
  readonly whole?: boolean;
  /** Names may take two small lines. */
  readonly twoLines?: boolean;
}

const fittedCell = (
  text: string,
  x: number,
  y: number,
  widthPx: number,
  { sizePx = 14, bold = false, whole = false, twoLines = false }: CellOptions = {},
): readonly Shape[] => {
  const weight = bold ? 600 : 400;
  const limits = { maxWidthPx: widthPx, sizePx, minSizePx: sizePx * 0.78, weight, whole } as const;
  const oneLine = fitText(text, limits);
  const fitted =
    oneLine.shortened && twoLines
      ? fitText(text, { ...limits, maxLines: 2, sizePx: sizePx * 0.8, minSizePx: sizePx * 0.66 })
      : oneLine;
  const step = fitted.sizePx * 1.15;
  const first = y + fitted.sizePx * capShift - ((fitted.lines.length - 1) * step) / 2;
  return fittedLines(fitted, text, x, first, step, { weight });
};

const rules = (ys: readonly number[], rect: Rect): Shape => ({
  ...shape('path', {
    d: ys.map((y) => `M${rect.x} ${y}H${rect.x + rect.width}`).join(''),
    stroke: paint('ink'),
    strokeWidth: 1,
    fill: 'none',
  }),
  key: 'rules',
});

const table = (segments: readonly SegmentFacts[], rect: Rect, rows: number): readonly Shape[] => {
  const rowPx = (rect.height - headerPx) / Math.max(3, rows);
  const heads = Object.entries({
    cord: 'Cord',
    name: 'Segment',
    vlan: 'VLAN',
    subnet: 'Subnet',
    carries: 'Carries',
  }) as readonly (readonly [keyof typeof column, string])[];
  const scale = Math.min(1, rowPx / 27);
  // A drawing without addresses has none to head.
  const withSubnets = segments.some(({ subnet }) => subnet !== '');
  return [
    ...heads
      .filter(([name]) => name !== 'subnet' || withSubnets)
      .map(([name, text]) =>
        centredLine(text, rect.x + column[name], rect.y + headerPx / 2, {
          sizePx: 12.5,
          fill: paint('ink-3'),
          key: name,
        }),
      ),
    rules(
      segments.map((_, i) => rect.y + headerPx + i * rowPx),
      rect,
    ),
    ...segments.map((segment, i) => {
      const y = rect.y + headerPx + (i + 0.5) * rowPx;
      const x = (name: keyof typeof column): number => rect.x + column[name];
      const sizePx = 14 * Math.min(1, scale * 1.1);
      const twoLines = rowPx > 26;
      return group(
        [
          cordSample(segment, x('cord'), y, squarePx * scale, samplePx),
          group(
            fittedCell(segment.name, x('name'), y, column.vlan - column.name - 10, {
              sizePx,
              bold: true,
              twoLines,
            }),
            {
              key: 'name',
            },
          ),
          group(
            fittedCell(segment.vlan, x('vlan'), y, column.subnet - column.vlan - 8, { sizePx, whole: true }),
            {
              key: 'vlan',
            },
          ),
          segment.subnet !== '' &&
            group(
              fittedCell(segment.subnet, x('subnet'), y, column.carries - column.subnet - 8, {
                sizePx,
                whole: true,
              }),
              { key: 'subnet' },
            ),
          group(
            fittedCell(segment.carries, x('carries'), y, rect.width - column.carries - 10, {
              sizePx,
              twoLines,
            }),
            {
              key: 'carries',
            },
          ),
        ],
        { key: segment.id, data: { ref: { collection: 'segments', id: segment.id }, part: 'row' } },
      );
    }),
  ];
};

const briefTable = (segments: readonly SegmentFacts[], rect: Rect, rows: number): readonly Shape[] => {
  const rowPx = rect.height / Math.max(3, rows);
  const square = Math.min(28, rowPx * 0.76);
  const sizePx = Math.min(21, rowPx * 0.62);
  return [
    rules(
      segments.slice(1).map((_, i) => rect.y + (i + 1) * rowPx),
      rect,
    ),
    ...segments.map((segment, i) => {
      const y = rect.y + (i + 0.5) * rowPx;
      return group(
        [
          cordSample(segment, rect.x + 14, y, square, 106),
          group(fittedCell(segment.name, rect.x + 172, y, 188, { sizePx, bold: true }), { key: 'name' }),
          group(
            fittedCell(segment.vlan === '–' ? '' : `VLAN ${segment.vlan}`, rect.x + 372, y, 196, {
              sizePx,
              whole: true,
            }),
            { key: 'vlan' },
          ),
        ],
        { key: segment.id, data: { ref: { collection: 'segments', id: segment.id }, part: 'row' } },
      );
    }),
  ];
};

const letters = (segments: readonly SegmentFacts[], rect: Rect): readonly Shape[] => {
  const perRow = Math.ceil(segments.length / Math.max(1, Math.floor(rect.height / 100)));
  const rows = Math.max(1, Math.ceil(segments.length / perRow));
  const square = Math.min(62, (rect.width - 40) / (perRow * 1.2), (rect.height - 16) / (rows * 1.15));
  const step = rect.width / perRow;
  return segments.map((segment, i) => ({
    ...letterSquare(
      segment,
      rect.x + (i % perRow) * step + (step - square) / 2,
      rect.y + (rect.height / rows) * (Math.floor(i / perRow) + 0.5) - square / 2,
      square,
    ),
    key: segment.id,
  }));
};

/** A table of segments in as many columns as the legend is wide. */
const inColumns = (
  sheet: SheetFrame,
  segments: readonly SegmentFacts[],
  draw: typeof table,
): readonly Shape[] => {
  const columns = legendColumns(sheet);
  const rows = Math.ceil(segments.length / columns);
  if (columns === 1) return draw(segments, sheet.legend, rows);
  const { x, y, height } = sheet.legend;
  const width = sheet.legend.width / columns;
  return Array.from({ length: columns }, (_, i) =>
    group(
      [
        ...draw(segments.slice(i * rows, (i + 1) * rows), { ...sheet.legend, x: x + i * width, width }, rows),
        i > 0 && {
          ...shape('path', { d: `M${x + i * width} ${y}v${height}`, stroke: paint('ink'), strokeWidth: 1.6 }),
          key: 'divider',
        },
      ],
      { key: `column ${i + 1}` },
    ),
  );
};

/** The legend of segments at the bottom left of the frame; nothing while a design has none. */
export const legendPart = (sheet: SheetFrame, segments: readonly SegmentFacts[], level: Level): Shape => {
  const rect = sheet.legend;
  if (segments.length === 0) return group([], { key: 'legend' });
  const inside =
    level === 'far'
      ? letters(segments, rect)
      : level === 'plan'
        ? inColumns(sheet, segments, briefTable)
        : inColumns(sheet, segments, table);
  return group(
    [
      { ...shape('rect', { ...rect, fill: paint('paper') }), key: 'ground' },
      ...inside,
      {
        ...shape('rect', {
          ...rect,
          fill: 'none',
          stroke: paint('ink'),
          strokeWidth: level === 'far' ? 4 : 2.4,
        }),
        key: 'outline',
      },
    ],
    { key: 'legend' },
  );
};
