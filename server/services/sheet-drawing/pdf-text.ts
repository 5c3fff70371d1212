import type { Font } from 'fontkit';
import { openSync } from 'fontkit';
import { faceFile } from './work-sans.ts';
import type { Script, Weight } from './work-sans.ts';

/** A piece of a line that one file of a face has all letters of. */
export interface TextRun {
  readonly text: string;
  readonly face: string;
  readonly font: Font;
}

// Figures of one width, as on the screen.
export const textFeatures = ['tnum'] as const;

const opened = new Map<string, Font>();

export const faceName = (weight: Weight, script: Script): string => `${weight} ${script}`;

function fontOf(weight: Weight, script: Script): Font {
  const name = faceName(weight, script);
  const known = opened.get(name);
  if (known !== undefined) return known;
  // One face per file; collections have another extension.
  const font = openSync(faceFile(weight, script, 'woff')) as Font;
  opened.set(name, font);
  return font;
}

/** A line cut where its letters are found in another file. What neither has is drawn as the face's empty box. */
export function textRuns(text: string, weight: Weight): readonly TextRun[] {
  const runs: { text: string; script: Script }[] = [];
  const [latin, extended] = [fontOf(weight, 'latin'), fontOf(weight, 'latin-ext')];
  for (const character of text) {
    const code = character.codePointAt(0)!;
    const script: Script =
      !latin.hasGlyphForCodePoint(code) && extended.hasGlyphForCodePoint(code) ? 'latin-ext' : 'latin';
    const last = runs.at(-1);
    if (last?.script === script) last.text += character;
    else runs.push({ text: character, script });
  }
  return runs.map(({ text: piece, script }) => ({
    text: piece,
    face: faceName(weight, script),
    font: fontOf(weight, script),
  }));
}

/** How wide a run stands at a size, in the size's unit. */
export function runWidth({ font, text }: TextRun, size: number): number {
  return (font.layout(text, [...textFeatures]).advanceWidth * size) / font.unitsPerEm;
}

/** The outline of a run's letters as path data in font units, y up, and how far each is moved. */
export function runOutline({ font, text }: TextRun): readonly { readonly x: number; readonly d: string }[] {
  const { glyphs, positions } = font.layout(text, [...textFeatures]);
  let x = 0;
  return glyphs.map((glyph, i) => {
    const position = positions[i]!;
    const outline = { x: x + position.xOffset, d: glyph.path.toSVG() };
    x += position.xAdvance;
    return outline;
  });
}
