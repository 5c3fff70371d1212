import type { FlagGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { fitText } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import { boxHalo } from './highlight.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, tonesOf } from './look.ts';
import { pipMark } from './pips.ts';
import { capShift, fittedLines } from './text-shape.ts';

const pointPx = 16;
const insetPx = 9;
const headPx = 14;
const linePx = 12.5;
const stepPx = 17;

/** The outline of a flag: a plate whose end at the edge of the sheet points off it. */
const outline = ({ rect: { x, y, width, height }, looks }: FlagGeometry): string => {
  const [point, shoulder, end] =
    looks === 'right' ? [x, x + pointPx, x + width] : [x + width, x + width - pointPx, x];
  return `M${end} ${y}V${y + height}H${shoulder}L${point} ${y + height / 2}L${shoulder} ${y}z`;
};

const point = ({ rect: { x, y, width, height }, looks }: FlagGeometry): string => {
  const [tip, shoulder] = looks === 'right' ? [x, x + pointPx] : [x + width, x + width - pointPx];
  return `M${shoulder} ${y}L${tip} ${y + height / 2}L${shoulder} ${y + height}z`;
};

/** A flag at the edge of a sheet: the sheet that it leads to, and whose far ends lie there. */
export const flagPart = (flag: FlagGeometry, look: Look): Shape => {
  const ref = flag.device === undefined ? undefined : ({ collection: 'devices', id: flag.device } as const);
  const tones = ref === undefined ? [] : tonesOf(look, ref);
  const marked = tones.includes('selected') || tones.includes('hovered');
  const { rect } = flag;
  const left = rect.x + insetPx + (flag.looks === 'right' ? pointPx : 0);
  const room = rect.width - pointPx - 2 * insetPx;
  const isFar = look.level === 'far';
  const isPlan = look.level === 'plan';
  const middle = rect.y + rect.height / 2;
  const head = fitText(flag.head, {
    maxWidthPx: room,
    sizePx: isPlan ? 21 : headPx,
    minSizePx: isPlan ? 15 : headPx,
    weight: 600,
  });
  const block = isPlan ? 0 : flag.lines.length * stepPx;
  const firstLine = middle - block / 2 + head.sizePx * capShift;
  return group(
    [
      (marked || tones.includes('lit')) && boxHalo(rect, tones.includes('lit')),
      {
        ...shape('path', {
          d: outline(flag),
          fill: paint(isFar ? 'ink' : 'plate'),
          stroke: paint('ink'),
          strokeWidth: 1.8,
          strokeLinejoin: 'round',
        }),
        key: 'body',
      },
      !isFar && { ...shape('path', { d: point(flag), fill: paint('strip') }), key: 'point' },
      !isFar &&
        group(fittedLines(head, flag.head, left, firstLine, stepPx, { weight: 600 }), { key: 'head' }),
      ...(isFar || isPlan
        ? []
        : flag.lines.map((line, i) =>
            group(
              fittedLines(
                fitText(line, { maxWidthPx: room, sizePx: linePx, minSizePx: 10 }),
                line,
                left,
                firstLine + (i + 1) * stepPx,
                stepPx,
                { fill: paint(tones.includes('dimmed') ? 'ink' : 'ink-2') },
              ),
              { key: `line-${i}` },
            ),
          )),
      ...(isFar
        ? []
        : flag.pips.map((pip) => ({
            ...pipMark(pip.shape, pip.at, { cabled: pip.cabled }),
            key: `pip-${pip.port}`,
          }))),
    ],
    {
      key: `flag-${flag.id}`,
      data: { ...(ref === undefined ? {} : { ref }), part: 'flag' },
      ...(tones.includes('dimmed') ? { attrs: { opacity: dimmedOpacity } } : {}),
    },
  );
};
