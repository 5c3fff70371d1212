import type { Design } from '../../engine/model/design.ts';
import type { EndName, FerruleGeometry, Point, Rect, RingGeometry } from '../geometry.ts';
import { comb, cuff, ferrule, ferruleWidth, manifold, ring, text } from '../parts/sizes.ts';
import { textWidth } from '../text-width.ts';
import type { BandPlace } from './bands.ts';
import { otherEnd } from './bundles.ts';
import { endpointLabel } from './label-text.ts';
import { around, bottom, byText, centre, isUpright, outward, rectBetween } from './rects.ts';
import type { RingSeat, SeatGroup } from './ring-seats.ts';
import { isManifold, laneCount, nearestLimb } from './ring-seats.ts';
import type { Side } from '../../engine/model/layout.ts';

interface Rank {
  readonly group: SeatGroup;
  readonly sector: 0 | 1 | 2;
  readonly value: number;
}

/**
 * Where a group leads, as an angle from "up and back" through "forward" to "down and back". Sorted by it, the jackets of
 * one comb never cross each other.
 */
const rankOf = (
  seat: RingSeat,
  group: SeatGroup,
  far: RingSeat | undefined,
  bands: readonly BandPlace[],
): Rank => {
  const band = bands.find((b) => b.id === group.bundle.transport);
  if (far === undefined) return { group, sector: 1, value: 0 };
  if (isUpright(seat.side)) return { group, sector: 1, value: far.x };
  const plain: Rank = { group, sector: 1, value: far.y };
  if (band === undefined || band.orientation === 'horizontal') return plain;
  const mine = nearestLimb(band, seat.x);
  const theirs = nearestLimb(band, far.x);
  if (mine === theirs) {
    if (far.side !== seat.side) return plain;
    const away = Math.abs(far.y - seat.y);
    return far.y < seat.y ? { group, sector: 0, value: away } : { group, sector: 2, value: -away };
  }
  const ahead = (centre(theirs).x - centre(mine).x) * outward[seat.side].x > 0;
  const across = Math.abs(centre(theirs).x - centre(mine).x);
  const above = band.header === undefined ? far.y < seat.y : centre(band.header).y < centre(mine).y;
  if (above)
    return ahead ? { group, sector: 1, value: -1e5 - across } : { group, sector: 0, value: 1e5 + across };
  return { group, sector: ahead ? 1 : 2, value: 1e5 + across };
};

/** The groups of a comb from top to bottom (left to right on an upright one). A person's order, where given, goes first. */
export const combOrder = (
  design: Design,
  seat: RingSeat,
  seats: ReadonlyMap<string, RingSeat>,
  bands: readonly BandPlace[],
): readonly SeatGroup[] => {
  const ranked = seat.groups.map((group) =>
    rankOf(seat, group, seats.get(group.bundle[otherEnd(group.end)].endpoint), bands),
  );
  ranked.sort(
    (x, y) =>
      x.sector - y.sector ||
      x.value - y.value ||
      byText(x.group.bundle.key, y.group.bundle.key) * (x.sector === 2 ? -1 : 1),
  );
  const wanted = design.layout.endpoints?.[seat.endpoint]?.order;
  const groups = ranked.map((rank) => rank.group);
  if (wanted === undefined) return groups;
  const place = new Map(wanted.map((id, i) => [id, i]));
  return groups
    .map((group, i) => ({ group, at: place.get(group.bundle.id) ?? wanted.length + i }))
    .sort((x, y) => x.at - y.at)
    .map(({ group }) => group);
};

/** True when travel through this end, from a to b, points right (or down on an upright comb). */
const travelsForward = (side: Side, end: EndName): boolean =>
  (side === 'right' || side === 'bottom') === (end === 'a');

/** A ring with more groups than a comb can hold: one bar, and one mouth for all. */
const manifoldGeometry = (design: Design, seat: RingSeat, groups: readonly SeatGroup[]): RingGeometry => {
  const near = seat.x + outward[seat.side].x * ring.toFerrule;
  const far = near + outward[seat.side].x * manifold.width;
  const rect = rectBetween(near, seat.combAt - manifold.height / 2, far, seat.combAt + manifold.height / 2);
  return {
    endpoint: seat.endpoint,
    device: seat.device,
    side: seat.side,
    centre: { x: seat.x, y: seat.y },
    docksOn: seat.docksOn,
    groups: groups.map(({ bundle, end }) => ({
      jacket: bundle.id,
      part: bundle.part,
      end,
      mouth: { x: far, y: seat.combAt },
      ferrules: bundle.tunnels.map((tunnel) => ({
        tunnel: tunnel.id,
        end: tunnel.turned ? otherEnd(end) : end,
        rect,
        capSide: seat.side,
      })),
    })),
    manifold: { rect, tunnels: groups.reduce((sum, { bundle }) => sum + bundle.tunnels.length, 0) },
    label: labelBeside(endpointLabel(design, seat.endpoint), rect, seat, 'below'),
  };
};

/** Everything a ring carries: its comb, the ferrules in lane order, and where its cords begin. */
export const ringGeometry = (design: Design, seat: RingSeat, groups: readonly SeatGroup[]): RingGeometry => {
  if (isManifold(groups.length, seat.side)) return manifoldGeometry(design, seat, groups);
  const upright = isUpright(seat.side);
  const out = outward[seat.side];
  const pitch = upright ? ferrule.flagPitch : comb.ferrulePitch;
  const apart = upright ? ferrule.flagPitch + 14 : comb.groupPitch;
  const widest = Math.max(
    ferrule.width,
    ...groups.flatMap(({ bundle }) => bundle.tunnels.map((tunnel) => ferruleWidth(tunnel.digits))),
  );
  const depth = upright ? ferrule.height : widest;
  const dock = { x: seat.x, y: seat.y };
  /** A place `away` from the ring's centre, at a coordinate along the edge. */
  const spot = (along: number, away: number): Point =>
    upright ? { x: along, y: seat.y + out.y * away } : { x: seat.x + out.x * away, y: along };
  const near = ring.toFerrule;
  const mouthAt = near + depth + cuff.fromFerrule;

  let along = seat.combAt - seat.combLength / 2;
  const places: number[] = [];
  const built = groups.map(({ bundle, end }) => {
    const first = along;
    const count = laneCount(bundle);
    const mouth = spot(first + ((count - 1) * pitch) / 2, mouthAt);
    // Ferrules lie as the lanes do: lane 0 is leftmost of travel. Upright travel has its left the other way about.
    const forward = travelsForward(seat.side, end) !== upright;
    const inOrder = forward ? bundle.tunnels : [...bundle.tunnels].reverse();
    const ferrules = inOrder.map((tunnel, i): FerruleGeometry => {
      const at = first + i * pitch;
      places.push(at);
      const width = ferruleWidth(tunnel.digits);
      const a = spot(at, near + (upright ? 0 : depth - width));
      const b = spot(at, near + depth);
      return {
        tunnel: tunnel.id,
        end: tunnel.turned ? otherEnd(end) : end,
        rect: upright
          ? { x: at - ferrule.cap / 2, y: Math.min(a.y, b.y), width, height: ferrule.height }
          : { x: Math.min(a.x, b.x), y: at - ferrule.height / 2, width, height: ferrule.height },
        capSide: seat.side,
      };
    });
    if (bundle.tunnels.length === 0) places.push(first);
    along = first + (count - 1) * pitch + apart;
    return { jacket: bundle.id, part: bundle.part, end, mouth, ferrules };
  });

  const along0 = upright ? seat.x : seat.y;
  const needsComb = places.length > 1 || (places.length === 1 && Math.abs(places[0]! - along0) > 0.5);
  const spineFrom = Math.min(along0, ...places);
  const spineTo = Math.max(along0, ...places);
  const boxes = built.flatMap((group) => group.ferrules.map((f) => f.rect));
  const bounds =
    around(boxes) ??
    rectBetween(spot(along0, near).x - 4, dock.y - 10, spot(along0, near + depth).x, dock.y + 10);
  return {
    endpoint: seat.endpoint,
    device: seat.device,
    side: seat.side,
    centre: dock,
    docksOn: seat.docksOn,
    ...(needsComb
      ? {
          comb: {
            arm: [dock, spot(along0, comb.spineAt)] as const,
            spine: [
              spot(spineFrom - (spineFrom === along0 ? 0 : comb.overhang), comb.spineAt),
              spot(spineTo + (spineTo === along0 ? 0 : comb.overhang), comb.spineAt),
            ] as const,
          },
        }
      : {}),
    groups: built,
    label: labelBeside(endpointLabel(design, seat.endpoint), bounds, seat, 'below'),
  };
};

/** A ring's address under its ferrules, or over them. */
export const labelBeside = (
  words: string,
  bounds: Rect,
  seat: Pick<RingSeat, 'side' | 'x' | 'y'>,
  where: 'below' | 'above',
): RingGeometry['label'] => {
  const width = textWidth(words, text.label, 500);
  if (isUpright(seat.side)) {
    const x = seat.x - 20 - width;
    return {
      text: words,
      at: { x: seat.x - 20, y: seat.y + 5 },
      anchor: 'end',
      rect: { x, y: seat.y - 8, width, height: 16 },
    };
  }
  const middle = centre(bounds).x;
  const y = where === 'below' ? bottom(bounds) + 5 : bounds.y - 21;
  return {
    text: words,
    at: { x: middle, y: y + 13 },
    anchor: 'middle',
    rect: { x: middle - width / 2, y, width, height: 16 },
  };
};

/** The ground a comb takes, from its plate to its mouths: nothing else may pass here. */
export const combRect = (geometry: RingGeometry): Rect => {
  const points = [
    geometry.centre,
    ...geometry.groups.map((group) => group.mouth),
    ...(geometry.comb === undefined ? [] : geometry.comb.spine),
  ];
  if (geometry.manifold !== undefined)
    points.push(
      { x: geometry.manifold.rect.x, y: geometry.manifold.rect.y },
      { x: geometry.manifold.rect.x, y: bottom(geometry.manifold.rect) },
    );
  const boxes: Rect[] = points.map((p) => ({ x: p.x, y: p.y, width: 0, height: 0 }));
  for (const group of geometry.groups) {
    boxes.push(...group.ferrules.map((f) => f.rect));
  }
  const r = ring.radius;
  boxes.push({ x: geometry.centre.x - r, y: geometry.centre.y - r, width: 2 * r, height: 2 * r });
  return around(boxes)!;
};

/** How far a seat's comb reaches along its edge, outer edge to outer edge of its ferrules; the ring's own size without any. */
export const combSpan = (seat: RingSeat): { readonly from: number; readonly to: number } => {
  const half = seat.combLength / 2 + ferrule.height / 2;
  return seat.groups.length === 0
    ? { from: seat.y - ring.radius, to: seat.y + ring.radius }
    : { from: seat.combAt - half, to: seat.combAt + half };
};
