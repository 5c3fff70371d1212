import type { Design } from '../../engine/model/design.ts';
import type { Crowded, SheetGeometry } from '../geometry.ts';
import { lane } from '../parts/sizes.ts';
import { cableGeometries } from './cables.ts';
import type { FurnishedSheet } from './furnish.ts';
import { cordsOf, deviceGeometries, furnish } from './furnish.ts';
import { jacketGeometries } from './jackets.ts';
import type { RoutedCords } from './route-cords.ts';
import { routeCords } from './route-cords.ts';

export interface RoutedSheet {
  readonly furnished: FurnishedSheet;
  readonly cords: RoutedCords;
  readonly pitches: ReadonlyMap<string, number>;
}

/** Routes all cords, with lanes drawn closer on transports whose jackets would overlap otherwise. */
export const routeSheet = (design: Design): RoutedSheet => {
  const furnished = furnish(design);
  const pitches = new Map<string, number>();
  let best: RoutedSheet | undefined;
  for (const pitch of [lane.pitch, ...lane.fallbackPitches]) {
    const cords = routeCords(
      furnished.ground,
      cordsOf(furnished, (transport) => pitches.get(transport ?? '') ?? lane.pitch),
    );
    const now: RoutedSheet = { furnished, cords, pitches: new Map(pitches) };
    if (best === undefined || trouble(now) < trouble(best)) best = now;
    if (trouble(now) === 0 || pitch === lane.fallbackPitches.at(-1)) break;
    const next = pitch === lane.pitch ? lane.fallbackPitches[0] : lane.fallbackPitches[1];
    for (const { ways } of cords.overlaps)
      for (const way of ways) pitches.set(cords.ways[way]!.cord.transport ?? '', next);
    if (cords.overlaps.length === 0) break;
  }
  return best!;
};

const trouble = ({ cords }: RoutedSheet): number =>
  cords.overlaps.length + cords.ways.filter((way) => way.found === 'none').length;

export const route = (design: Design): SheetGeometry => {
  const { furnished, cords, pitches } = routeSheet(design);
  const { sheet, sites, rings, bundles } = furnished;
  const shaped = bundles.map((bundle, i) => ({
    bundle,
    way: cords.ways[i]!,
    pitch: pitches.get(bundle.transport ?? '') ?? lane.pitch,
  }));
  const crowded: Crowded[] = [];
  for (const { ways } of cords.overlaps)
    crowded.push({ what: 'overlap', ids: ways.map((way) => bundles[way]!.id) });
  shaped.forEach(({ bundle, way }) => {
    if (way.found === 'none') crowded.push({ what: 'no-way', ids: [bundle.id] });
  });
  const jackets = jacketGeometries(shaped, cords.crossings, rings, cords.bands);
  const cables = cableGeometries(design, furnished, { ...furnished.ground, bands: cords.bands }, jackets);
  for (const { geometry } of cables)
    if (geometry.noWay) crowded.push({ what: 'no-way', ids: geometry.links });
  return {
    sheet,
    sites,
    bands: cords.bands.map((band) => ({
      id: band.id,
      limbs: band.limbs,
      ...(band.header === undefined ? {} : { header: band.header }),
      orientation: band.orientation,
      text: { mode: 'in', rect: band.limbs[0]! },
    })),
    devices: deviceGeometries(furnished),
    rings: [...rings.values()],
    jackets,
    cables: cables.map(({ geometry }) => geometry),
    notes: [],
    crowded,
  };
};
