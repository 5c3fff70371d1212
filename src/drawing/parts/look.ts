import type { ElementRef } from '../../engine/model/design.ts';
import type { Decorations, Tone } from '../decorations.ts';
import { elementKey } from '../decorations.ts';
import type { Level } from './level-of-detail.ts';

/** How a sheet is looked at: from how far, and with what shown on top. */
export interface Look {
  readonly level: Level;
  readonly decorations: Decorations;
}

const noTones: readonly Tone[] = [];

/** The tones an element wears. */
export const tonesOf = (look: Look, ref: ElementRef): readonly Tone[] =>
  look.decorations.tones[elementKey(ref)] ?? noTones;

export const hasTone = (look: Look, ref: ElementRef, tone: Tone): boolean =>
  tonesOf(look, ref).includes(tone);

/** Opacity of what is off the path of a trace. With it the secondary ink becomes ink, which keeps it readable. */
export const dimmedOpacity = 0.68;
/** Opacity of cords whose segments are all hidden from view. */
export const hiddenOpacity = 0.14;
