import { textWidth } from '../../drawing/text-width.ts';
import type { AnatomyRow, ByteBlock } from './anatomy-rows.ts';

// All lengths are pixels; measures follow the frame trace of the sheet.
const BYTE_PX = 3.2;
/** Share of the width that headers and trailers may take: the payload keeps the rest. */
const HEADERS_SHARE = 0.64;
/** Of the payload's width, what an overhang may take. */
const OVERHANG_SHARE = 0.7;
const MARGIN_PX = 5;
const NAME_LINE_PX = 14;
const NAME_GAP_PX = 6;
export const NAME_SIZE_PX = 11;
export const HEAD_SIZE_PX = 13;
export const BAR_PX = 24;
const HEAD_LINE_PX = 18;
const ROW_GAP_PX = 15;
/** Below this width the words on the right of a row's head stand on a line of their own. */
const NARROW_PX = 600;
/** Walls of the pipe stand off the bar by this. */
export const WALL_OFF_PX = 4.5;

export interface PlacedBlock {
  readonly block: ByteBlock;
  readonly x: number;
  readonly width: number;
}

export interface PlacedName {
  readonly text: string;
  readonly x: number;
  /** Baseline. */
  readonly y: number;
}

export interface PlacedPipe {
  readonly x: number;
  readonly end: number;
  /** Where what is over ends; absent when all is in. */
  readonly overEnd?: number;
  readonly overBytes: number;
}

export interface PlacedRow {
  readonly row: AnatomyRow;
  /** Baseline of the head's first line. */
  readonly headY: number;
  /** Baseline of the words about pipe and packet. */
  readonly measureY: number;
  readonly barY: number;
  readonly blocks: readonly PlacedBlock[];
  readonly payload: {
    readonly x: number;
    readonly width: number;
    /** Where the long break is; absent when the payload is to scale. */
    readonly breakX?: number;
  };
  readonly pipe?: PlacedPipe;
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
  const beforeBytes = Math.max(...rows.map(({ before }) => bytesIn(before)));
  const afterBytes = Math.max(...rows.map(({ after }) => bytesIn(after)));
  const roomPx = widthPx - 2 * MARGIN_PX;
  const bytePx = Math.min(BYTE_PX, (roomPx * HEADERS_SHARE) / (beforeBytes + afterBytes));
  const payloadX = MARGIN_PX + beforeBytes * bytePx;
  const columnPx = roomPx - (beforeBytes + afterBytes) * bytePx;
  const narrow = widthPx < NARROW_PX;

  const underlay = rows.find(({ pipeBytes }) => pipeBytes !== undefined) ?? rows[0];
  if (underlay === undefined) throw new Error('an anatomy without rows');
  const places = placeBlocks(underlay, payloadX, columnPx, bytePx);
  const payloadEnd = payloadX + places.payload.width;
  const packetX = payloadX - hostHeaderPx(rows[0] ?? underlay, bytePx);
  const { names, lines } = placeNames(places.blocks, { x: packetX, end: payloadEnd }, widthPx);
  const namesHeight = lines * NAME_LINE_PX + NAME_GAP_PX;

  const pitch = (narrow ? 2 : 1) * HEAD_LINE_PX + BAR_PX + 2 * WALL_OFF_PX + ROW_GAP_PX;
  return {
    width: widthPx,
    height: namesHeight + rows.length * pitch,
    narrow,
    names,
    guides: places.blocks.map(({ x }) => x),
    guidesFromY: namesHeight - NAME_GAP_PX,
    packetSpan: { x: packetX, end: payloadEnd, y: namesHeight - NAME_GAP_PX - 2 },
    rows: rows.map((row, at): PlacedRow => {
      const headY = namesHeight + at * pitch + HEAD_LINE_PX - 4;
      const measureY = narrow ? headY + HEAD_LINE_PX : headY;
      const placed = placeBlocks(row, payloadX, columnPx, bytePx);
      return {
        row,
        headY,
        measureY,
        barY: measureY + 6 + WALL_OFF_PX,
        ...placed,
        ...(row.pipeBytes === undefined
          ? {}
          : { pipe: placePipe(row, row.pipeBytes, placed, bytePx, widthPx) }),
      };
    }),
  };
}

const bytesIn = (blocks: readonly ByteBlock[]): number => blocks.reduce((sum, { bytes }) => sum + bytes, 0);

/** The host's own IP header, which ESP may part from its payload further out. */
const hostHeaderPx = ({ before }: AnatomyRow, bytePx: number): number =>
  (before.find(({ id }) => id === 'inner-ip')?.bytes ?? 0) * bytePx;

function placeBlocks(
  row: AnatomyRow,
  payloadX: number,
  columnPx: number,
  bytePx: number,
): Pick<PlacedRow, 'blocks' | 'payload'> {
  const scaledPx = row.payloadBytes * bytePx;
  const width = Math.min(columnPx, scaledPx);
  let x = payloadX - bytesIn(row.before) * bytePx;
  const place = (block: ByteBlock): PlacedBlock => {
    const placed = { block, x, width: block.bytes * bytePx };
    x += placed.width;
    return placed;
  };
  const before = row.before.map(place);
  x = payloadX + width;
  const after = row.after.map(place);
  return {
    blocks: [...before, ...after],
    payload: {
      x: payloadX,
      width,
      ...(width < scaledPx ? { breakX: payloadX + width * (1 - OVERHANG_SHARE) * 0.6 } : {}),
    },
  };
}

function placePipe(
  { ipPacketBytes }: AnatomyRow,
  pipeBytes: number,
  { blocks, payload }: Pick<PlacedRow, 'blocks' | 'payload'>,
  bytePx: number,
  widthPx: number,
): PlacedPipe {
  const inside = blocks.filter(({ block }) => block.inIpPacket);
  const x = inside[0]?.x ?? payload.x;
  const last = inside.at(-1);
  const packetEnd = Math.max(payload.x + payload.width, last === undefined ? 0 : last.x + last.width);
  const overBytes = Math.max(0, ipPacketBytes - pipeBytes);
  if (overBytes === 0) {
    const end = packetEnd + (pipeBytes - ipPacketBytes) * bytePx;
    return { x, end: Math.min(end, widthPx - 3), overBytes };
  }
  // To scale back through the trailers into the payload, as far as it is drawn to scale.
  const furthest = payload.breakX === undefined ? x : payload.x + payload.width * (1 - OVERHANG_SHARE);
  return { x, end: Math.max(furthest, packetEnd - overBytes * bytePx), overEnd: packetEnd, overBytes };
}

/** Each name in the lowest line where it has room; the lowest one holds the dimension of the packet as well. */
function placeNames(
  blocks: readonly PlacedBlock[],
  packet: { readonly x: number; readonly end: number },
  widthPx: number,
): { readonly names: readonly PlacedName[]; readonly lines: number } {
  const taken: { readonly from: number; readonly to: number }[][] = [[{ from: packet.x, to: packet.end }]];
  const placed = blocks
    .filter(({ x }) => Math.abs(x - packet.x) > 0.5)
    .map(({ block, x, width }) => {
      const half = textWidth(block.name, NAME_SIZE_PX, 500) / 2 + 3;
      const centre = Math.min(widthPx - half, Math.max(half, x + width / 2));
      const span = { from: centre - half, to: centre + half };
      let line = 0;
      while (taken[line]?.some(({ from, to }) => span.from < to && from < span.to)) line += 1;
      (taken[line] ??= []).push(span);
      return { text: block.name, x: centre, line };
    });
  // Two at least: the packet's dimension has its words in the second.
  const lines = Math.max(2, taken.length);
  return {
    lines,
    names: placed.map(({ text, x, line }) => ({ text, x, y: (lines - line) * NAME_LINE_PX - 3 })),
  };
}
