import type { Path, Point } from './geometry.ts';
import type { PathPlace, Piece } from './path-pieces.ts';
import { curveChords, cutPiece, distance, pathOf, piecesOf, placeOn } from './path-pieces.ts';

export type { PathPlace } from './path-pieces.ts';

// Measuring and cutting of paths.

/** Length of a path in px. */
export const pathLength = (path: Path): number =>
  piecesOf(path).reduce((sum, piece) => sum + piece.lengthPx, 0);

/** The place `along` px from the path's start, held within its ends. An empty path answers the origin. */
export const pathAt = (path: Path, along: number): PathPlace => {
  const pieces = piecesOf(path);
  let left = Math.max(0, along);
  for (const piece of pieces) {
    if (left <= piece.lengthPx) return placeOn(piece, left);
    left -= piece.lengthPx;
  }
  const last = pieces.at(-1);
  if (last !== undefined) return placeOn(last, last.lengthPx);
  const only = path[0]?.to ?? { x: 0, y: 0 };
  return { ...only, angle: 0 };
};

/** The part of a path between two lengths along it; empty where they leave nothing. */
export const subPath = (path: Path, from: number, to: number): Path => {
  const kept: Piece[] = [];
  let passed = 0;
  for (const piece of piecesOf(path)) {
    const start = Math.max(from - passed, 0);
    const end = Math.min(to - passed, piece.lengthPx);
    if (end - start > 1e-6) kept.push(cutPiece(piece, start, end));
    passed += piece.lengthPx;
  }
  return pathOf(kept);
};

/** The same path travelled the other way. */
export const reversePath = (path: Path): Path =>
  pathOf(
    piecesOf(path)
      .map((piece): Piece => {
        if (piece.kind === 'line') return { ...piece, from: piece.to, to: piece.from };
        if (piece.kind === 'curve')
          return { ...piece, from: piece.to, to: piece.from, c1: piece.c2, c2: piece.c1 };
        return {
          ...piece,
          from: piece.to,
          to: piece.from,
          startAngle: piece.startAngle + piece.sweep,
          sweep: -piece.sweep,
        };
      })
      .reverse(),
  );

/** Paths one after the other as one; each has to begin where the one before ends. */
export const joinPaths = (...paths: readonly Path[]): Path => {
  const [first, ...rest] = paths.filter((path) => path.length > 1);
  return first === undefined ? [] : [...first, ...rest.flatMap((path) => path.slice(1))];
};

/** The path `offset` px to the right of travel. Arcs stay concentric; cubics are moved with their ends, good to a tenth of a pixel for offsets under 10 px. */
export const offsetPath = (path: Path, offset: number): Path => {
  if (offset === 0) return path;
  const shifted = (place: Point, angle: number): Point => ({
    x: place.x - Math.sin(angle) * offset,
    y: place.y + Math.cos(angle) * offset,
  });
  return pathOf(
    piecesOf(path)
      .filter((piece) => piece.lengthPx > 0)
      .map((piece): Piece => {
        const start = placeOn(piece, 0);
        const end = placeOn(piece, piece.lengthPx);
        const from = shifted(start, start.angle);
        const to = shifted(end, end.angle);
        if (piece.kind === 'line') return { ...piece, from, to };
        if (piece.kind === 'arc')
          return {
            ...piece,
            from,
            to,
            radius: Math.max(0.5, piece.radius - offset * Math.sign(piece.sweep)),
          };
        return { ...piece, from, c1: shifted(piece.c1, start.angle), c2: shifted(piece.c2, end.angle), to };
      }),
  );
};

/** How far along a path its nearest point to `point` lies, in px. */
export const nearestAlong = (path: Path, point: Point): number => {
  let best = 0;
  let bestDistance = Infinity;
  let passed = 0;
  const consider = (along: number): void => {
    const d = distance(pathAt(path, along), point);
    if (d < bestDistance) {
      bestDistance = d;
      best = along;
    }
  };
  for (const piece of piecesOf(path)) {
    if (piece.kind === 'line' && piece.lengthPx > 0) {
      const t =
        ((point.x - piece.from.x) * (piece.to.x - piece.from.x) +
          (point.y - piece.from.y) * (piece.to.y - piece.from.y)) /
        piece.lengthPx ** 2;
      consider(passed + piece.lengthPx * Math.min(1, Math.max(0, t)));
    } else for (let i = 0; i <= curveChords; i += 1) consider(passed + (piece.lengthPx * i) / curveChords);
    passed += piece.lengthPx;
  }
  return best;
};

/** The longest straight run of a path as lengths along it; undefined when it has none. */
export const longestRun = (path: Path): { readonly from: number; readonly to: number } | undefined => {
  let best: { from: number; to: number } | undefined;
  let passed = 0;
  for (const piece of piecesOf(path)) {
    if (piece.kind === 'line' && (best === undefined || piece.lengthPx > best.to - best.from))
      best = { from: passed, to: passed + piece.lengthPx };
    passed += piece.lengthPx;
  }
  return best;
};

const round = (value: number): number => Math.round(value * 100) / 100;
const spot = (point: Point): string => `${round(point.x)} ${round(point.y)}`;

/** A path as SVG's `d`. */
export const pathData = (path: Path): string =>
  path
    .map((step) => {
      if (step.kind === 'move') return `M${spot(step.to)}`;
      if (step.kind === 'line') return `L${spot(step.to)}`;
      if (step.kind === 'arc') {
        const r = round(step.radius);
        return `A${r} ${r} 0 0 ${step.clockwise ? 1 : 0} ${spot(step.to)}`;
      }
      return `C${spot(step.c1)} ${spot(step.c2)} ${spot(step.to)}`;
    })
    .join('');
