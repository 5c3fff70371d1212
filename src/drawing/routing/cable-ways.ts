import type { Point } from '../geometry.ts';
import type { CableEnd, CableRun } from './cable-ends.ts';
import type { SearchManner } from './detour.ts';
import { detour, withoutIdlePoints } from './detour.ts';
import type { Corners, Ground, Mouth } from './ground.ts';
import { runIsBlocked } from './ground.ts';
import type { KnownRun, KnownRuns } from './known-runs.ts';
import { isUpright, opposite, outward } from './rects.ts';

const clearance = 2;
const aggregatedWidth = 10;
const cableWidth = 2;
const leastStub = 9;

export const cableManner: SearchManner = {
  ownBand: 1,
  open: 1,
  throughBand: false,
  foreignSite: 5,
  foreignBand: Infinity,
  alongRun: 6,
  bend: 60,
  crossing: 20,
  clearances: [8, 3],
  stub: (_cord, free) => (free < 6 ? undefined : Math.max(5, Math.min(leastStub + 2, free / 2))),
  besideRuns: 7,
};

const widthOf = (run: CableRun): number => (run.aggregated ? aggregatedWidth : cableWidth);

/** Runs of a cable that is laid, so that later ones keep off them. */
export const runsOfCable = (corners: Corners): readonly KnownRun[] =>
  corners.slice(1).map((to, i) => ({ from: corners[i]!, to, width: cableWidth, fixed: true }));

const isFree = (ground: Ground, corners: Corners, half: number): boolean =>
  corners.slice(1).every((q, i) => !runIsBlocked(ground, corners[i]!, q, half, clearance));

const ahead = (end: CableEnd, point: Point): number => {
  const out = outward[end.side];
  return (point.x - end.at.x) * out.x + (point.y - end.at.y) * out.y;
};

/** Straight, or with one corner, or with one jog at a share of the way from end a to end b. */
const plainWay = (ground: Ground, run: CableRun, share: number): Corners | undefined => {
  const { a, b } = run;
  const half = widthOf(run) / 2;
  const upright = isUpright(a.side);
  const tries: Corners[] = [];
  if (b.side === opposite[a.side] && ahead(a, b.at) > 0) {
    const aligned = upright ? Math.abs(a.at.x - b.at.x) < 0.5 : Math.abs(a.at.y - b.at.y) < 0.5;
    if (aligned) tries.push([a.at, b.at]);
    else if (ahead(a, b.at) >= 10)
      tries.push(
        upright
          ? [
              a.at,
              { x: a.at.x, y: a.at.y + (b.at.y - a.at.y) * share },
              { x: b.at.x, y: a.at.y + (b.at.y - a.at.y) * share },
              b.at,
            ]
          : [
              a.at,
              { x: a.at.x + (b.at.x - a.at.x) * share, y: a.at.y },
              { x: a.at.x + (b.at.x - a.at.x) * share, y: b.at.y },
              b.at,
            ],
      );
  }
  if (isUpright(b.side) !== upright && ahead(a, b.at) >= leastStub && ahead(b, a.at) >= leastStub)
    tries.push([a.at, upright ? { x: a.at.x, y: b.at.y } : { x: b.at.x, y: a.at.y }, b.at]);
  return tries.find((corners) => isFree(ground, corners, half));
};

/**
 * Where along its gap each Z has its jog, as a share of the way from a to b: the jogs of one fan nest, so that cables of
 * one switch side don't cross.
 */
export const jogShares = (runs: readonly CableRun[]): ReadonlyMap<string, number> => {
  const shares = new Map<string, number>();
  const fans = new Map<string, { run: CableRun; hub: 'a' | 'b' }[]>();
  const sideKey = (end: CableEnd): string => `${end.device} ${end.member ?? ''} ${end.side}`;
  const counts = new Map<string, number>();
  const jogging = runs.filter(({ a, b }) => b.side === opposite[a.side]);
  for (const { a, b } of jogging)
    for (const end of [a, b]) counts.set(sideKey(end), (counts.get(sideKey(end)) ?? 0) + 1);
  for (const run of jogging) {
    const hub = counts.get(sideKey(run.a))! >= counts.get(sideKey(run.b))! ? 'a' : 'b';
    const key = sideKey(run[hub]);
    fans.set(key, [...(fans.get(key) ?? []), { run, hub }]);
  }
  for (const fan of fans.values()) {
    const across = (end: CableEnd): number => (isUpright(end.side) ? end.at.x : end.at.y);
    const rise = ({ run, hub }: (typeof fan)[number]): number =>
      across(run[hub === 'a' ? 'b' : 'a']) - across(run[hub]);
    const back = fan
      .filter((entry) => rise(entry) < -0.5)
      .sort((x, y) => across(y.run[y.hub]) - across(x.run[x.hub]));
    const forth = fan
      .filter((entry) => rise(entry) > 0.5)
      .sort((x, y) => across(x.run[x.hub]) - across(y.run[y.hub]));
    const most = Math.max(back.length, forth.length);
    for (const half of [back, forth])
      half.forEach(({ run, hub }, i) => {
        // Counted from the far end: the outermost cable of the fan jogs next to its hub.
        const share = (i + 1) / (most + 1);
        shares.set(run.key, hub === 'b' ? share : 1 - share);
      });
  }
  return shares;
};

/** The way of a cable between two plates; undefined where it is walled in. */
export const cableWay = (
  ground: Ground,
  run: CableRun,
  share: number,
  known: KnownRuns,
  siteOf: (device: string) => string,
): Corners | undefined => {
  if (run.within) return [run.a.at, run.b.at];
  const plain = plainWay(ground, run, share);
  if (plain !== undefined) return plain;
  const width = widthOf(run);
  const mouth = ({ at, side, device }: CableEnd): Mouth => ({ at, side, device, site: siteOf(device) });
  const found = detour(
    ground,
    { key: run.key, width, leastRadius: 5, a: mouth(run.a), b: mouth(run.b) },
    known,
    [],
    cableManner,
  );
  return found === undefined ? undefined : withoutIdlePoints(found);
};
