import type { Design } from '../../engine/model/design.ts';
import type { BandGeometry, CableGeometry, Crowded, Rect, SheetGeometry } from '../geometry.ts';
import { sheetSizes } from '../../engine/model/layout.ts';
import { lane } from '../parts/sizes.ts';
import { bandText } from './band-text.ts';
import type { BandPlace } from './bands.ts';
import { bandRects } from './bands.ts';
import { cableGeometries } from './cables.ts';
import type { FurnishedSheet } from './furnish.ts';
import { cordsOf, deviceGeometries, furnish } from './furnish.ts';
import { cableBoxes, jacketBoxes, occupied, siteNameRect, solidBoxes, trunkBoxes } from './free-places.ts';
import { placeLandingLabels, placeRingLabels } from './labels.ts';
import { trunkGeometries } from './trunks.ts';
import { placeNotes } from './note-places.ts';
import { isLargeGround } from './detour.ts';
import { jacketGeometries } from './jackets.ts';
import type { RoutedCords } from './route-cords.ts';
import { covers } from './rects.ts';
import { routeAround, routeCords } from './route-cords.ts';

export interface RoutedSheet {
  readonly furnished: FurnishedSheet;
  readonly cords: RoutedCords;
  readonly pitches: ReadonlyMap<string, number>;
}

/** Routes all cords once, without mending overlaps: enough to compare layouts. */
export const routeSheetOnce = (design: Design): RoutedSheet => {
  const furnished = furnish(design);
  const cords = routeCords(
    furnished.ground,
    cordsOf(furnished, () => lane.pitch),
    0,
  );
  return { furnished, cords, pitches: new Map() };
};

/** Routes all cords, with lanes drawn closer on transports whose jackets would overlap otherwise. */
const routeSheet = (design: Design): RoutedSheet => {
  const furnished = furnish(design);
  const pitches = new Map<string, number>();
  let best: RoutedSheet | undefined;
  const [closer, closest] = lane.fallbackPitches;
  const tries = isLargeGround(furnished.ground) ? [lane.pitch, closest] : [lane.pitch, closer, closest];
  for (const round of tries.keys()) {
    const cords = routeCords(
      furnished.ground,
      cordsOf(furnished, (transport) => pitches.get(transport ?? '') ?? lane.pitch),
    );
    const now: RoutedSheet = { furnished, cords, pitches: new Map(pitches) };
    if (best === undefined || trouble(now) < trouble(best)) best = now;
    const next = tries[round + 1];
    if (trouble(now) === 0 || next === undefined) break;
    for (const { ways } of cords.overlaps)
      for (const way of ways) pitches.set(cords.ways[way]!.cord.transport ?? '', next);
    if (cords.overlaps.length === 0) break;
  }
  return best!;
};

const trouble = ({ cords }: RoutedSheet): number =>
  cords.overlaps.length + cords.ways.filter((way) => way.found === 'none').length;

interface Drawn {
  readonly design: Design;
  readonly routed: RoutedSheet;
  readonly geometry: SheetGeometry;
}

const drawn = new WeakMap<Design['layout'], Drawn>();

const routedParts = [
  'sites',
  'devices',
  'transports',
  'links',
  'endpoints',
  'associations',
  'tunnels',
  'segments',
  'notes',
  'layout',
] as const satisfies readonly (keyof Design)[];

const drawnOf = (design: Design): Drawn => {
  const before = drawn.get(design.layout);
  if (before !== undefined && routedParts.every((part) => before.design[part] === design[part]))
    return before;
  const routed = routeSheet(design);
  const now = { design, routed, geometry: draw(design, routed) };
  drawn.set(design.layout, now);
  return now;
};

/**
 * The whole drawing of a design: everything placed and routed, from its layout alone. The same design gives the same
 * drawing however it was reached; edits of parts that are not drawn keep the drawing itself.
 */
export const route = (design: Design): SheetGeometry => drawnOf(design).geometry;

/**
 * A drawing quick enough for every step of a drag. Cords and cables whose ends stay where they were `from` the design before
 * it keep their ways; the others are routed without a look at them, and overlaps are not mended until the drop, when `route`
 * answers for good.
 */
export const routeWhileDragging = (design: Design, from: Design): SheetGeometry => {
  const before = drawnOf(from);
  if (routedParts.every((part) => from[part] === design[part])) return before.geometry;
  const furnished = furnish(design);
  const { pitches, cords: held } = before.routed;
  const cords = cordsOf(furnished, (transport) => pitches.get(transport ?? '') ?? lane.pitch);
  const bands = furnished.ground.bands.map((band) => wideAsBefore(band, held.bands));
  const ground = { ...furnished.ground, bands };
  return draw(
    design,
    { furnished, cords: routeAround(ground, cords, held), pitches },
    before.geometry.cables,
  );
};

/** A band that stands where it stood is as wide as its cords have made it. */
const wideAsBefore = (band: BandPlace, before: readonly BandPlace[]): BandPlace => {
  const same = before.find(({ id }) => id === band.id);
  const stays =
    same !== undefined &&
    same.limbs.length === band.limbs.length &&
    same.limbs.every((limb, i) => {
      const now = band.limbs[i]!;
      return (
        Math.abs(limb.x + limb.width / 2 - now.x - now.width / 2) <= limb.width &&
        Math.abs(limb.y + limb.height / 2 - now.y - now.height / 2) <= limb.height
      );
    });
  return stays ? same : band;
};

const draw = (
  design: Design,
  { furnished, cords, pitches }: RoutedSheet,
  heldCables: readonly CableGeometry[] = [],
): SheetGeometry => {
  const { sheet, sites, bundles, ground } = furnished;
  const shaped = bundles.map((bundle, i) => ({
    bundle,
    way: cords.ways[i]!,
    pitch: pitches.get(bundle.transport ?? '') ?? lane.pitch,
  }));
  const devices = deviceGeometries(furnished);
  const jackets = jacketGeometries(shaped, cords.crossings, furnished.rings, cords.bands, [
    sheet.titleBlock,
    sheet.legend,
    ...devices.flatMap((device) => device.plates.map((plate) => plate.rect)),
  ]);
  const trunks = trunkGeometries(bundles, cords.ways);
  const laid = cableGeometries(
    design,
    furnished,
    {
      ...ground,
      bands: cords.bands,
      // Cables keep off the names of sites; cords have no choice.
      obstacles: [...ground.obstacles, ...sites.map((site) => ({ rect: siteNameRect(design, site) }))],
    },
    jackets,
    heldCables,
  );
  const rawRings = [...furnished.rings.values()];

  const cordBoxes = [...jacketBoxes(jackets), ...trunkBoxes(trunks)];
  const taken = occupied([
    ...solidBoxes(design, { sheet, sites, devices, rings: rawRings, jackets }),
    ...cordBoxes,
    ...cableBoxes(laid.map(({ geometry }) => geometry)),
  ]);
  const rings = placeRingLabels(rawRings, taken);
  const cables = placeLandingLabels(design, laid, sites, taken);
  const landings = laid.flatMap(({ geometry }) =>
    geometry.landing === undefined ? [] : [geometry.landing.bar],
  );
  const bands = cords.bands.map((band): BandGeometry => {
    const text = bandText(design, band, cordBoxes, landings, taken, sheet.frame);
    taken.add(text.rect);
    return {
      id: band.id,
      limbs: band.limbs,
      ...(band.header === undefined ? {} : { header: band.header }),
      orientation: band.orientation,
      text,
    };
  });
  taken.add(...sites.map((site) => site.rect), ...bands.flatMap((band) => bandRects(band)));
  const rectOf = (collection: string, id: string): Rect | undefined =>
    collection === 'devices'
      ? devices.find((device) => device.id === id)?.rect
      : collection === 'sites'
        ? sites.find((site) => site.id === id)?.rect
        : collection === 'transports'
          ? bands.find((band) => band.id === id)?.text.rect
          : collection === 'endpoints'
            ? rings.find(({ ring }) => ring.endpoint === id)?.ring.label.rect
            : undefined;
  const notes = placeNotes(design, sheet, taken, rectOf);

  const outside =
    sheet.size === sheetSizes.at(-1)
      ? sites.filter((site) => !covers(sheet.frame, site.rect)).map((site) => site.id)
      : [];
  const crowded: Crowded[] = [
    ...(outside.length > 0 ? [{ what: 'sheet' as const, ids: outside }] : []),
    ...cords.overlaps.map(({ ways }): Crowded => ({
      what: 'overlap',
      ids: ways.map((way) => bundles[way]!.id),
    })),
    ...jackets.flatMap((jacket): Crowded[] => (jacket.noWay ? [{ what: 'no-way', ids: [jacket.id] }] : [])),
    ...cables.flatMap(({ geometry }): Crowded[] =>
      geometry.noWay ? [{ what: 'no-way', ids: geometry.links }] : [],
    ),
    ...rings.flatMap(({ ring, crowded: full }): Crowded[] =>
      full ? [{ what: 'text', ids: [ring.endpoint] }] : [],
    ),
    ...cables.flatMap(({ geometry, crowded: full }): Crowded[] =>
      full ? [{ what: 'text', ids: geometry.links }] : [],
    ),
    ...bands.flatMap((band): Crowded[] =>
      band.text.mode === 'name-only' ? [{ what: 'text', ids: [band.id] }] : [],
    ),
    ...(notes.crowded.length > 0 ? [{ what: 'text' as const, ids: notes.crowded }] : []),
  ];
  return {
    sheet,
    sites,
    bands,
    devices,
    rings: rings.map(({ ring }) => ring),
    jackets,
    trunks,
    cables: cables.map(({ geometry }) => geometry),
    notes: notes.notes,
    crowded,
  };
};
