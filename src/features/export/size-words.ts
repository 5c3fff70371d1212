import type { PaperName } from '../../drawing/picture/paper-sizes.ts';
import { mmPerPx, paperSizesMm } from '../../drawing/picture/paper-sizes.ts';
import type { SheetFrame } from '../../drawing/geometry.ts';

/** The smallest text on a sheet: names and values that were set small to fit. */
const smallestTextPx = 9;
/** Height of capitals of Work Sans. */
const capital = 0.66;
// ISO 3098-1 begins its nominal heights of lettering at 1.8 mm, from memory.
const readableMm = 1.8;

/** Width and height as the interface writes figures. */
export const pixelWords = ({ width, height }: { readonly width: number; readonly height: number }): string =>
  `${width.toLocaleString('en-GB')} × ${height.toLocaleString('en-GB')} px`;

export const paperWords = (paper: PaperName): string =>
  `${paper}, ${paperSizesMm[paper].width} × ${paperSizesMm[paper].height} mm`;

/** What a paper that is smaller than the sheet does to its small print; undefined while it stays readable. */
export const smallPrint = (sheet: SheetFrame, paper: PaperName): string | undefined => {
  const textMm = smallestTextPx * capital * mmPerPx(sheet, paper);
  return textMm >= readableMm
    ? undefined
    : `Drawn for ${sheet.size}: on ${paper} the smallest letters are ${textMm.toFixed(1)} mm high.`;
};
