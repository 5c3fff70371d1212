import type { Path } from '../geometry.ts';
import { offsetPath, pathData } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import type { CorePalette } from '../theme/paint.ts';
import { paint, segmentPaint } from '../theme/paint.ts';
import type { PaletteKey } from '../theme/segment-tokens.ts';
import type { CordSegment } from './drawing-facts.ts';
import { cord } from './sizes.ts';

/** A core's pattern as a second stroke on it, for a core of 9 px. */
interface Pattern {
  readonly widthPx: number;
  readonly dash?: readonly number[];
  readonly round?: boolean;
}
const patternCorePx = 9;
const patterns: { readonly [key in PaletteKey]: Pattern | undefined } = {
  a: undefined,
  b: { widthPx: 9, dash: [2.4, 11] },
  c: { widthPx: 4, dash: [0.01, 9.5], round: true },
  d: { widthPx: 1.8 },
  e: { widthPx: 2.7, dash: [11, 8] },
  f: { widthPx: 9, dash: [2.2, 3, 2.2, 13] },
  g: { widthPx: 3.2, dash: [9, 8, 0.01, 8], round: true },
  h: { widthPx: 3.1 },
};
/** Strips of a divided core narrower than this are left plain: their pattern would be a smear. */
const leastPatternedPx = 2.9;

const nothing: CorePalette = 'none';

/** What a tunnel's core wears: its segments' palettes, or the empty one. */
export const palettesOf = (segments: readonly CordSegment[]): readonly CorePalette[] =>
  segments.length === 0 ? [nothing] : segments.map((segment) => segment.palette);

const round = (value: number): number => Math.round(value * 100) / 100;

const stroke = (d: string, colour: string, widthPx: number, key: string, extra: object = {}): Shape => ({
  ...shape('path', { d, fill: 'none', stroke: colour, strokeWidth: round(widthPx), ...extra }),
  key,
});

const strip = (
  path: Path,
  palette: CorePalette,
  widthPx: number,
  inJacket: boolean,
  key: string,
): Shape[] => {
  const d = pathData(path);
  const colours = segmentPaint(palette, inJacket);
  const parts = [stroke(d, colours.core, widthPx, `core-${key}`)];
  const pattern = palette === 'none' ? undefined : patterns[palette];
  if (pattern === undefined || widthPx < leastPatternedPx) return parts;
  const scale = widthPx / patternCorePx;
  const period = (pattern.dash ?? []).reduce((sum, length) => sum + length, 0);
  parts.push(
    stroke(d, colours.on, pattern.widthPx * scale, `pattern-${key}`, {
      ...(pattern.dash === undefined
        ? {}
        : {
            strokeDasharray: pattern.dash.map((length) => round(length * scale)).join(' '),
            // Half a period in, so that no dash touches a ferrule or a cuff.
            strokeDashoffset: round((-period * scale) / 2),
          }),
      ...(pattern.round ? { strokeLinecap: 'round' } : {}),
    }),
  );
  return parts;
};

/** A cord's core along a path: one colour with its pattern, or strips side by side in letter order. */
export const coreStrokes = (
  path: Path,
  palettes: readonly CorePalette[],
  widthPx: number,
  inJacket: boolean,
): readonly Shape[] => {
  const share = widthPx / palettes.length;
  // Strips overlap by a hair, so that nothing shows between them.
  return palettes.flatMap((palette, i) =>
    strip(
      offsetPath(path, (i - (palettes.length - 1) / 2) * share),
      palette,
      palettes.length === 1 ? share : share + 0.2,
      inJacket,
      String(i),
    ),
  );
};

/** A bare cord or the tail of a jacketed one: casing in ink, core in its segments' colours. */
export const cordStrokes = (
  path: Path,
  palettes: readonly CorePalette[],
  casingPx: number = cord.casing,
  corePx: number = cord.core,
): readonly Shape[] => [
  stroke(pathData(path), paint('casing'), casingPx, 'casing'),
  ...coreStrokes(path, palettes, corePx, false),
];

/** A failed cord: its colour alone, thin and broken. */
export const failedStrokes = (path: Path, palettes: readonly CorePalette[], inJacket = false): Shape =>
  stroke(pathData(path), segmentPaint(palettes[0] ?? 'none', inJacket).core, 2.4, 'failed', {
    strokeDasharray: '10 7',
  });

export interface SampleSegment {
  readonly letter: string;
  readonly palette: CorePalette;
}

/** The square with a segment's letter. */
export const letterSquare = (segment: SampleSegment, x: number, y: number, size: number): Shape => {
  const { core, on } = segmentPaint(segment.palette);
  const letterSize = size * (segment.letter.length > 1 ? 0.55 : 0.71);
  return group(
    [
      shape('rect', {
        x,
        y,
        width: size,
        height: size,
        rx: round(size * 0.13),
        fill: core,
        stroke: paint('ink'),
        strokeWidth: round(Math.max(1.5, size * 0.08)),
      }),
      shape(
        'text',
        {
          x: x + size / 2,
          y: round(y + size / 2 + letterSize * 0.34),
          fontSize: round(letterSize),
          fontWeight: 700,
          fill: on,
          textAnchor: 'middle',
        },
        [segment.letter],
      ),
    ],
    { key: 'letter' },
  );
};

/** A segment's letter with a length of its cord, as legend, tables and inspector show it. Its left middle stands at (x, y). */
export const cordSample = (
  segment: SampleSegment,
  x: number,
  y: number,
  squarePx: number,
  cordPx: number,
): Shape => {
  const path: Path = [
    { kind: 'move', to: { x: x + squarePx, y } },
    { kind: 'line', to: { x: x + squarePx + cordPx, y } },
  ];
  const scale = squarePx / 19;
  return group([
    group(cordStrokes(path, [segment.palette], cord.casing * scale, cord.core * scale), { key: 'cord' }),
    letterSquare(segment, x, y - squarePx / 2, squarePx),
  ]);
};
