import type { Design } from '../../engine/model/design.ts';
import type { Point, Rect, SheetFrame } from '../geometry.ts';
import { wrapText } from '../text-width.ts';
import type { Occupied } from './free-places.ts';
import { bottom, byText, covers, right } from './rects.ts';

const noteSize = 14;
const lineHeight = 19;
const headHeight = 26;
const numberWidth = 18;
const widths = [530, 460, 380, 300, 240] as const;
const pinnedWidth = 220;

export interface NotePlace {
  readonly id: string;
  /** Top left corner of the note's words. */
  readonly at: Point;
  readonly standing: boolean;
  readonly rect: Rect;
}

const heightOf = (words: string, width: number): number =>
  lineHeight * Math.max(1, wrapText(words, width, noteSize).length);

/** The first free place for a block, looking along rows from the top left; undefined where there is none. */
const freePlace = (sheet: SheetFrame, width: number, height: number, taken: Occupied): Point | undefined => {
  const { frame } = sheet;
  for (let y = frame.y + 16; y + height <= bottom(frame) - 10; y += 24)
    for (let x = frame.x + 20; x + width <= right(frame) - 14; x += 24)
      if (!taken.hits({ x: x - 6, y: y - 4, width: width + 12, height: height + 8 })) return { x, y };
  return undefined;
};

/** The free place for a block that lies nearest to where it is wished; undefined where there is none. */
const nearestFreePlace = (
  { frame }: SheetFrame,
  wished: Point,
  width: number,
  height: number,
  taken: Occupied,
): Point | undefined => {
  const isFree = (at: Point): boolean =>
    !taken.hits({ x: at.x - 6, y: at.y - 4, width: width + 12, height: height + 8 });
  let best: Point | undefined;
  let distance = Infinity;
  for (let y = frame.y + 16; y + height <= bottom(frame) - 10; y += 20)
    for (let x = frame.x + 20; x + width <= right(frame) - 14; x += 20) {
      const away = Math.hypot(x - wished.x, y - wished.y);
      if (away >= distance || !isFree({ x, y })) continue;
      best = { x, y };
      distance = away;
    }
  return isFree(wished) && covers(frame, { ...wished, width, height }) ? wished : best;
};

/** Where notes stand: standing ones in one block, numbered by their ids, the others where they were put. */
export const placeNotes = (
  design: Design,
  sheet: SheetFrame,
  taken: Occupied,
  rectOf: (collection: string, id: string) => Rect | undefined,
): { readonly notes: readonly NotePlace[]; readonly crowded: readonly string[] } => {
  const entries = Object.entries(design.notes).sort(([a], [b]) => byText(a, b));
  const standing = entries.filter(([, note]) => note.standing === true);
  const notes: NotePlace[] = [];
  const crowded: string[] = [];
  if (standing.length > 0) {
    const blocks = widths.map((width) => ({
      width,
      height:
        headHeight +
        standing.reduce((sum, [, note]) => sum + heightOf(note.text, width - numberWidth) + 2, 0),
    }));
    let place: { at: Point; width: number } | undefined;
    for (const { width, height } of blocks) {
      const at = freePlace(sheet, width, height, taken);
      if (at === undefined) continue;
      place = { at, width };
      break;
    }
    if (place === undefined) {
      crowded.push(...standing.map(([id]) => id));
      place = { at: { x: sheet.frame.x + 20, y: sheet.frame.y + 16 }, width: widths[0] };
    }
    let y = place.at.y + headHeight;
    for (const [id, note] of standing) {
      const height = heightOf(note.text, place.width - numberWidth);
      const rect = { x: place.at.x, y, width: place.width, height };
      notes.push({ id, at: { x: place.at.x, y }, standing: true, rect });
      taken.add(rect);
      y += height + 2;
    }
  }
  for (const [id, note] of entries) {
    if (note.standing === true) continue;
    const put = design.layout.notes?.[id];
    const target = note.target === undefined ? undefined : rectOf(note.target.collection, note.target.id);
    const height = heightOf(note.text, pinnedWidth);
    const wished: Point =
      put ??
      (target === undefined
        ? { x: sheet.frame.x + 24, y: sheet.frame.y + 24 }
        : { x: right(target) + 24, y: target.y - height - 16 });
    const box = (at: Point): Rect => ({ x: at.x, y: at.y, width: pinnedWidth, height });
    const at =
      put === undefined
        ? (nearestFreePlace(sheet, wished, pinnedWidth, height, taken) ?? wished)
        : { x: put.x, y: put.y };
    if (put === undefined && taken.hits(box(at))) crowded.push(id);
    taken.add(box(at));
    notes.push({ id, at, standing: false, rect: box(at) });
  }
  return { notes: notes.sort((a, b) => byText(a.id, b.id)), crowded };
};
