import type { Theme } from './tokens.ts';

/** Eight colours with a pattern each; a ninth segment reuses the first and is told apart by its letter. */
export const paletteKeys = ['a', 'b', 'c', 'd', 'e', 'f', 'g', 'h'] as const;
export type PaletteKey = (typeof paletteKeys)[number];

/** Which of the eight a segment's letter wears: A is the first, I the first again, AA follows Z. */
export const paletteOf = (letter: string): PaletteKey => {
  let index = 0;
  for (const character of letter) index = index * 26 + (character.charCodeAt(0) - 64);
  return paletteKeys[(((index - 1) % 8) + 8) % 8] ?? 'a';
};

interface Core {
  readonly paper: readonly [core: string, on: string];
  readonly slate: readonly [core: string, on: string];
}
const dark = '#0b1113';
const ink = '#17232b';

// Colours of Okabe and Ito's set for colour-blind readers (2008), from memory; on slate A, C, E, F and H are lifted.
const cores: { readonly [key in PaletteKey]: Core } = {
  a: { paper: ['#0072b2', '#ffffff'], slate: ['#3b9ede', dark] },
  b: { paper: ['#e69f00', ink], slate: ['#e69f00', dark] },
  c: { paper: ['#009e73', ink], slate: ['#18b287', dark] },
  d: { paper: ['#cc79a7', ink], slate: ['#cc79a7', dark] },
  e: { paper: ['#56b4e9', ink], slate: ['#7cc8f3', dark] },
  f: { paper: ['#d55e00', '#000000'], slate: ['#e8762a', dark] },
  g: { paper: ['#f0e442', ink], slate: ['#f0e442', dark] },
  h: { paper: ['#000000', '#ffffff'], slate: ['#c9cfcc', dark] },
};
/** A tunnel that carries nothing: an empty core. */
const none: Core = { paper: ['#ffffff', ink], slate: ['#e9ece6', dark] };

/** Segment colours of a theme: `seg-a` is the core, `seg-a-on` its letter and pattern, `tracer-h…` H inside a jacket. */
export const segmentTokens = (theme: Theme): Readonly<Record<string, string>> => {
  const pick = (core: Core): readonly [string, string] => {
    if (theme === 'slate') return core.slate;
    return theme === 'print' ? ['#ffffff', '#000000'] : core.paper;
  };
  const colours: Record<string, string> = {};
  for (const key of paletteKeys) [colours[`seg-${key}`], colours[`seg-${key}-on`]] = pick(cores[key]);
  [colours['seg-none'], colours['seg-none-on']] = pick(none);
  // A black core is lost in a black jacket: there it changes places with its letter's colour.
  const [core, on] = pick(cores.h);
  const swap = theme === 'paper' || theme === 'print-colour';
  colours['tracer-h'] = swap ? on : core;
  colours['tracer-h-on'] = swap ? core : on;
  return colours;
};
