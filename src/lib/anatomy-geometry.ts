import {
  BAR_PX,
  placeBar,
  placeNames,
  scaleFor,
  sentSpan,
  WALL_OFF_PX,
  type PlacedBar,
  type PlacedName,
} from './bar-geometry.ts';
import type { AnatomyRow } from './byte-blocks.ts';

const NAME_GAP_PX = 6;
export const HEAD_SIZE_PX = 13;
const HEAD_LINE_PX = 18;
const ROW_GAP_PX = 15;
/** Below this width the words on the right of a row's head stand on a line of their own. */
const NARROW_PX = 600;

export interface PlacedRow extends PlacedBar {
  readonly row: AnatomyRow;
  /** Baseline of the head's first line. */
  readonly headY: number;
  /** Baseline of the words about pipe and packet. */
  readonly measureY: number;
  readonly barY: number;
}

export interface AnatomyGeometry {
  readonly width: number;
  readonly height: number;
  readonly narrow: boolean;
  readonly names: readonly PlacedName[];
  /** Where blocks of the row on the underlay begin: thin lines through all rows. */
  readonly guides: readonly number[];
  readonly guidesFromY: number;
  readonly packetSpan: { readonly x: number; readonly end: number; readonly y: number };
  readonly rows: readonly PlacedRow[];
}

/** Places the rows under each other so that the host's payload stands in one column, headers to its left, trailers to its right. */
export function layOutAnatomy(rows: readonly AnatomyRow[], widthPx: number): AnatomyGeometry {
  const scale = scaleFor(rows, widthPx);
  const narrow = widthPx < NARROW_PX;

  const underlay = rows.find(({ pipeBytes }) => pipeBytes !== undefined) ?? rows[0];
  if (underlay === undefined) throw new Error('an anatomy without rows');
  const { blocks, payload } = placeBar(underlay, scale);
  const packet = { x: sentSpan(rows[0] ?? underlay, scale).x, end: payload.x + payload.width };
  const { names, heightPx } = placeNames(blocks, packet, widthPx);
  const namesHeight = heightPx + NAME_GAP_PX;

  const pitch = (narrow ? 2 : 1) * HEAD_LINE_PX + BAR_PX + 2 * WALL_OFF_PX + ROW_GAP_PX;
  return {
    width: widthPx,
    height: namesHeight + rows.length * pitch,
    narrow,
    names,
    guides: blocks.map(({ x }) => x),
    guidesFromY: namesHeight - NAME_GAP_PX,
    packetSpan: { ...packet, y: namesHeight - NAME_GAP_PX - 2 },
    rows: rows.map((row, at): PlacedRow => {
      const headY = namesHeight + at * pitch + HEAD_LINE_PX - 4;
      const measureY = narrow ? headY + HEAD_LINE_PX : headY;
      return { row, headY, measureY, barY: measureY + 6 + WALL_OFF_PX, ...placeBar(row, scale) };
    }),
  };
}
