import type { Design } from '../../engine/model/design.ts';
import type { RingGeometry, Rect, SheetFrame, SiteGeometry } from '../geometry.ts';
import { closedSite, cuff, ferrule, manifold, site as siteSizes } from '../parts/sizes.ts';
import { around, bottom, byText, grown, overlap, outward, right } from './rects.ts';
import type { Stand } from './stands.ts';

/** A bar is shorter than ferrules with their tails; its frame lies where it would lie with those. */
const manifoldToFrame = ferrule.width + cuff.fromFerrule - 8 - manifold.width;
const emptySite = { width: 240, height: 110 } as const;

/** The room a device wants inside its site's frame: plates, name above a pair, and its combs up to short of their mouths. */
const roomOf = (stand: Stand, rings: readonly RingGeometry[]): Rect => {
  const { kind } = stand.device;
  const beside = kind === 'host' ? 7 : siteSizes.toPlainEdge;
  const above = siteSizes.nameLine + (kind === 'ha-pair' ? 20 : 0);
  const rect = stand.rect;
  const boxes: Rect[] = [
    {
      x: rect.x - beside,
      y: rect.y - above,
      width: rect.width + 2 * beside,
      height: rect.height + above + siteSizes.below,
    },
  ];
  for (const ring of rings) {
    const out = outward[ring.side];
    for (const { mouth } of ring.groups) {
      // A cuff stands on the frame, a little outside it.
      const past = ring.manifold === undefined ? -8 : manifoldToFrame;
      const x = mouth.x + out.x * past;
      const y = mouth.y + out.y * past;
      boxes.push({
        x,
        y: y - (out.y === 0 ? siteSizes.nameLine + 11 : 0),
        width: 0,
        height: out.y === 0 ? siteSizes.nameLine + 22 : 0,
      });
    }
    boxes.push({ x: ring.centre.x, y: ring.label.rect.y, width: 0, height: ring.label.rect.height + 8 });
  }
  return around(boxes)!;
};

/**
 * The frame of every site: at least its own rectangle, grown round what stands in it. A collapsed one is drawn close round
 * what is left to see, and as a plate of its own where that is nothing.
 */
export const siteFrames = (
  design: Design,
  sheet: SheetFrame,
  stands: ReadonlyMap<string, Stand>,
  rings: readonly RingGeometry[],
): readonly SiteGeometry[] => {
  const rooms = new Map<string, Rect[]>();
  const freeSides = new Map<string, 'left' | 'right'>();
  for (const stand of stands.values()) {
    const own = rings.filter((ring) => ring.device === stand.id);
    const { site } = stand.device;
    if (own.some((ring) => ring.side === 'left')) freeSides.set(site, 'right');
    rooms.set(site, [...(rooms.get(site) ?? []), roomOf(stand, own)]);
  }
  const frames: SiteGeometry[] = [];
  const homeless: string[] = [];
  for (const id of Object.keys(design.sites).sort(byText)) {
    const laid = design.layout.sites?.[id];
    const own = rooms.get(id) ?? [];
    const collapsed = laid?.collapsed === true;
    const least: readonly Rect[] =
      laid === undefined || (collapsed && own.length > 0)
        ? []
        : collapsed
          ? [{ x: laid.x, y: laid.y, ...closedSite }]
          : [{ x: laid.x, y: laid.y, width: laid.width, height: laid.height }];
    const rect = around([...own, ...least]);
    if (rect === undefined) homeless.push(id);
    else frames.push({ id, rect, collapsed, ...(collapsed ? { free: freeSides.get(id) ?? 'left' } : {}) });
  }
  for (const id of homeless) {
    let rect: Rect = { x: sheet.frame.x + 20, y: sheet.frame.y + 24, ...emptySite };
    for (;;) {
      const room = grown(rect, 12);
      const blocker = frames.find((frame) => overlap(frame.rect, room));
      if (blocker === undefined) break;
      const below = bottom(blocker.rect) + 16;
      rect =
        below + rect.height < bottom(sheet.frame)
          ? { ...rect, y: below }
          : { ...rect, x: right(blocker.rect) + 16, y: sheet.frame.y + 24 };
    }
    frames.push({ id, rect, collapsed: false });
  }
  return frames.sort((a, b) => byText(a.id, b.id));
};
