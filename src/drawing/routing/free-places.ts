import type {
  CableGeometry,
  DeviceGeometry,
  JacketGeometry,
  Point,
  Rect,
  RingGeometry,
  SheetFrame,
  SiteGeometry,
  TrunkGeometry,
} from '../geometry.ts';
import { site as siteSizes, text } from '../parts/sizes.ts';
import { textWidth } from '../text-width.ts';
import type { Design } from '../../engine/model/design.ts';
import { rectIndex } from './rect-index.ts';
import { runRect } from './rects.ts';

/** The boxes that words must not cover, by what they belong to. */
export interface Occupied {
  readonly hits: (box: Rect) => boolean;
  readonly add: (...boxes: readonly Rect[]) => void;
}

export const occupied = (boxes: readonly Rect[]): Occupied => {
  const taken = rectIndex((box: Rect) => box, boxes);
  return { hits: (box) => taken.isAny(box), add: taken.add };
};

/** The ground that a polyline covers, run by run. */
const runRects = (polyline: readonly Point[], half: number): readonly Rect[] =>
  polyline.slice(1).map((q, i) => runRect(polyline[i]!, q, half, half));

/** The room of a site's name on the top line of its frame. */
export const siteNameRect = (design: Design, { id, rect }: SiteGeometry): Rect => ({
  x: rect.x + siteSizes.nameAt - 4,
  y: rect.y - 10,
  width: textWidth(design.sites[id]?.name ?? '', text.siteName, 600) + 8,
  height: 20,
});

/** Plates, rings, ferrules, cuffs, furniture and names of sites and pairs. */
export const solidBoxes = (
  design: Design,
  parts: {
    readonly sheet: SheetFrame;
    readonly sites: readonly SiteGeometry[];
    readonly devices: readonly DeviceGeometry[];
    readonly rings: readonly RingGeometry[];
    readonly jackets: readonly JacketGeometry[];
  },
): readonly Rect[] => [
  parts.sheet.titleBlock,
  parts.sheet.legend,
  ...parts.sites.map((site) => siteNameRect(design, site)),
  ...parts.devices.flatMap((device) => [
    ...device.plates.map((plate) => plate.rect),
    ...(device.bracket === undefined ? [] : [device.bracket.rect]),
    ...(device.kind === 'ha-pair'
      ? [{ x: device.rect.x, y: device.rect.y - 22, width: device.plates[0]!.rect.width - 30, height: 20 }]
      : []),
  ]),
  ...parts.rings.flatMap((ring) => [
    { x: ring.centre.x - 14, y: ring.centre.y - 14, width: 28, height: 28 },
    ...ring.groups.flatMap((group) => group.ferrules.map((ferrule) => ferrule.rect)),
    ...(ring.comb === undefined ? [] : [runRect(ring.comb.spine[0], ring.comb.spine[1], 2)]),
  ]),
  ...parts.jackets.flatMap((jacket) => jacket.cuffs.map((cuff) => cuff.rect)),
];

export const jacketBoxes = (jackets: readonly JacketGeometry[]): readonly Rect[] =>
  jackets.flatMap((jacket) => (jacket.noWay ? [] : runRects(jacket.polyline, jacket.width / 2)));

export const trunkBoxes = (trunks: readonly TrunkGeometry[]): readonly Rect[] =>
  trunks.flatMap(({ pieces }) =>
    pieces.flatMap(({ path, width }) =>
      runRects(
        path.map((step) => step.to),
        width / 2,
      ),
    ),
  );

export const cableBoxes = (cables: readonly CableGeometry[]): readonly Rect[] =>
  cables.flatMap((cable) => (cable.noWay ? [] : runRects(cable.polyline, cable.aggregated ? 6 : 1.5)));
