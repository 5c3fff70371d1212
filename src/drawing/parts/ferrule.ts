import type { Side } from '../../engine/model/layout.ts';
import type { Rect } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { textWidth } from '../text-width.ts';
import { paint, segmentPaint } from '../theme/paint.ts';
import type { CordSegment } from './drawing-facts.ts';
import { palettesOf } from './cord.ts';
import { boxHalo } from './highlight.ts';
import type { Level } from './level-of-detail.ts';
import { ferrule as size } from './sizes.ts';
import { capShift } from './text-shape.ts';

export interface FerruleLook {
  readonly rect: Rect;
  readonly capSide: Side;
  /** The VNI of this end; unknown while it isn't chosen. */
  readonly vni?: number;
  /** Stands in place of a VNI. */
  readonly words?: string;
  /** The other end's VNI where the two differ: digits apart are marked. */
  readonly farVni?: number;
  readonly segments: readonly CordSegment[];
  readonly level: Level;
  readonly fault?: boolean;
  readonly selected?: boolean;
  readonly lit?: boolean;
}

/** What the cap says: the letter, the first letter and how many more, or that nothing is carried. */
export const capText = (segments: readonly CordSegment[]): string => {
  const first = segments[0];
  if (first === undefined) return '?';
  return segments.length === 1 ? first.letter : `${first.letter}+${segments.length - 1}`;
};

/** Which digits of a VNI differ from the far end's, compared from the last digit. */
export const differingDigits = (vni: number, farVni: number | undefined): readonly boolean[] => {
  const own = String(vni);
  if (farVni === undefined) return [...own].map(() => false);
  const far = String(farVni).padStart(own.length, ' ').slice(-own.length);
  const longer = String(farVni).length > own.length;
  return [...own].map((digit, i) => digit !== far[i] || (longer && i === 0));
};

const round = (value: number): number => Math.round(value * 100) / 100;

/** The number with its differing digits in red and underlined. */
const numberText = (look: FerruleLook, x: number, y: number, room: number): Shape => {
  const { vni } = look;
  const digits = look.words ?? (vni === undefined ? '–' : String(vni));
  const sizePx = Math.min(13.8, (room / textWidth(digits, 1, 600)) * 1);
  const base = y + sizePx * capShift;
  const style = { fontSize: round(sizePx), fontWeight: 600, textAnchor: 'middle' as const };
  const marked = vni === undefined ? [] : differingDigits(vni, look.farVni);
  if (!marked.includes(true))
    return {
      ...shape('text', { x: round(x), y: round(base), fill: paint('ink'), ...style }, [digits]),
      key: 'number',
    };
  const digitPx = textWidth('0', sizePx, 600);
  const left = x - (digitPx * digits.length) / 2;
  const underlines = marked
    .map((differs, i) =>
      differs ? `M${round(left + i * digitPx + 0.7)} ${round(base + 2.9)}h${round(digitPx - 1.4)}` : '',
    )
    .join('');
  return group(
    [
      shape(
        'text',
        { x: round(x), y: round(base), fill: paint('ink'), ...style },
        [...digits].map((digit, i) => ({
          ...shape('tspan', { fill: paint(marked[i] ? 'red' : 'ink') }, [digit]),
          key: String(i),
        })),
      ),
      shape('path', { d: underlines, stroke: paint('red'), strokeWidth: 1.8, fill: 'none' }),
    ],
    { key: 'number' },
  );
};

const cap = (look: FerruleLook, capWidth: number, capX: number): readonly Shape[] => {
  const { rect } = look;
  const palettes = palettesOf(look.segments);
  const share = rect.height / palettes.length;
  const text = capText(look.segments);
  const fill = (i: number): Shape => ({
    ...shape('rect', {
      x: round(capX),
      y: round(rect.y + i * share),
      width: round(capWidth),
      height: round(share),
      fill: segmentPaint(palettes[i] ?? 'none').core,
    }),
    key: `cap-${i}`,
  });
  const sizePx = text.length === 1 ? 13.6 : text.length === 2 ? 11.5 : 10.8;
  const ownInk = segmentPaint(palettes[0] ?? 'none').on;
  return [
    // Several segments: the first one's colour carries the text, a stripe below shows the others.
    ...(palettes.length === 1
      ? [fill(0)]
      : [
          {
            ...shape('rect', {
              x: round(capX),
              y: rect.y,
              width: round(capWidth),
              height: rect.height,
              fill: segmentPaint(palettes[0] ?? 'none').core,
            }),
            key: 'cap-0',
          },
          ...palettes.slice(1).map((palette, i) => {
            const width = capWidth / (palettes.length - 1);
            return {
              ...shape('rect', {
                x: round(capX + i * width),
                y: round(rect.y + rect.height - 4.5),
                width: round(width),
                height: 4.5,
                fill: segmentPaint(palette).core,
              }),
              key: `cap-${i + 1}`,
            };
          }),
        ]),
    {
      ...shape(
        'text',
        {
          x: round(capX + capWidth / 2),
          y: round(rect.y + rect.height / 2 - (palettes.length > 1 ? 2 : 0) + sizePx * 0.345),
          fontSize: sizePx,
          fontWeight: 700,
          fill: ownInk,
          textAnchor: 'middle',
        },
        [text],
      ),
      key: 'letter',
    },
  ];
};

const capWidthOf = (text: string): number =>
  text.length === 1 ? size.cap : Math.max(size.cap, Math.ceil(textWidth(text, 10.8, 700)) + 6);

const planFerrule = (look: FerruleLook): readonly Shape[] => {
  const { rect, segments, fault } = look;
  const palettes = palettesOf(segments);
  const own = segmentPaint(palettes[0] ?? 'none');
  const stripes = palettes.slice(1).map((palette, i) => {
    const width = rect.width / (palettes.length - 1);
    return {
      ...shape('rect', {
        x: round(rect.x + i * width),
        y: rect.y + rect.height - 4,
        width: round(width),
        height: 4,
        fill: segmentPaint(palette).core,
      }),
      key: `stripe-${i}`,
    };
  });
  const text = capText(segments);
  return [
    { ...shape('rect', { ...rect, rx: size.radius, fill: fault ? paint('plate') : own.core }), key: 'plate' },
    ...(look.level === 'far' ? [] : stripes),
    {
      ...shape('rect', {
        ...rect,
        rx: size.radius,
        fill: 'none',
        stroke: paint(fault ? 'red' : 'ink'),
        strokeWidth: fault ? 2.8 : 1.8,
      }),
      key: 'outline',
    },
    ...(look.level === 'far'
      ? []
      : [
          {
            ...shape(
              'text',
              {
                x: rect.x + rect.width / 2,
                y: round(rect.y + rect.height / 2 + 19 * 0.345),
                fontSize: 19,
                fontWeight: 700,
                fill: fault ? paint('red') : own.on,
                textAnchor: 'middle',
              },
              [text],
            ),
            key: 'letter',
          },
        ]),
  ];
};

/**
 * The sleeve at a tunnel's end: brass collar on the device's side, VNI, cap with the letter on the cord's side. On a
 * vertical run it is a flag: the cap stands left on the lane, the number beside it.
 */
export const ferruleMark = (look: FerruleLook): readonly Shape[] => {
  const { rect } = look;
  const halo = look.selected || look.lit ? [boxHalo(rect, look.lit === true)] : [];
  if (look.level === 'plan' || look.level === 'far') return [...halo, ...planFerrule(look)];
  const capWidth = capWidthOf(capText(look.segments));
  const capRight = look.capSide === 'right';
  const right = rect.x + rect.width;
  const capX = capRight ? right - capWidth : rect.x;
  const collarX = capRight ? rect.x : right - size.collar;
  const plateX = capRight ? rect.x + size.collar : rect.x + capWidth;
  const plateWidth = rect.width - size.collar - capWidth;
  const line = (x: number): string => `M${round(x)} ${rect.y}v${rect.height}`;
  const r = size.radius;
  const outline = {
    ...rect,
    rx: r,
    fill: 'none',
    stroke: paint(look.fault ? 'red' : 'ink'),
    strokeWidth: look.fault ? 2.2 : 1.5,
  };
  return [
    ...halo,
    { ...shape('rect', { ...rect, rx: r, fill: paint('plate') }), key: 'plate' },
    {
      ...shape('rect', {
        x: collarX,
        y: rect.y,
        width: size.collar,
        height: rect.height,
        fill: paint('brass'),
      }),
      key: 'collar',
    },
    ...cap(look, capWidth, capX),
    {
      ...shape('path', {
        d: line(capRight ? capX : capX + capWidth) + line(capRight ? collarX + size.collar : collarX),
        stroke: paint('ink'),
        strokeWidth: 1.5,
        fill: 'none',
      }),
      key: 'rules',
    },
    { ...shape('rect', outline), key: 'outline' },
    numberText(look, plateX + plateWidth / 2, rect.y + rect.height / 2, plateWidth - 3),
  ];
};

/** A ferrule as a group of its own, for the inspector and for tables. */
export const ferrulePart = (look: FerruleLook): Shape => group(ferruleMark(look));
