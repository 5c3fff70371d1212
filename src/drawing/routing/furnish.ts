import type { Design } from '../../engine/model/design.ts';
import type {
  DeviceGeometry,
  PipGeometry,
  Rect,
  RingGeometry,
  SheetFrame,
  SiteGeometry,
} from '../geometry.ts';
import { bareWidth, jacketWidth, leastRadius, text } from '../parts/sizes.ts';
import { textWidth } from '../text-width.ts';
import type { BandPlace } from './bands.ts';
import { bandPlaces } from './bands.ts';
import type { Bundle } from './bundles.ts';
import { bundlesOf } from './bundles.ts';
import { combOrder, combRect, ringGeometry } from './combs.ts';
import type { Cord, Ground, Mouth, Obstacle } from './ground.ts';
import { placePips } from './pips.ts';
import { portLoads, portSpots } from './port-sides.ts';
import { around, bottom, byText, rectBetween, right } from './rects.ts';
import type { RingSeat } from './ring-seats.ts';
import { bracketRect, laneCount, ringSeats, ringedSides, sideTowards } from './ring-seats.ts';
import { sheetFrame } from './sheet-frame.ts';
import { siteFrames } from './site-frames.ts';
import type { PortLoad, Stand } from './stands.ts';
import { standsOf } from './stands.ts';

/** Everything that stands on the sheet before a cord or a cable is drawn. */
export interface FurnishedSheet {
  readonly sheet: SheetFrame;
  readonly stands: ReadonlyMap<string, Stand>;
  readonly bands: readonly BandPlace[];
  readonly seats: readonly RingSeat[];
  readonly rings: ReadonlyMap<string, RingGeometry>;
  readonly pips: ReadonlyMap<string, PipGeometry>;
  readonly sites: readonly SiteGeometry[];
  /** Bundles whose both ends have a ring. */
  readonly bundles: readonly Bundle[];
  readonly ground: Ground;
}

/** The side on which each landed port of a device looks at its transport, by `device port`. */
const wanSidesOf = (
  design: Design,
  stands: ReadonlyMap<string, Stand>,
  bands: readonly BandPlace[],
): ReadonlyMap<string, 'left' | 'right'> => {
  const sides = new Map<string, 'left' | 'right'>();
  for (const link of Object.values(design.links)) {
    const stand = link.kind === 'landing' ? stands.get(link.device) : undefined;
    if (link.kind !== 'landing' || stand === undefined) continue;
    sides.set(`${link.device} ${link.port}`, sideTowards(stand.rect, link.transport, bands));
  }
  return sides;
};

const sameLoads = (a: ReadonlyMap<string, PortLoad>, b: ReadonlyMap<string, PortLoad>): boolean =>
  a.size === b.size &&
  [...a].every(([id, load]) => {
    const other = b.get(id);
    return (
      other !== undefined &&
      other.upright === load.upright &&
      other.level === load.level &&
      other.rings === load.rings
    );
  });

/** The name above a pair's first member, as far as no WAN pip stands under it. */
const pairNameRect = (stand: Stand, pips: ReadonlyMap<string, PipGeometry>): Rect => {
  const { x, y } = stand.plates[0]!.rect;
  const words = textWidth(stand.device.name, 15, 600) + 6 + textWidth('HA pair', text.label);
  const nearest = Math.min(
    ...[...pips.values()]
      .filter((pip) => pip.device === stand.id && pip.side === 'top' && pip.member === 1)
      .map((pip) => pip.at.x - 8),
  );
  return { x, y: y - 22, width: Math.max(1, Math.min(words, nearest - x)), height: 19 };
};

const obstaclesOf = (
  sheet: SheetFrame,
  stands: ReadonlyMap<string, Stand>,
  rings: ReadonlyMap<string, RingGeometry>,
  seats: readonly RingSeat[],
  pips: ReadonlyMap<string, PipGeometry>,
): readonly Obstacle[] => {
  const obstacles: Obstacle[] = [{ rect: sheet.titleBlock }, { rect: sheet.legend }];
  for (const stand of stands.values()) {
    const { id, plates } = stand;
    for (const { rect } of plates) obstacles.push({ rect, owner: id });
    const [first, second] = plates;
    if (first === undefined || second === undefined) continue;
    // The gap between a pair's members belongs to their own links.
    const gap = rectBetween(second.rect.x, bottom(first.rect), right(first.rect), second.rect.y);
    obstacles.push({ rect: gap, owner: id });
    obstacles.push({ rect: pairNameRect(stand, pips) });
  }
  const bracketed = new Set<string>();
  for (const seat of seats) {
    obstacles.push({
      rect: combRect(rings.get(seat.endpoint)!),
      owner: seat.device,
      endpoint: seat.endpoint,
    });
    const stand = stands.get(seat.device)!;
    if (stand.device.kind === 'ha-pair' && !bracketed.has(stand.id)) {
      bracketed.add(stand.id);
      obstacles.push({ rect: bracketRect(stand, seat.side), owner: stand.id });
    }
  }
  return obstacles;
};

/** Stands, rings, pips, frames and bands of a design, from its layout alone. */
export const furnish = (design: Design): FurnishedSheet => {
  const sheet = sheetFrame(design.layout.sheet ?? 'A3', Object.keys(design.segments).length);
  const allBundles = bundlesOf(design);
  const ringCounts = new Map<string, number>();
  for (const { device } of Object.values(design.endpoints))
    ringCounts.set(device, (ringCounts.get(device) ?? 0) + 1);

  let loads: ReadonlyMap<string, PortLoad> = new Map();
  for (let round = 0; ; round += 1) {
    const stands = standsOf(design, sheet, loads);
    const bands = bandPlaces(
      design,
      sheet,
      [...stands.values()].map((stand) => stand.rect),
    );
    const seats = ringSeats(design, stands, bands, allBundles);
    const wanSides = wanSidesOf(design, stands, bands);
    const spots = portSpots(design, stands, ringedSides(seats), wanSides);
    const grown = portLoads(spots, ringCounts);
    // Plates grow with their pips, and a grown plate may turn a pip to another side: twice is enough to settle sizes.
    if (round < 2 && !sameLoads(loads, grown)) {
      loads = grown;
      continue;
    }
    const seatOf = new Map(seats.map((seat) => [seat.endpoint, seat]));
    const rings = new Map(
      seats.map((seat) => [
        seat.endpoint,
        ringGeometry(design, seat, combOrder(design, seat, seatOf, bands)),
      ]),
    );
    const pips = placePips(design, stands, spots, seats, wanSides);
    const sites = siteFrames(design, sheet, stands, [...rings.values()]);
    return {
      sheet,
      stands,
      bands,
      seats,
      rings,
      pips,
      sites,
      bundles: allBundles.filter(
        (bundle) =>
          bundle.a.endpoint !== bundle.b.endpoint &&
          rings.has(bundle.a.endpoint) &&
          rings.has(bundle.b.endpoint),
      ),
      ground: {
        sheet: sheet.frame,
        obstacles: obstaclesOf(sheet, stands, rings, seats, pips),
        frames: sites.map(({ id, rect }) => ({ site: id, rect })),
        bands,
      },
    };
  }
};

/** The manifold that a bundle leaves in a trunk: of two the one with more groups. */
const trunkOf = (rings: ReadonlyMap<string, RingGeometry>, bundle: Bundle): Cord['trunk'] => {
  const ends = (['a', 'b'] as const)
    .map((end) => ({ end, ring: rings.get(bundle[end].endpoint)! }))
    .filter(({ ring }) => ring.manifold !== undefined)
    .sort((p, q) => q.ring.groups.length - p.ring.groups.length || byText(p.ring.endpoint, q.ring.endpoint));
  const owner = ends[0];
  return owner === undefined
    ? undefined
    : { endpoint: owner.ring.endpoint, end: owner.end, jackets: owner.ring.groups.length };
};

/** The cords to be routed, one for each bundle, with lanes this far apart. */
export const cordsOf = (
  { bundles, rings, stands }: FurnishedSheet,
  pitchOf: (transport: string | undefined) => number,
): readonly Cord[] =>
  bundles.map((bundle): Cord => {
    const mouth = (end: 'a' | 'b'): Mouth => {
      const geometry = rings.get(bundle[end].endpoint)!;
      const group = geometry.groups.find(
        (g) => g.jacket === bundle.id && g.end === end && (g.part ?? 0) === bundle.part,
      )!;
      const { device } = bundle[end];
      return {
        at: group.mouth,
        side: geometry.side,
        endpoint: geometry.endpoint,
        device,
        site: stands.get(device)!.device.site,
      };
    };
    const trunk = trunkOf(rings, bundle);
    const pitch = pitchOf(bundle.transport);
    const lanes = laneCount(bundle);
    return {
      key: bundle.key,
      ...(bundle.transport === undefined ? {} : { transport: bundle.transport }),
      width: bundle.kind === 'bare' ? bareWidth : jacketWidth(lanes, pitch),
      leastRadius: leastRadius(lanes, pitch),
      ...(trunk === undefined ? {} : { trunk }),
      a: mouth('a'),
      b: mouth('b'),
    };
  });

/** Devices as they are drawn: plates, bracket, pips. */
export const deviceGeometries = (furnished: FurnishedSheet): readonly DeviceGeometry[] => {
  const { stands, seats, pips } = furnished;
  return [...stands.values()]
    .sort((a, b) => byText(a.id, b.id))
    .map((stand): DeviceGeometry => {
      const own = [...pips.values()].filter((pip) => pip.device === stand.id);
      const side =
        stand.device.kind === 'ha-pair'
          ? (seats.find((seat) => seat.device === stand.id)?.side ?? 'right')
          : undefined;
      const bracket: { side: NonNullable<typeof side>; rect: Rect } | undefined =
        side === undefined ? undefined : { side, rect: bracketRect(stand, side) };
      return {
        id: stand.id,
        kind: stand.device.kind,
        plates: stand.plates,
        ...(bracket === undefined ? {} : { bracket }),
        mirrored: stand.device.kind === 'host' && own.some((pip) => pip.cabled && pip.side === 'left'),
        pips: own,
        rect: bracket === undefined ? stand.rect : around([stand.rect, bracket.rect])!,
      };
    });
};
