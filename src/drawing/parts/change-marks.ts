import type { Tone } from '../decorations.ts';
import type { Rect } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import { grown } from './outlines.ts';

/** How a difference outlines what it is about: once more all round, dotted, or broken and hatched. Ink alone, so that it prints. */
const dashes = { added: undefined, changed: '2 5', removed: '7 5' } as const;
export type ChangeTone = keyof typeof dashes;

export const changeToneOf = (tones: readonly Tone[]): ChangeTone | undefined =>
  tones.find((tone): tone is ChangeTone => tone in dashes);

const off = 7;
const hatchPitch = 9;

/** The frame round a plate that was added, changed or removed; a removed one is hatched over. */
export const changeFrame = (rect: Rect, tone: ChangeTone): Shape => {
  const frame = grown(rect, off);
  return group(
    [
      tone === 'removed' && {
        ...shape('rect', { ...rect, fill: paint('paper'), fillOpacity: 0.5 }),
        key: 'pale',
      },
      tone === 'removed' && {
        ...shape('path', { d: hatch(rect), fill: 'none', stroke: paint('ink-3'), strokeWidth: 1.2 }),
        key: 'hatch',
      },
      {
        ...shape('rect', {
          ...frame,
          fill: 'none',
          stroke: paint('ink'),
          strokeWidth: tone === 'changed' ? 2.6 : 2,
          ...(dashes[tone] === undefined ? {} : { strokeDasharray: dashes[tone] }),
          ...(tone === 'changed' ? { strokeLinecap: 'round' } : {}),
        }),
        key: 'frame',
      },
    ],
    { key: 'change' },
  );
};

/** Lines at 45° within a rectangle. */
const hatch = ({ x, y, width, height }: Rect): string => {
  const lines: string[] = [];
  for (let at = hatchPitch; at < width + height; at += hatchPitch) {
    const [fromX, fromY] = at <= height ? [x, y + at] : [x + at - height, y + height];
    const [toX, toY] = at <= width ? [x + at, y] : [x + width, y + at - width];
    lines.push(`M${fromX} ${fromY}L${toX} ${toY}`);
  }
  return lines.join('');
};

/** What lies under a line that was added or changed: an outline of its own, clear of the line by paper. */
export const changeUnderlay = (d: string, tone: ChangeTone | undefined, widthPx: number): readonly Shape[] =>
  tone === undefined || tone === 'removed'
    ? []
    : [
        {
          ...shape('path', {
            d,
            fill: 'none',
            stroke: paint('ink'),
            strokeWidth: widthPx + 10,
            ...(dashes[tone] === undefined ? {} : { strokeDasharray: dashes[tone] }),
          }),
          key: 'change-edge',
        },
        {
          ...shape('path', { d, fill: 'none', stroke: paint('paper'), strokeWidth: widthPx + 6.4 }),
          key: 'change-gap',
        },
      ];
