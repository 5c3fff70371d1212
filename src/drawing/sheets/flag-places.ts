import type { Design } from '../../engine/model/design.ts';
import type { Point, Rect, SheetFrame } from '../geometry.ts';
import { ferrule } from '../parts/sizes.ts';
import { bundlesOf } from '../routing/bundles.ts';
import { bottom, byText, grown, overlap, right } from '../routing/rects.ts';
import { combLengthFor, laneCount } from '../routing/ring-seats.ts';
import { plateSize } from '../routing/stands.ts';
import type { SheetFlag } from './sheet-cut.ts';

// Flags stand in a column at the left or the right edge of the frame, wherever that edge is free, and look at the bands. Nothing
// of this is stored: where sites and bands stand says it.

/** Between the frame and a flag, and between two flags. */
const fromFrame = 10;
const apart = 10;
/** A flag is no lower than its lines. */
const lineHeight = 16;
const headHeight = 20;
/** For the address under the ferrules of a flag. */
const labelRoom = 24;
/** From a flag's plate to where its cords begin, with the room they need to turn. */
const beside = 150;

export interface FlagSize {
  readonly id: string;
  readonly width: number;
  /** Of the flag itself, and of the room that it needs in the column. */
  readonly height: number;
  readonly room: number;
  /** From the top of its room to the top of the plate that stands for it. */
  readonly plateAt: number;
  /** The same for the flag itself, which may be higher than the plate. */
  readonly flagAt: number;
}

/** How much room the flags of a cut take, in the order in which they stand. */
export const flagSizes = (design: Design, flags: readonly SheetFlag[]): readonly FlagSize[] => {
  const bundles = bundlesOf(design);
  return flags.map((flag): FlagSize => {
    const plate = plateSize(design.devices[flag.id]!, {
      upright: Object.keys(design.devices[flag.id]!.ports).length,
      level: 0,
      rings: 1,
    });
    const lengths = Object.entries(design.endpoints)
      .filter(([, { device }]) => device === flag.id)
      .map(([endpoint]) =>
        combLengthFor(
          bundles.filter(({ a, b }) => a.endpoint === endpoint || b.endpoint === endpoint).map(laneCount),
        ),
      );
    const comb =
      lengths.reduce((sum, length) => sum + length, 0) +
      80 * Math.max(0, lengths.length - 1) +
      ferrule.height;
    const lines = headHeight + lineHeight * flag.lines.length;
    const height = Math.max(plate.height, lines);
    const reach = Math.max(height, lengths.length === 0 ? 0 : comb);
    // A ring docks in the plate's upper half; the comb and the flag itself are centred on it.
    const dock = Math.min(54, plate.height - 20);
    return {
      id: flag.id,
      width: plate.width,
      height,
      room: reach + (flag.device === undefined ? 0 : labelRoom),
      plateAt: Math.max(0, reach / 2 - dock),
      flagAt: Math.max(0, (reach - height) / 2),
    };
  });
};

/** Height of one column of flags, the room between them included. */
export const flagColumnHeight = (sizes: readonly FlagSize[]): number =>
  sizes.reduce((sum, { room }) => sum + room, 0) + apart * Math.max(0, sizes.length - 1);

export const flagColumnWidth = (sizes: readonly FlagSize[]): number =>
  Math.max(0, ...sizes.map(({ width }) => width)) + fromFrame + beside;

interface Stretch {
  readonly side: 'left' | 'right';
  readonly top: number;
  readonly height: number;
}

/** The free stretches of one edge, from top to bottom. */
const freeStretches = (
  side: 'left' | 'right',
  { frame, titleBlock, legend }: SheetFrame,
  taken: readonly Rect[],
  width: number,
): readonly Stretch[] => {
  const column: Rect = {
    x: side === 'left' ? frame.x : right(frame) - width,
    y: frame.y,
    width,
    height: frame.height,
  };
  const blocked = [...taken.map((rect) => grown(rect, 0, apart)), titleBlock, legend]
    .filter((rect) => overlap(rect, column))
    .sort((a, b) => a.y - b.y);
  const stretches: Stretch[] = [];
  let top = frame.y + fromFrame;
  for (const rect of [...blocked, { x: 0, y: bottom(frame) - fromFrame, width: 0, height: 0 }]) {
    if (rect.y > top) stretches.push({ side, top, height: rect.y - top });
    top = Math.max(top, bottom(rect));
  }
  return stretches;
};

/** Where the plates of the flags of a sheet stand: at an edge from which nothing hides the nearest limb. */
export const flagPlaces = (
  sheet: SheetFrame,
  sizes: readonly FlagSize[],
  sites: readonly Rect[],
  limbs: readonly Rect[],
): ReadonlyMap<string, Point> => {
  const places = new Map<string, Point>();
  if (sizes.length === 0) return places;
  const width = flagColumnWidth(sizes);
  const { frame } = sheet;
  const toLimb = {
    left: Math.min(...limbs.map((limb) => limb.x - frame.x)),
    right: Math.min(...limbs.map((limb) => right(frame) - right(limb))),
  };
  const reach = (side: 'left' | 'right'): number =>
    limbs.length === 0 ? width : Math.min(frame.width, Math.max(width, toLimb[side]));
  // The longest first; of equals the left one, and the upper one.
  const stretches = (['left', 'right'] as const)
    .flatMap((side) => freeStretches(side, sheet, sites, reach(side)))
    .sort((a, b) => b.height - a.height || byText(a.side, b.side) || a.top - b.top);
  const put = (of: readonly FlagSize[], { side, top, height }: Stretch): void => {
    let y = top + Math.max(0, (height - flagColumnHeight(of)) / 2);
    for (const size of of) {
      const x = side === 'left' ? sheet.frame.x + fromFrame : right(sheet.frame) - fromFrame - size.width;
      places.set(size.id, { x: Math.round(x), y: Math.round(y + size.plateAt) });
      y += size.room + apart;
    }
  };
  let rest = [...sizes];
  for (const stretch of stretches) {
    let count = rest.length;
    while (count > 0 && flagColumnHeight(rest.slice(0, count)) > stretch.height) count -= 1;
    put(rest.slice(0, count), stretch);
    rest = rest.slice(count);
  }
  // What has no room anywhere stands over something: the sheet says itself that it is crowded.
  if (rest.length > 0)
    put(rest, stretches[0] ?? { side: 'left', top: frame.y + fromFrame, height: frame.height });
  return places;
};
