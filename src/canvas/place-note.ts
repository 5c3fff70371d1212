import type { Point, Rect, SheetGeometry } from '../drawing/geometry.ts';
import { anchorOf } from '../drawing/routing/anchors.ts';
import { bandRects } from '../drawing/routing/bands.ts';
import { cableBoxes, jacketBoxes, occupied, solidBoxes, trunkBoxes } from '../drawing/routing/free-places.ts';
import { covers } from '../drawing/routing/rects.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import { joinPatches } from '../engine/model/merge-patch.ts';
import type { NewId, Operation } from '../workspace/operations/operation.ts';
import { pinNote } from '../workspace/operations/place-parts.ts';

// A pinned note wraps at 220. Best it has room for three lines; where that is far off, a line or a few words must do.
const rooms = [
  { width: 220, height: 57, withinPx: 200, stepPx: 8 },
  { width: 220, height: 19, withinPx: 200, stepPx: 8 },
  { width: 100, height: 19, withinPx: 160, stepPx: 4 },
  { width: 220, height: 57, withinPx: 1200, stepPx: 24 },
] as const;
const roomPx = 6;

/** How far a point is from a rectangle's edge; 0 inside. */
const gapTo = (at: Point, { x, y, width, height }: Rect): number =>
  Math.hypot(Math.max(x - at.x, at.x - x - width, 0), Math.max(y - at.y, at.y - y - height, 0));

const grown = ({ x, y, width, height }: Rect): Rect => ({
  x: x - roomPx,
  y: y - roomPx,
  width: width + 2 * roomPx,
  height: height + 2 * roomPx,
});

/** The free ground nearest to a point, inside sites as well as between them; undefined where all near it is taken. */
const freeGround = (design: Design, geometry: SheetGeometry, anchor: Point): Point | undefined => {
  const { sheet, jackets, trunks, cables, bands, rings, notes } = geometry;
  const taken = occupied([
    ...solidBoxes(design, geometry),
    ...jacketBoxes(jackets),
    ...trunkBoxes(trunks),
    ...cableBoxes(cables),
    ...bands.flatMap((band) => [...bandRects(band), band.text.rect]),
    ...[...rings, ...cables].flatMap(({ label }) => (label === undefined ? [] : [label.rect])),
    ...notes.map(({ rect }) => rect),
  ]);
  for (const { width, height, withinPx, stepPx } of rooms) {
    let best: Point | undefined;
    let nearest: number = withinPx;
    for (let y = anchor.y - withinPx - height; y <= anchor.y + withinPx; y += stepPx)
      for (let x = anchor.x - withinPx - width; x <= anchor.x + withinPx; x += stepPx) {
        const box = { x, y, width, height };
        const away = gapTo(anchor, box);
        if (away >= nearest || away < roomPx || !covers(sheet.frame, box)) continue;
        if (taken.hits(grown(box))) continue;
        best = { x: Math.round(x), y: Math.round(y) };
        nearest = away;
      }
    if (best !== undefined) return best;
  }
  return undefined;
};

/**
 * A note pinned to an element, put on the nearest free ground: it goes along when the element moves and stays when other
 * things do. Where all is full the drawing places it.
 */
export const pinNoteBeside = (
  design: Design,
  geometry: SheetGeometry,
  about: ElementRef,
  newId: NewId,
): Operation => {
  const pinned = pinNote(design, about, newId);
  const id = pinned.ok ? pinned.created?.[0]?.id : undefined;
  if (!pinned.ok || id === undefined) return pinned;
  const anchor = anchorOf(geometry, about, design);
  const at = anchor === undefined ? undefined : freeGround(design, geometry, anchor);
  if (at === undefined) return pinned;
  return {
    ...pinned,
    patch: joinPatches(design, [pinned.patch, { layout: { notes: { [id]: { ...at } } } }]),
  };
};
