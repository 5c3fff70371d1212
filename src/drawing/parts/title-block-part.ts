import type { Rect, SheetFrame } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import type { FitLimits } from '../text-width.ts';
import { fitText, textWidth } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import type { TitleBlockFacts } from './drawing-facts.ts';
import type { Level } from './level-of-detail.ts';
import { capShift, fittedLines, textLine } from './text-shape.ts';

const columns = [112, 134, 240] as const;
const rowPx = 38;
const inset = 7;

interface Cell {
  readonly key: string;
  readonly label: string;
  readonly value: string;
  readonly rect: Rect;
  readonly bold?: boolean;
  /** Numbers that identify something are never cut. */
  readonly whole?: boolean;
}

const rules = (d: string): Shape => ({
  ...shape('path', { d, fill: 'none', stroke: paint('ink'), strokeWidth: 1 }),
  key: 'rules',
});
const outline = (rect: Rect, widthPx = 2.4): Shape => ({
  ...shape('rect', { ...rect, fill: 'none', stroke: paint('ink'), strokeWidth: widthPx }),
  key: 'outline',
});
const ground = (rect: Rect): Shape => ({
  ...shape('rect', { ...rect, fill: paint('paper') }),
  key: 'ground',
});

const fitted = (
  text: string,
  x: number,
  baseline: number,
  stepPx: number,
  limits: FitLimits,
): readonly Shape[] =>
  fittedLines(
    fitText(text, limits),
    text,
    x,
    baseline,
    stepPx,
    limits.weight === undefined ? {} : { weight: limits.weight },
  );

const cellPart = ({ key, label, value, rect, bold, whole }: Cell, labelPx: number): Shape => {
  const maxWidthPx = rect.width - 2 * inset + 3;
  const large = { maxWidthPx, sizePx: 13.5, minSizePx: 11.5, weight: bold ? 700 : 500 } as const;
  // A long value may have two small lines instead of one.
  const small = { maxWidthPx, maxLines: 2, sizePx: 10.5, minSizePx: 9, weight: 500 } as const;
  const twoLines = fitText(value, large).shortened;
  const tiny = twoLines && whole === true && fitText(value, small).shortened;
  return group(
    [
      textLine(label, rect.x + inset, rect.y + 14, {
        sizePx: Math.min(labelPx, ((rect.width - inset - 3) * labelPx) / textWidth(label, labelPx)),
        fill: paint('ink-3'),
        key: 'label',
      }),
      ...(tiny
        ? fitted(value, rect.x + inset, rect.y + 30, 10, { ...large, sizePx: 9, minSizePx: 9, whole: true })
        : twoLines
          ? fitted(value, rect.x + inset, rect.y + 25, 10, small)
          : fitted(value, rect.x + inset, rect.y + 31.5, 10, large)),
    ],
    { key },
  );
};

const titleCell = (facts: TitleBlockFacts, rect: Rect, labelPx: number): Shape => {
  const limits = {
    maxWidthPx: rect.width - 2 * inset,
    maxLines: 2,
    sizePx: 16.8,
    minSizePx: 11,
    weight: 600,
  } as const;
  const title = fitText(facts.title, limits);
  const single = title.lines.length === 1;
  const step = title.sizePx * 1.18;
  const first = rect.y + (single ? 38 : 32);
  const more = { maxWidthPx: rect.width - 2 * inset, sizePx: 14.5, minSizePx: 10.5 } as const;
  const oneLine = fitText(facts.supplementaryTitle, more);
  const supplementary =
    single && oneLine.shortened
      ? fitText(facts.supplementaryTitle, { ...more, maxLines: 2, sizePx: 11.5 })
      : oneLine;
  return group(
    [
      textLine('Title', rect.x + inset, rect.y + 14, { sizePx: labelPx, fill: paint('ink-3'), key: 'label' }),
      group(fittedLines(title, facts.title, rect.x + inset, first, step, { weight: 600 }), { key: 'title' }),
      facts.supplementaryTitle !== '' &&
        group(
          fittedLines(
            supplementary,
            facts.supplementaryTitle,
            rect.x + inset,
            single ? rect.y + (supplementary.lines.length === 1 ? 60 : 55) : first + step + 16,
            13,
            { fill: paint('ink-2') },
          ),
          { key: 'supplementary' },
        ),
    ],
    { key: 'title' },
  );
};

const full = (facts: TitleBlockFacts, rect: Rect, labelPx: number): readonly Shape[] => {
  const { x, y } = rect;
  const second = x + columns[0];
  const third = second + columns[1];
  const right = x + rect.width;
  const wide = right - third;
  const at = (column: number, row: number, width: number): Rect => ({
    x: column,
    y: y + row * rowPx,
    width,
    height: rowPx,
  });
  const rev = third + wide * 0.4;
  const language = rev + wide * 0.18;
  const sheet = language + wide * 0.18;
  const cells: readonly Cell[] = [
    { key: 'owner', label: 'Legal owner', value: facts.legalOwner, rect: at(x, 0, columns[0]) },
    { key: 'creator', label: 'Created by', value: facts.createdBy, rect: at(x, 1, columns[0]) },
    { key: 'status', label: 'Status', value: facts.status, rect: at(x, 2, columns[0]) },
    { key: 'type', label: 'Document type', value: facts.documentType, rect: at(second, 0, columns[1]) },
    { key: 'approver', label: 'Approved by', value: facts.approvedBy, rect: at(second, 1, columns[1]) },
    {
      key: 'number',
      label: 'Identification no.',
      value: facts.identification,
      rect: at(second, 2, columns[1]),
      whole: true,
    },
    { key: 'date', label: 'Date of issue', value: facts.dateOfIssue, rect: at(third, 2, rev - third) },
    { key: 'revision', label: 'Rev.', value: facts.revision, rect: at(rev, 2, language - rev), bold: true },
    { key: 'language', label: 'Lang.', value: facts.language, rect: at(language, 2, sheet - language) },
    { key: 'sheet', label: 'Sheet', value: facts.sheet, rect: at(sheet, 2, right - sheet) },
  ];
  const [row1, row2, bottom] = [y + rowPx, y + 2 * rowPx, y + rect.height];
  return [
    rules(
      `M${second} ${y}V${bottom}M${third} ${y}V${bottom}M${x} ${row1}H${third}M${x} ${row2}H${right}` +
        [rev, language, sheet].map((column) => `M${column} ${row2}V${bottom}`).join(''),
    ),
    ...cells.map((cell) => cellPart(cell, labelPx)),
    titleCell(facts, { x: third, y, width: wide, height: 2 * rowPx }, labelPx),
  ];
};

/** Three facts that still read at half size: title, number, revision with its state. */
const brief = (facts: TitleBlockFacts, rect: Rect): readonly Shape[] => {
  const { x, y, width } = rect;
  const row = y + 66;
  const [rev, status] = [x + width * 0.39, x + width * 0.62];
  const bottom = y + rect.height;
  const middle = (row + bottom) / 2;
  const small = (value: string, from: number, to: number, more: Partial<FitLimits> = {}): readonly Shape[] =>
    fitted(value, from + 12, middle + 21 * capShift, 0, {
      maxWidthPx: to - from - 20,
      sizePx: 21,
      minSizePx: 14,
      ...more,
    });
  const wide = { maxWidthPx: width - 28, sizePx: 29, minSizePx: 21, weight: 600 } as const;
  const oneLine = fitText(facts.title, wide);
  const title = oneLine.shortened
    ? fitText(facts.title, { ...wide, maxLines: 2, sizePx: 22, minSizePx: 16 })
    : oneLine;
  const step = title.sizePx * 1.16;
  const first = y + 33 + title.sizePx * capShift - ((title.lines.length - 1) * step) / 2;
  return [
    rules(`M${x} ${row}H${x + width}M${rev} ${row}V${bottom}M${status} ${row}V${bottom}`),
    group(fittedLines(title, facts.title, x + 14, first, step, { weight: 600 }), { key: 'title' }),
    group(small(facts.identification, x, rev, { whole: true }), { key: 'number' }),
    group(small(`Rev. ${facts.revision}`, rev, status, { weight: 600 }), { key: 'revision' }),
    group(
      small(facts.sheet === '1/1' ? facts.status : `${facts.status}, ${facts.sheet}`, status, x + width),
      { key: 'status' },
    ),
  ];
};

const titleAlone = (facts: TitleBlockFacts, rect: Rect): readonly Shape[] => {
  const widest = { maxWidthPx: rect.width - 28, sizePx: 46, minSizePx: 32, weight: 600 } as const;
  const oneLine = fitText(facts.title, widest);
  const title = oneLine.shortened ? fitText(facts.title, { ...widest, maxLines: 2, minSizePx: 26 }) : oneLine;
  const step = title.sizePx * 1.05;
  const first = rect.y + rect.height / 2 + title.sizePx * capShift - ((title.lines.length - 1) * step) / 2;
  return [
    group(
      fittedLines(title, facts.title, rect.x + rect.width / 2, first, step, {
        weight: 600,
        anchor: 'middle',
      }),
      { key: 'title' },
    ),
  ];
};

/** The title block with the data fields of ISO 7200:2004 (from memory), at the bottom right of the frame. */
export const titleBlockPart = (sheet: SheetFrame, facts: TitleBlockFacts, level: Level): Shape => {
  const rect = sheet.titleBlock;
  const inside =
    level === 'far'
      ? titleAlone(facts, rect)
      : level === 'plan'
        ? brief(facts, rect)
        : full(facts, rect, level === 'work' ? 13 : 11.5);
  return group([ground(rect), ...inside, outline(rect, level === 'far' ? 4 : 2.4)], { key: 'title-block' });
};
