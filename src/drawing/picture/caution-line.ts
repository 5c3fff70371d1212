import type { SheetFrame } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import { centredLine } from '../parts/text-shape.ts';
import { fitText } from '../text-width.ts';

/** What every picture that leaves says, whatever notes its sheet has. */
export const caution =
  'A plan for competent engineers: verify on your equipment and follow your change control. A stretched segment joins failure domains.';

const sizePx = 11.5;
/** Below the trim line, clear of the centring mark's end. */
const belowSheetPx = 5;
const apartPx = 24;

/** The line of caution under the sheet, and at its right what the picture leaves out, so that nobody takes a part for the whole. */
export const cautionLine = (sheet: SheetFrame, leftOut: string): Shape => {
  const { x, width } = sheet.frame;
  const y = sheet.height + belowSheetPx;
  const words = fitText(caution, { maxWidthPx: width, sizePx, minSizePx: 9 });
  const style = { sizePx: words.sizePx, fill: paint('ink-2') } as const;
  const rest = fitText(leftOut, {
    maxWidthPx: width - words.widthPx - apartPx,
    sizePx: words.sizePx,
    minSizePx: 9,
    weight: 600,
  });
  return group(
    [
      centredLine(caution, x, y, { ...style, key: 'caution' }),
      leftOut !== '' &&
        centredLine(rest.lines[0] ?? '', x + width, y, {
          sizePx: rest.sizePx,
          weight: 600,
          anchor: 'end',
          key: 'left-out',
        }),
    ],
    { key: 'caution' },
  );
};
