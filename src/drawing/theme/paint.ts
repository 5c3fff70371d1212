import type { BaseToken } from './tokens.ts';
import type { PaletteKey } from './segment-tokens.ts';

/** What a cord's core wears: one of the eight palettes, or nothing. */
export type CorePalette = PaletteKey | 'none';

/** A token as a paint that follows the theme wherever the shape is shown. */
export const paint = (token: BaseToken): string => `var(--${token})`;

/** Paints of a segment's core and of the letter and pattern on it. */
export const segmentPaint = (
  palette: CorePalette,
  inJacket = false,
): { readonly core: string; readonly on: string } => {
  const name = inJacket && palette === 'h' ? 'tracer-h' : `seg-${palette}`;
  return { core: `var(--${name})`, on: `var(--${name}-on)` };
};
