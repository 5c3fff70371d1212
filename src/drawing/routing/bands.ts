import type { Design } from '../../engine/model/design.ts';
import type { Rect, SheetFrame } from '../geometry.ts';
import { band as bandSizes, gutter } from '../parts/sizes.ts';
import { bottom, byText, centre, overlap, right } from './rects.ts';

/** A transport's band as it lies before its cords are packed. */
export interface BandPlace {
  readonly id: string;
  readonly trusted: boolean;
  readonly orientation: 'vertical' | 'horizontal';
  readonly limbs: readonly Rect[];
  readonly header?: Rect;
}

export const bandRects = (band: Pick<BandPlace, 'limbs' | 'header'>): readonly Rect[] =>
  band.header === undefined ? band.limbs : [...band.limbs, band.header];

/** How far down a band may run at this place before it would touch the legend or the title block. */
export const bandFoot = (sheet: SheetFrame, x: number, width: number): number => {
  const foot = bottom(sheet.frame);
  const probe = { x: x - 4, y: sheet.frame.y, width: width + 8, height: sheet.frame.height };
  return Math.min(
    foot,
    ...[sheet.titleBlock, sheet.legend].filter((box) => overlap(box, probe)).map((box) => box.y),
  );
};

/** Where the bands lie: as laid out, and for a new transport upright in the free strip nearest the middle of the sheet. */
export const bandPlaces = (
  design: Design,
  sheet: SheetFrame,
  taken: readonly Rect[],
): readonly BandPlace[] => {
  const places: BandPlace[] = [];
  const occupied = [...taken];
  const entries = Object.entries(design.transports).sort(([a], [b]) => byText(a, b));
  for (const [id, transport] of entries) {
    const laid = design.layout.transports?.[id];
    if (laid === undefined) continue;
    const first = laid.limbs[0]!;
    const limbs = laid.limbs.map(({ x, y, width, height }) => ({ x, y, width, height }));
    const header = laid.header;
    places.push({
      id,
      trusted: transport.trusted === true,
      orientation: first.width > first.height ? 'horizontal' : 'vertical',
      limbs,
      ...(header === undefined
        ? {}
        : { header: { x: header.x, y: header.y, width: header.width, height: header.height } }),
    });
    occupied.push(...limbs);
  }
  for (const [id, transport] of entries) {
    if (design.layout.transports?.[id] !== undefined) continue;
    const width = transport.trusted === true ? bandSizes.trustedWidth : bandSizes.width;
    const middle = centre(sheet.frame).x - width / 2;
    const strip = (x: number): Rect => ({ x, y: sheet.frame.y, width, height: sheet.frame.height });
    let x = middle;
    for (let off = 0; off < sheet.frame.width / 2; off += 20) {
      const free = [middle - off, middle + off].find((candidate) => {
        const room = { ...strip(candidate - gutter), width: width + 2 * gutter };
        return (
          candidate >= sheet.frame.x &&
          candidate + width <= right(sheet.frame) &&
          !occupied.some((rect) => overlap(rect, room))
        );
      });
      if (free === undefined) continue;
      x = free;
      break;
    }
    const limb = { ...strip(x), height: bandFoot(sheet, x, width) - sheet.frame.y };
    occupied.push(limb);
    places.push({ id, trusted: transport.trusted === true, orientation: 'vertical', limbs: [limb] });
  }
  return places.sort((a, b) => byText(a.id, b.id));
};
