import type { Rect, SheetFrame } from '../geometry.ts';
import { zoneOf } from '../routing/sheet-frame.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { Level } from './level-of-detail.ts';
import { centredLine } from './text-shape.ts';

/** The trimmed sheet lies this far inside the paper. */
const trim = { across: 14, down: 12 } as const;
const zoneSizes = { near: 13, work: 14, plan: 19, far: 0 } as const;

const trimRect = (sheet: SheetFrame): Rect => ({
  x: trim.across,
  y: trim.down,
  width: sheet.width - 2 * trim.across,
  height: sheet.height - 2 * trim.down,
});

/** Zone names on all four sides and the rules between them. */
const zoneGrid = (sheet: SheetFrame, level: Level): readonly Shape[] => {
  const { frame, columns, rows } = sheet;
  const outer = trimRect(sheet);
  const [right, bottom] = [frame.x + frame.width, frame.y + frame.height];
  const [outerRight, outerBottom] = [outer.x + outer.width, outer.y + outer.height];
  const rules: string[] = [];
  const names: Shape[] = [];
  const name = (text: string, x: number, y: number, key: string): Shape =>
    centredLine(text, x, y, { sizePx: zoneSizes[level], anchor: 'middle', fill: paint('ink-2'), key });
  for (let column = 0; column < columns; column += 1) {
    const x = frame.x + (frame.width / columns) * column;
    if (column > 0) rules.push(`M${x} ${outer.y}V${frame.y}M${x} ${bottom}V${outerBottom}`);
    const middle = x + frame.width / columns / 2;
    const text = zoneOf(sheet, { x: middle, y: frame.y }).slice(1);
    names.push(
      name(text, middle, (outer.y + frame.y) / 2, `top-${column}`),
      name(text, middle, (bottom + outerBottom) / 2, `bottom-${column}`),
    );
  }
  for (let row = 0; row < rows; row += 1) {
    const y = frame.y + (frame.height / rows) * row;
    if (row > 0) rules.push(`M${outer.x} ${y}H${frame.x}M${right} ${y}H${outerRight}`);
    const middle = y + frame.height / rows / 2;
    const text = zoneOf(sheet, { x: frame.x, y: middle }).slice(0, 1);
    names.push(
      name(text, (outer.x + frame.x) / 2, middle, `left-${row}`),
      name(text, (right + outerRight) / 2, middle, `right-${row}`),
    );
  }
  return [
    {
      ...shape('path', { d: rules.join(''), stroke: paint('ink-3'), strokeWidth: 0.8, fill: 'none' }),
      key: 'rules',
    },
    ...names,
  ];
};

/** Marks in the middle of each side, from the paper's edge to just inside the frame. */
const centringMarks = ({ frame, width, height }: SheetFrame): Shape => {
  const [x, y] = [width / 2, height / 2];
  const [edge, inside] = [4, 6];
  return {
    ...shape('path', {
      d:
        `M${x} ${edge}V${frame.y + inside}M${x} ${height - edge}V${frame.y + frame.height - inside}` +
        `M${edge} ${y}H${frame.x + inside}M${width - edge} ${y}H${frame.x + frame.width - inside}`,
      stroke: paint('ink'),
      strokeWidth: 2,
      fill: 'none',
    }),
    key: 'centring',
  };
};

/** The bare paper. */
export const paperPart = (sheet: SheetFrame): Shape => ({
  ...shape('rect', { x: 0, y: 0, width: sheet.width, height: sheet.height, fill: paint('paper') }),
  key: 'paper',
});

/** Trim line, zone grid, centring marks and frame. */
export const framePart = (sheet: SheetFrame, level: Level): Shape => {
  const far = level === 'far';
  return group(
    [
      !far && {
        ...shape('rect', {
          ...trimRect(sheet),
          fill: 'none',
          stroke: paint('ink-3'),
          strokeWidth: 0.8,
        }),
        key: 'trim',
      },
      ...(far ? [] : zoneGrid(sheet, level)),
      {
        ...shape('rect', { ...sheet.frame, fill: 'none', stroke: paint('ink'), strokeWidth: far ? 5 : 2.4 }),
        key: 'frame',
      },
      !far && centringMarks(sheet),
    ],
    { key: 'frame' },
  );
};
