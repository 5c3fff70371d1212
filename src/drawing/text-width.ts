import { asciiWidths, signWidths } from './text-width-table.ts';

export type FontWeight = 400 | 500 | 600 | 700;

/** Letters outside the table (other scripts): wide enough for most, so that text is rather set too small than cut. */
const unknownWidth = 700;
const signColumn = { 400: 0, 500: 1, 600: 2, 700: 3 } as const;

const characterWidth = (character: string, weight: FontWeight): number => {
  const inAscii = asciiWidths[weight][character.charCodeAt(0) - 32];
  if (inAscii !== undefined) return inAscii;
  const sign = signWidths[character];
  if (sign !== undefined) return sign[signColumn[weight]];
  const base = character.normalize('NFKD');
  return asciiWidths[weight][base.charCodeAt(0) - 32] ?? unknownWidth;
};

/** How wide a line of text stands on the sheet, in px at `sizePx`; kerning is left out, so the figure errs by about 1 %. */
export const textWidth = (text: string, sizePx: number, weight: FontWeight = 400): number => {
  let thousandths = 0;
  for (const character of text) thousandths += characterWidth(character, weight);
  return (thousandths * sizePx) / 1000;
};

/** Breaks text at spaces, but not at no-break spaces, into lines no wider than `maxWidthPx`; a single word that is wider keeps a line to itself. */
export const wrapText = (
  text: string,
  maxWidthPx: number,
  sizePx: number,
  weight: FontWeight = 400,
): readonly string[] => {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(/[ \t\r\n]+/).filter((part) => part !== '')) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (line !== '' && textWidth(longer, sizePx, weight) > maxWidthPx) {
      lines.push(line);
      line = word;
    } else line = longer;
  }
  if (line !== '') lines.push(line);
  return lines;
};

export interface FittedText {
  readonly lines: readonly string[];
  readonly sizePx: number;
  /** Width of the longest line. */
  readonly widthPx: number;
  /** True when even the smallest size left something out; the whole text belongs in a tooltip then. */
  readonly shortened: boolean;
}

export interface FitLimits {
  readonly maxWidthPx: number;
  readonly maxLines?: number;
  readonly sizePx: number;
  readonly minSizePx: number;
  readonly weight?: FontWeight;
  /** Addresses and VNIs are never cut: they go on shrinking instead. */
  readonly whole?: boolean;
}

const shortenLine = (line: string, maxWidthPx: number, sizePx: number, weight: FontWeight): string => {
  const characters = [...line];
  while (characters.length > 1 && textWidth(`${characters.join('')}…`, sizePx, weight) > maxWidthPx)
    characters.pop();
  return `${characters.join('').trimEnd()}…`;
};

const fitted = (
  lines: readonly string[],
  sizePx: number,
  weight: FontWeight,
  shortened: boolean,
): FittedText => ({
  lines,
  sizePx,
  widthPx: Math.max(0, ...lines.map((line) => textWidth(line, sizePx, weight))),
  shortened,
});

/** Sets text as large as it fits: first smaller, in half pixels, on as many lines as allowed; what still does not fit ends in an ellipsis. */
export const fitText = (text: string, limits: FitLimits): FittedText => {
  const { maxWidthPx, maxLines = 1, sizePx, minSizePx, weight = 400 } = limits;
  const fits = (lines: readonly string[], size: number): boolean =>
    lines.length <= maxLines && lines.every((line) => textWidth(line, size, weight) <= maxWidthPx);
  for (let size = sizePx; size >= minSizePx; size -= 0.5) {
    const lines = maxLines === 1 ? [text] : wrapText(text, maxWidthPx, size, weight);
    if (fits(lines, size)) return fitted(lines, size, weight, false);
  }
  if (limits.whole) {
    const width = textWidth(text, 1, weight);
    return fitted([text], maxWidthPx / width, weight, false);
  }
  const lines = maxLines === 1 ? [text] : wrapText(text, maxWidthPx, minSizePx, weight);
  const kept = lines.slice(0, maxLines).map((line, i) => {
    const last = i === maxLines - 1 && lines.length > maxLines;
    return last || textWidth(line, minSizePx, weight) > maxWidthPx
      ? shortenLine(line, maxWidthPx, minSizePx, weight)
      : line;
  });
  return fitted(kept, minSizePx, weight, true);
};
