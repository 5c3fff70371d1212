import { sheetSizes } from '../../engine/model/layout.ts';
import type { Rect, SheetFrame } from '../geometry.ts';

/** Papers to put a sheet on, small to large. */
export const paperNames = ['A4', ...sheetSizes] as const;
export type PaperName = (typeof paperNames)[number];

interface Extent {
  readonly width: number;
  readonly height: number;
}

// ISO 216:2007 table 1, A series, trimmed sizes in millimetres, from memory; here they lie on their long side.
export const paperSizesMm: { readonly [name in PaperName]: Extent } = {
  A4: { width: 297, height: 210 },
  A3: { width: 420, height: 297 },
  A2: { width: 594, height: 420 },
  A1: { width: 841, height: 594 },
  A0: { width: 1189, height: 841 },
};

/** Height of the strip under a sheet that holds the words of caution. */
export const cautionStripPx = 24;
/** The strip is won by shrinking the sheet; so much of the height becomes margin at the top. */
const topMarginPx = 4;

/**
 * What a picture of a sheet shows of the sheet's world: the sheet, the strip of caution below, and as much margin at its
 * sides as keeps the proportions of the paper.
 */
export const pictureBox = ({ width, height }: Pick<SheetFrame, 'width' | 'height'>): Rect => {
  const tall = height + cautionStripPx;
  const wide = (tall * width) / height;
  return { x: (width - wide) / 2, y: -topMarginPx, width: wide, height: tall };
};

/** How many millimetres a pixel of the sheet takes on a paper. */
export const mmPerPx = (sheet: SheetFrame, paper: PaperName): number => {
  const box = pictureBox(sheet);
  const { width, height } = paperSizesMm[paper];
  return Math.min(width / box.width, height / box.height);
};
