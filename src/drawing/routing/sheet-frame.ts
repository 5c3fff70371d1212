import type { SheetSize } from '../../engine/model/layout.ts';
import type { Point, Rect, SheetFrame } from '../geometry.ts';
import { clamp } from './rects.ts';

// ISO 216 proportions at one scale for all sizes: A3 landscape is 1280 px wide.
const extents: { readonly [size in SheetSize]: { readonly width: number; readonly height: number } } = {
  A3: { width: 1280, height: 905 },
  A2: { width: 1810, height: 1280 },
  A1: { width: 2560, height: 1810 },
  A0: { width: 3620, height: 2560 },
};
// ISO 5457:1999 table 2, number of fields by sheet size, from memory.
const zones: { readonly [size in SheetSize]: { readonly columns: number; readonly rows: number } } = {
  A3: { columns: 8, rows: 6 },
  A2: { columns: 12, rows: 8 },
  A1: { columns: 16, rows: 12 },
  A0: { columns: 24, rows: 16 },
};

const titleBlock = { width: 486, height: 114 };
const legend = { width: 572, height: 114, header: 25, leastRow: 22.25 };
/** Share of the frame's height from which the legend goes on in another column, while there is room for one. */
const mostLegendShare = 0.4;

const legendSize = (frame: Rect, segments: number): { readonly width: number; readonly height: number } => {
  const rowsPerColumn = Math.floor((mostLegendShare * frame.height - legend.header) / legend.leastRow);
  const room = Math.floor((frame.width - titleBlock.width) / legend.width);
  const columns = clamp(Math.ceil(segments / rowsPerColumn), 1, Math.max(1, room));
  const rows = Math.ceil(segments / columns);
  return {
    width: columns * legend.width,
    height: Math.max(legend.height, legend.header + legend.leastRow * rows),
  };
};

/** How many columns of segments stand side by side in the legend. */
export const legendColumns = (sheet: SheetFrame): number => Math.round(sheet.legend.width / legend.width);

/** Where the frame, the zones, the title block and the legend of a sheet lie; the legend grows with its segments. */
export const sheetFrame = (size: SheetSize, segments: number): SheetFrame => {
  const { width, height } = extents[size];
  const frame = { x: 32, y: 30, width: width - 62, height: height - 58 };
  const grown = legendSize(frame, segments);
  const foot = frame.y + frame.height;
  return {
    size,
    width,
    height,
    frame,
    ...zones[size],
    titleBlock: {
      x: frame.x + frame.width - titleBlock.width,
      y: foot - titleBlock.height,
      ...titleBlock,
    },
    legend: { x: frame.x, y: foot - grown.height, ...grown },
  };
};

// ISO 5457:1999 clause 4.4 leaves out I and O, from memory.
const rowLetters = 'ABCDEFGHJKLMNPQRSTUVWXYZ';

/** In which zone of the sheet a point lies, as a reader would say it: "B5". Points off the sheet count to its edge. */
export const zoneOf = (sheet: SheetFrame, point: Point): string => {
  const column = Math.floor(((point.x - sheet.frame.x) / sheet.frame.width) * sheet.columns);
  const row = Math.floor(((point.y - sheet.frame.y) / sheet.frame.height) * sheet.rows);
  return `${rowLetters[clamp(row, 0, sheet.rows - 1)]!}${clamp(column, 0, sheet.columns - 1) + 1}`;
};
