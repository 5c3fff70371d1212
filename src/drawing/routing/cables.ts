import type { Design } from '../../engine/model/design.ts';
import type { CableGeometry, JacketGeometry, Path, Point } from '../geometry.ts';
import { cable as cableSizes } from '../parts/sizes.ts';
import type { CableEnd, LandingRun } from './cable-ends.ts';
import { cableRuns } from './cable-ends.ts';
import { cableWay, jogShares, runsOfCable } from './cable-ways.ts';
import { combRect } from './combs.ts';
import { pathThrough } from './corners.ts';
import type { KnownRun, KnownRuns } from './known-runs.ts';
import { runRegister } from './known-runs.ts';
import type { FurnishedSheet } from './furnish.ts';
import type { Corners, Ground } from './ground.ts';
import type { ElbowRoom, LandedWay } from './landings.ts';
import { landingRegister, landingWay } from './landings.ts';
import { bottom, runRect } from './rects.ts';

const shortJog = 20;

const smooth = (corners: Corners): { readonly path: Path; readonly radius: number } => {
  const lengths = corners
    .slice(1)
    .map((q, i) => Math.abs(q.x - corners[i]!.x) + Math.abs(q.y - corners[i]!.y));
  const inner = lengths.slice(1, -1);
  const radius = inner.some((length) => length < shortJog) ? cableSizes.jogRadius : cableSizes.radius;
  const radii = lengths.slice(1).map((length, i) => {
    const before = lengths[i]!;
    const room = (run: number, value: number): number =>
      run === 0 || run === lengths.length - 1 ? value - 1 : value / 2;
    return Math.max(0, Math.min(radius, room(i, before), room(i + 1, length)));
  });
  return { path: pathThrough(corners, radii), radius };
};

/** Where one line crosses others at right angles, away from their ends. */
const crossingsWith = (corners: Corners, others: KnownRuns): readonly Point[] => {
  const found: Point[] = [];
  const between = (value: number, p: number, q: number): boolean =>
    value > Math.min(p, q) + 0.5 && value < Math.max(p, q) - 0.5;
  for (const [i, q] of corners.slice(1).entries()) {
    const p = corners[i]!;
    for (const { from: r, to: s } of others.near(runRect(p, q, 1))) {
      if (p.y === q.y && r.x === s.x && between(r.x, p.x, q.x) && between(p.y, r.y, s.y))
        found.push({ x: r.x, y: p.y });
      if (p.x === q.x && r.y === s.y && between(p.x, r.x, s.x) && between(r.y, p.y, q.y))
        found.push({ x: p.x, y: r.y });
    }
  }
  return found;
};

const leader = (a: Point, b: Point): Pick<CableGeometry, 'polyline' | 'path' | 'radius'> => ({
  polyline: [a, b],
  radius: 0,
  path: [
    { kind: 'move', to: a },
    { kind: 'line', to: b },
  ],
});

/** How far the combs beside a plate reach, labels included: WAN cables turn above or below them. */
const elbowRoomOf = (furnished: FurnishedSheet, end: CableEnd): ElbowRoom => {
  const rings = [...furnished.rings.values()].filter((ring) => ring.device === end.device);
  const { rect: plate, device } = furnished.stands.get(end.device)!;
  const off = device.kind === 'ha-pair' ? 18 : 10;
  return {
    above: Math.min(plate.y - off, ...rings.map((ring) => combRect(ring).y - 15)),
    below: Math.max(
      bottom(plate) + off,
      ...rings.map((ring) => Math.max(bottom(combRect(ring)), bottom(ring.label.rect)) + 12),
    ),
  };
};

const roundedCorners = (corners: Corners): Corners =>
  corners.map(({ x, y }) => ({ x: Math.round(x * 2) / 2, y: Math.round(y * 2) / 2 }));

const isAt = ({ x, y }: Point, end: Point | undefined): boolean =>
  end !== undefined && Math.abs(end.x - x) < 0.5 && Math.abs(end.y - y) < 0.5;

/**
 * Every cable and WAN cable as it is drawn, without the labels of the latter. Those `held` whose ends are where they were stay
 * as they are.
 */
export const cableGeometries = (
  design: Design,
  furnished: FurnishedSheet,
  ground: Ground,
  jackets: readonly JacketGeometry[],
  held: readonly CableGeometry[] = [],
): readonly { readonly geometry: CableGeometry; readonly landing?: LandingRun }[] => {
  const { cables, landings } = cableRuns(design, furnished.pips);
  const siteOf = (device: string): string => furnished.stands.get(device)?.device.site ?? '';
  const shares = jogShares(cables);
  const cords: readonly KnownRun[] = jackets
    .filter((jacket) => !jacket.noWay)
    .flatMap(({ polyline, width }) =>
      polyline.slice(1).map((to, i) => ({ from: polyline[i]!, to, width, fixed: true })),
    );
  const drawn: { geometry: CableGeometry; landing?: LandingRun }[] = [];
  const known = runRegister(cords);
  const laid = runRegister();
  const lay = (corners: Corners): void => {
    const runs = runsOfCable(corners);
    known.add(runs);
    laid.add(runs);
  };
  const heldByLink = new Map(held.map((geometry) => [geometry.links[0]!, geometry]));
  const kept = (link: string, from: Point, to: Point | undefined): CableGeometry | undefined => {
    const geometry = heldByLink.get(link);
    return geometry !== undefined &&
      !geometry.noWay &&
      isAt(from, geometry.polyline[0]) &&
      (to === undefined || isAt(to, geometry.polyline.at(-1)))
      ? geometry
      : undefined;
  };

  // WAN cables first: they have one straight way, the others can give way.
  const register = landingRegister();
  for (const run of landings) {
    const same = kept(run.link, run.from.at, undefined);
    if (same !== undefined) {
      drawn.push({ geometry: same, landing: run });
      lay(same.polyline);
      continue;
    }
    const way: LandedWay | undefined = landingWay(
      ground,
      run,
      siteOf(run.from.device),
      elbowRoomOf(furnished, run.from),
      register,
      known,
    );
    const shared = { links: [run.link], aggregated: false };
    if (way === undefined) {
      const band = ground.bands.find((b) => b.id === run.landing.transport);
      if (band === undefined) continue;
      const limb = band.limbs[0]!;
      const to = { x: limb.x + limb.width / 2, y: Math.max(limb.y, Math.min(bottom(limb), run.from.at.y)) };
      drawn.push({
        geometry: { ...shared, ...leader(run.from.at, to), crossings: [], noWay: true },
        landing: run,
      });
      continue;
    }
    const corners = roundedCorners(way.corners);
    drawn.push({
      geometry: {
        ...shared,
        polyline: corners,
        ...smooth(corners),
        landing: { transport: run.landing.transport, bar: way.bar },
        crossings: crossingsWith(corners, laid),
        noWay: false,
      },
      landing: run,
    });
    lay(corners);
  }
  for (const run of cables) {
    const same = kept(run.links[0]!, run.a.at, run.b.at);
    if (same !== undefined) {
      drawn.push({ geometry: same });
      lay(same.polyline);
      continue;
    }
    const way = cableWay(ground, run, shares.get(run.key) ?? 0.5, known, siteOf);
    const shared = { links: run.links, aggregated: run.aggregated };
    if (way === undefined) {
      drawn.push({ geometry: { ...shared, ...leader(run.a.at, run.b.at), crossings: [], noWay: true } });
      continue;
    }
    const corners = roundedCorners(way);
    drawn.push({
      geometry: {
        ...shared,
        polyline: corners,
        ...smooth(corners),
        crossings: crossingsWith(corners, laid),
        noWay: false,
      },
    });
    lay(corners);
  }
  return drawn;
};
