import {
  placeBar,
  placeNames,
  scaleFor,
  sentSpan,
  type BarScale,
  type PlacedName,
} from '../../lib/bar-geometry.ts';
import { sentBytesOf, type ByteBar } from '../../lib/byte-blocks.ts';
import type { StripRow } from './hop-rows.ts';

const rowPx = 52;
/** Where the words about the pipe stand on a line of their own. */
const narrowRowPx = 70;
const plainRowPx = 28;
const narrowPlainRowPx = 44;
/** Below this width the words about the pipe find no room beside the title. */
const narrowBelowPx = 560;

/** The strip's common measures: one scale for all bars, and the names above them. */
export interface StripLayout {
  readonly scale: BarScale;
  readonly isNarrow: boolean;
  /** Where blocks begin in the bar with the most of them. */
  readonly guides: readonly number[];
  readonly names: readonly PlacedName[];
  readonly headPx: number;
  readonly packetSpan: { readonly x: number; readonly end: number; readonly y: number };
  readonly sentBytes: number;
}

const barsOf = (rows: readonly StripRow[]): readonly ByteBar[] =>
  rows.flatMap((row) => (row.kind === 'branch' || row.bar === undefined ? [] : [row.bar]));

/** Measures for rows of one width; undefined where none of them has bytes to draw. */
export const stripLayout = (rows: readonly StripRow[], widthPx: number): StripLayout | undefined => {
  const bars = barsOf(rows);
  const [first] = bars;
  if (first === undefined) return undefined;
  const scale = scaleFor(bars, widthPx);
  const blockCount = ({ before, after }: ByteBar): number => before.length + after.length;
  const fullest = bars.reduce((best, bar) => (blockCount(bar) > blockCount(best) ? bar : best), first);
  const { blocks, payload } = placeBar(fullest, scale);
  const packet = { x: sentSpan(first, scale).x, end: payload.x + payload.width };
  const { names, heightPx } = placeNames(blocks, packet, widthPx);
  return {
    scale,
    isNarrow: widthPx < narrowBelowPx,
    guides: blocks.map(({ x }) => x),
    names,
    headPx: heightPx + 4,
    packetSpan: { ...packet, y: heightPx - 2 },
    sentBytes: sentBytesOf(first),
  };
};

/** How high a row is. */
export const rowHeight = (row: StripRow, isNarrow: boolean): number =>
  row.kind !== 'branch' && row.bar !== undefined
    ? isNarrow
      ? narrowRowPx
      : rowPx
    : isNarrow && row.kind !== 'branch' && row.measure !== ''
      ? narrowPlainRowPx
      : plainRowPx;

/** The rows that a scrolled box shows, and some beyond: from one up to but not with another, by their tops. */
export const rowsInView = (
  tops: readonly number[],
  scrolledPx: number,
  boxPx: number,
): { readonly from: number; readonly to: number } => {
  const sparePx = 260;
  const firstAfter = (y: number): number => {
    let [low, high] = [0, tops.length - 1];
    while (low < high) {
      const middle = (low + high) >> 1;
      if (tops[middle]! < y) low = middle + 1;
      else high = middle;
    }
    return low;
  };
  return {
    from: Math.max(0, firstAfter(scrolledPx - sparePx) - 1),
    to: Math.min(tops.length - 1, firstAfter(scrolledPx + boxPx + sparePx) + 1),
  };
};
