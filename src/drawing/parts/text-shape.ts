import type { LabelGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { shape } from '../shape.ts';
import type { FittedText, FontWeight } from '../text-width.ts';
import { paint } from '../theme/paint.ts';

export interface TextStyle {
  readonly sizePx: number;
  readonly weight?: FontWeight;
  readonly fill?: string;
  readonly anchor?: 'start' | 'middle' | 'end';
  /** Width of a paper-coloured rim that keeps the text readable over lines. */
  readonly haloPx?: number;
  readonly key?: string;
}

const round = (value: number): number => Math.round(value * 100) / 100;

/** Height of capitals and digits in Work Sans is 0.66 em: half of it centres a line on a point. */
export const capShift = 0.33;

/** One line of text with its baseline at y. */
export const textLine = (text: string, x: number, y: number, style: TextStyle): Shape => ({
  ...shape(
    'text',
    {
      x: round(x),
      y: round(y),
      fontSize: round(style.sizePx),
      fontWeight: style.weight ?? 400,
      fill: style.fill ?? paint('ink'),
      ...(style.anchor === undefined || style.anchor === 'start' ? {} : { textAnchor: style.anchor }),
      ...(style.haloPx === undefined
        ? {}
        : {
            stroke: paint('paper'),
            strokeWidth: style.haloPx,
            strokeLinejoin: 'round',
            paintOrder: 'stroke',
          }),
    },
    [text],
  ),
  ...(style.key === undefined ? {} : { key: style.key }),
});

/** A line whose capitals are centred on y. */
export const centredLine = (text: string, x: number, y: number, style: TextStyle): Shape =>
  textLine(text, x, y + style.sizePx * capShift, style);

/** Fitted lines one under the other, the first with its baseline at y. Shortened ones carry the whole text as a tooltip. */
export const fittedLines = (
  fitted: FittedText,
  whole: string,
  x: number,
  y: number,
  lineHeight: number,
  style: Omit<TextStyle, 'sizePx'>,
): readonly Shape[] =>
  fitted.lines.map((line, i) => {
    const drawn = textLine(line, x, y + i * lineHeight, {
      ...style,
      sizePx: fitted.sizePx,
      key: `line-${i}`,
    });
    return fitted.shortened ? { ...drawn, children: [line, shape('title', {}, [whole])] } : drawn;
  });

/** A label where routing found a place for it. */
export const labelText = (label: LabelGeometry, style: TextStyle): Shape =>
  textLine(label.text, label.at.x, label.at.y, { ...style, anchor: label.anchor });
