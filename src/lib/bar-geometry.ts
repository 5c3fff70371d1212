import { textWidth } from '../drawing/text-width.ts';
import type { ByteBar, ByteBlock } from './byte-blocks.ts';

// All lengths are pixels; measures follow the frame trace of the sheet.
const BYTE_PX = 3.2;
/** Share of the width that headers and trailers may take: the payload keeps the rest. */
const HEADERS_SHARE = 0.64;
/** Of the payload's width, what an overhang may take. */
const OVERHANG_SHARE = 0.7;
const MARGIN_PX = 5;
const NAME_LINE_PX = 14;
export const NAME_SIZE_PX = 11;
export const BAR_PX = 24;
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

export interface PlacedBar {
  readonly bar: ByteBar;
  readonly blocks: readonly PlacedBlock[];
  readonly payload: {
    readonly x: number;
    readonly width: number;
    /** Where the long break is; absent when the payload is to scale. */
    readonly breakX?: number;
  };
  readonly pipe?: PlacedPipe;
}

/** What bars have in common that stand under each other: a byte's width, and the column of the host's payload. */
export interface BarScale {
  readonly widthPx: number;
  readonly bytePx: number;
  readonly payloadX: number;
  readonly columnPx: number;
}

const bytesIn = (blocks: readonly ByteBlock[]): number => blocks.reduce((sum, { bytes }) => sum + bytes, 0);

/** The scale at which all these bars fit a width, headers left of the payload's column and trailers right of it. */
export function scaleFor(bars: readonly ByteBar[], widthPx: number): BarScale {
  let [beforeBytes, afterBytes] = [0, 0];
  for (const { before, after } of bars) {
    beforeBytes = Math.max(beforeBytes, bytesIn(before));
    afterBytes = Math.max(afterBytes, bytesIn(after));
  }
  const aroundBytes = Math.max(1, beforeBytes + afterBytes);
  const roomPx = widthPx - 2 * MARGIN_PX;
  const bytePx = Math.min(BYTE_PX, (roomPx * HEADERS_SHARE) / aroundBytes);
  return {
    widthPx,
    bytePx,
    payloadX: MARGIN_PX + beforeBytes * bytePx,
    columnPx: roomPx - (beforeBytes + afterBytes) * bytePx,
  };
}

/** Where the blocks of one bar stand, its payload and its pipe. */
export function placeBar(bar: ByteBar, scale: BarScale): PlacedBar {
  const { payloadX, columnPx, bytePx } = scale;
  const scaledPx = bar.payloadBytes * bytePx;
  const width = Math.min(columnPx, scaledPx);
  let x = payloadX - bytesIn(bar.before) * bytePx;
  const place = (block: ByteBlock): PlacedBlock => {
    const placed = { block, x, width: block.bytes * bytePx };
    x += placed.width;
    return placed;
  };
  const before = bar.before.map(place);
  x = payloadX + width;
  const after = bar.after.map(place);
  const placed = {
    bar,
    blocks: [...before, ...after],
    payload: {
      x: payloadX,
      width,
      ...(width < scaledPx ? { breakX: payloadX + width * (1 - OVERHANG_SHARE) * 0.6 } : {}),
    },
  };
  return bar.pipeBytes === undefined ? placed : { ...placed, pipe: placePipe(bar.pipeBytes, placed, scale) };
}

/** The columns of the packet as the host sent it, its own IP header included. */
export function sentSpan(bar: ByteBar, scale: BarScale): { readonly x: number; readonly end: number } {
  const { payload } = placeBar(bar, scale);
  const header = bar.before.find(({ id }) => id === 'inner-ip')?.bytes ?? 0;
  return { x: payload.x - header * scale.bytePx, end: payload.x + payload.width };
}

function placePipe(
  pipeBytes: number,
  { bar, blocks, payload }: Omit<PlacedBar, 'pipe'>,
  { bytePx, widthPx }: BarScale,
): PlacedPipe {
  const inside = blocks.filter(({ block }) => block.inIpPacket);
  const x = Math.min(payload.x, inside[0]?.x ?? payload.x);
  const last = inside.at(-1);
  const packetEnd = Math.max(payload.x + payload.width, last === undefined ? 0 : last.x + last.width);
  const overBytes = Math.max(0, bar.ipPacketBytes - pipeBytes);
  if (overBytes === 0) {
    const end = packetEnd + (pipeBytes - bar.ipPacketBytes) * bytePx;
    return { x, end: Math.min(end, widthPx - 3), overBytes };
  }
  // To scale back through the trailers into the payload, as far as it is drawn to scale.
  const furthest = payload.breakX === undefined ? x : payload.x + payload.width * (1 - OVERHANG_SHARE);
  return { x, end: Math.max(furthest, packetEnd - overBytes * bytePx), overEnd: packetEnd, overBytes };
}

/** Each name in the lowest line where it has room; the lowest one holds the dimension of the packet as well. */
export function placeNames(
  blocks: readonly PlacedBlock[],
  packet: { readonly x: number; readonly end: number },
  widthPx: number,
): { readonly names: readonly PlacedName[]; readonly heightPx: number } {
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
    heightPx: lines * NAME_LINE_PX,
    names: placed.map(({ text, x, line }) => ({ text, x, y: (lines - line) * NAME_LINE_PX - 3 })),
  };
}
