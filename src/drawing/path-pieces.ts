import type { Path, Point } from './geometry.ts';

// What a path is made of. Lines and arcs are exact; cubics are measured in 16 chords.

interface Straight {
  readonly kind: 'line';
  readonly from: Point;
  readonly to: Point;
  readonly lengthPx: number;
}
interface Arc {
  readonly kind: 'arc';
  readonly from: Point;
  readonly to: Point;
  readonly centre: Point;
  readonly radius: number;
  readonly startAngle: number;
  /** Positive turns clockwise on the screen (y down). */
  readonly sweep: number;
  readonly lengthPx: number;
}
interface Curve {
  readonly kind: 'curve';
  readonly from: Point;
  readonly c1: Point;
  readonly c2: Point;
  readonly to: Point;
  readonly lengthPx: number;
}
/** A line, arc or cubic with its ends and its length. */
export type Piece = Straight | Arc | Curve;

/** A place on a path: its point and the direction of travel in radians. */
export interface PathPlace extends Point {
  readonly angle: number;
}

/** Straight distance in px. */
export const distance = (a: Point, b: Point): number => Math.hypot(b.x - a.x, b.y - a.y);
const between = (a: Point, b: Point, t: number): Point => ({
  x: a.x + (b.x - a.x) * t,
  y: a.y + (b.y - a.y) * t,
});

const arcPiece = (from: Point, to: Point, radius: number, clockwise: boolean): Piece => {
  const chord = distance(from, to);
  if (chord < 1e-6 || radius < 1e-6) return { kind: 'line', from, to, lengthPx: chord };
  // A radius shorter than half the chord can't span it; SVG enlarges it likewise (SVG 2, 9.5.1).
  const r = Math.max(radius, chord / 2);
  const middle = between(from, to, 0.5);
  const height = Math.sqrt(Math.max(0, r * r - (chord / 2) ** 2));
  const side = clockwise ? 1 : -1;
  const centre = {
    x: middle.x - (side * height * (to.y - from.y)) / chord,
    y: middle.y + (side * height * (to.x - from.x)) / chord,
  };
  const startAngle = Math.atan2(from.y - centre.y, from.x - centre.x);
  const sweep = side * 2 * Math.asin(Math.min(1, chord / 2 / r));
  return {
    kind: 'arc',
    from,
    to,
    centre,
    radius: r,
    startAngle,
    sweep,
    lengthPx: Math.abs(sweep) * r,
  };
};

const curvePoint = (piece: Curve, t: number): Point => {
  const s = 1 - t;
  const mix = (a: number, b: number, c: number, d: number): number =>
    s * s * s * a + 3 * s * s * t * b + 3 * s * t * t * c + t * t * t * d;
  return {
    x: mix(piece.from.x, piece.c1.x, piece.c2.x, piece.to.x),
    y: mix(piece.from.y, piece.c1.y, piece.c2.y, piece.to.y),
  };
};
/** Chords in which a cubic is measured. */
export const curveChords = 16;
const curveLength = (piece: Curve): number => {
  let length = 0;
  let last = piece.from;
  for (let i = 1; i <= curveChords; i += 1) {
    const next = curvePoint(piece, i / curveChords);
    length += distance(last, next);
    last = next;
  }
  return length;
};

const piecesByPath = new WeakMap<Path, readonly Piece[]>();
/** A path's pieces, each with its length; remembered by the path's identity. */
export const piecesOf = (path: Path): readonly Piece[] => {
  const known = piecesByPath.get(path);
  if (known !== undefined) return known;
  const pieces: Piece[] = [];
  let at: Point = { x: 0, y: 0 };
  for (const step of path) {
    if (step.kind === 'line')
      pieces.push({ kind: 'line', from: at, to: step.to, lengthPx: distance(at, step.to) });
    else if (step.kind === 'arc') pieces.push(arcPiece(at, step.to, step.radius, step.clockwise));
    else if (step.kind === 'curve') {
      const curve: Curve = { kind: 'curve', from: at, c1: step.c1, c2: step.c2, to: step.to, lengthPx: 0 };
      pieces.push({ ...curve, lengthPx: curveLength(curve) });
    }
    at = step.to;
  }
  piecesByPath.set(path, pieces);
  return pieces;
};

/** The curve's parameter at a length along it. */
const curveParameter = (piece: Curve, along: number): number => {
  let length = 0;
  let last = piece.from;
  for (let i = 1; i <= curveChords; i += 1) {
    const next = curvePoint(piece, i / curveChords);
    const chord = distance(last, next);
    if (length + chord >= along) return (i - 1 + (chord === 0 ? 0 : (along - length) / chord)) / curveChords;
    length += chord;
    last = next;
  }
  return 1;
};

/** The place `along` px from a piece's start, within its length. */
export const placeOn = (piece: Piece, along: number): PathPlace => {
  if (piece.kind === 'line') {
    const t = piece.lengthPx === 0 ? 0 : along / piece.lengthPx;
    return {
      ...between(piece.from, piece.to, t),
      angle: Math.atan2(piece.to.y - piece.from.y, piece.to.x - piece.from.x),
    };
  }
  if (piece.kind === 'arc') {
    const angle = piece.startAngle + piece.sweep * (along / piece.lengthPx);
    return {
      x: piece.centre.x + piece.radius * Math.cos(angle),
      y: piece.centre.y + piece.radius * Math.sin(angle),
      angle: angle + (Math.sign(piece.sweep) * Math.PI) / 2,
    };
  }
  const t = curveParameter(piece, along);
  const before = curvePoint(piece, Math.max(0, t - 0.01));
  const after = curvePoint(piece, Math.min(1, t + 0.01));
  return { ...curvePoint(piece, t), angle: Math.atan2(after.y - before.y, after.x - before.x) };
};

const splitCurve = (piece: Curve, t0: number, t1: number): Curve => {
  // De Casteljau twice: first keep up to t1, then from t0 on.
  const cut = (curve: Curve, t: number, keepStart: boolean): Curve => {
    const a = between(curve.from, curve.c1, t);
    const b = between(curve.c1, curve.c2, t);
    const c = between(curve.c2, curve.to, t);
    const ab = between(a, b, t);
    const bc = between(b, c, t);
    const on = between(ab, bc, t);
    return keepStart ? { ...curve, c1: a, c2: ab, to: on } : { ...curve, from: on, c1: bc, c2: c };
  };
  const upTo = cut(piece, t1, true);
  return t1 === 0 ? upTo : cut(upTo, t0 / t1, false);
};

/** Pieces as a path again. */
export const pathOf = (pieces: readonly Piece[]): Path => {
  const first = pieces[0];
  if (first === undefined) return [];
  return [
    { kind: 'move' as const, to: first.from },
    ...pieces.map((piece) =>
      piece.kind === 'line'
        ? { kind: 'line' as const, to: piece.to }
        : piece.kind === 'arc'
          ? { kind: 'arc' as const, to: piece.to, radius: piece.radius, clockwise: piece.sweep > 0 }
          : { kind: 'curve' as const, c1: piece.c1, c2: piece.c2, to: piece.to },
    ),
  ];
};

/** The part of a piece between two lengths along it. */
export const cutPiece = (piece: Piece, from: number, to: number): Piece => {
  if (from <= 0 && to >= piece.lengthPx) return piece;
  const start = placeOn(piece, Math.max(0, from));
  const end = placeOn(piece, Math.min(piece.lengthPx, to));
  const lengthPx = Math.min(piece.lengthPx, to) - Math.max(0, from);
  if (piece.kind === 'line') return { kind: 'line', from: start, to: end, lengthPx };
  if (piece.kind === 'arc')
    return {
      ...piece,
      from: start,
      to: end,
      startAngle: piece.startAngle + piece.sweep * (Math.max(0, from) / piece.lengthPx),
      sweep: piece.sweep * (lengthPx / piece.lengthPx),
      lengthPx,
    };
  return {
    ...splitCurve(
      piece,
      curveParameter(piece, Math.max(0, from)),
      curveParameter(piece, Math.min(piece.lengthPx, to)),
    ),
    lengthPx,
  };
};
