import type { BandGeometry, Rect } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { fitText, textWidth, wrapText } from '../text-width.ts';
import type { FontWeight } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import type { Level } from './level-of-detail.ts';
import { capShift, textLine } from './text-shape.ts';
import type { TransportWords } from './words.ts';

interface Line {
  readonly text: string;
  readonly weight: FontWeight;
  readonly sizePx: number;
  readonly quiet: boolean;
  /** Baseline to baseline from the line before. */
  readonly stepPx: number;
  /** A dimension line from edge to edge stands under this line. */
  readonly dimension?: boolean;
}

const nameLines = (words: TransportWords, widthPx: number, sizePx: number, most: number): readonly Line[] => {
  const fitted = fitText(words.name, {
    maxWidthPx: widthPx,
    maxLines: most,
    sizePx,
    minSizePx: Math.min(11, sizePx),
    weight: 600,
  });
  return fitted.lines.map((text, i): Line => ({
    text,
    weight: 600,
    sizePx: fitted.sizePx,
    quiet: false,
    stepPx: i === 0 ? fitted.sizePx * 0.8 : fitted.sizePx * 1.2,
  }));
};

const lines = (words: TransportWords, widthPx: number, level: Level): readonly Line[] => {
  const sizePx = level === 'work' ? 13.6 : 14;
  const quiet = (text: string): Line => ({ text, weight: 400, sizePx, quiet: true, stepPx: 19 });
  return [
    ...nameLines(words, widthPx, 15, 3),
    quiet(words.kind),
    ...(words.latency === undefined
      ? []
      : [
          {
            text: words.latency,
            weight: 500 as const,
            sizePx,
            quiet: false,
            stepPx: 25,
            dimension: true,
          },
        ]),
    ...(words.mtu === undefined
      ? []
      : [
          {
            text: words.mtu,
            weight: 600 as const,
            sizePx,
            quiet: false,
            stepPx: words.latency === undefined ? 21 : 32,
          },
        ]),
    ...(words.loss === undefined ? [] : [quiet(words.loss)]),
    quiet(words.trust),
  ];
};

const heightOf = (list: readonly Line[]): number => list.reduce((sum, line) => sum + line.stepPx, 0) + 4;

/** A dimension line with arrowheads 11 × 6.8 at both ends. */
const dimensionLine = (left: number, right: number, y: number): Shape =>
  group(
    [
      shape('line', {
        x1: left + 4,
        x2: right - 4,
        y1: y,
        y2: y,
        stroke: paint('ink'),
        strokeWidth: 1.2,
      }),
      shape('path', {
        d: `M${left + 1.5} ${y}l11 -3.4v6.8z` + `M${right - 1.5} ${y}l-11 -3.4v6.8z`,
        fill: paint('ink'),
      }),
    ],
    { key: 'dimension' },
  );

const contains = (outer: Rect, inner: Rect): boolean => {
  const [x, y] = [inner.x + inner.width / 2, inner.y + inner.height / 2];
  return x >= outer.x && x <= outer.x + outer.width && y >= outer.y && y <= outer.y + outer.height;
};

const stacked = (
  list: readonly Line[],
  x: number,
  top: number,
  edges: { readonly left: number; readonly right: number } | undefined,
  dimmed: boolean,
): readonly Shape[] => {
  let y = top;
  return list.flatMap((line, i) => {
    y += line.stepPx;
    const drawn = textLine(line.text, x, y, {
      sizePx: line.sizePx,
      weight: line.weight,
      anchor: 'middle',
      fill: paint(line.quiet && !dimmed ? 'ink-2' : 'ink'),
      key: `line-${i}`,
    });
    return line.dimension && edges !== undefined
      ? [drawn, dimensionLine(edges.left, edges.right, y + 7)]
      : [drawn];
  });
};

/** All there is to say on as many lines as the height gives, for a band that lies flat. */
const flat = (words: TransportWords, rect: Rect, level: Level, dimmed: boolean): readonly Shape[] => {
  const facts = [words.kind, words.trust, words.latency, words.mtu, words.loss].filter(
    (fact): fact is string => fact !== undefined,
  );
  const sizePx = level === 'work' ? 13.6 : 14;
  const unbroken = facts.map((fact) => fact.replaceAll(' ', '\u00a0')).join(', ');
  const rows = wrapText(unbroken, rect.width, sizePx, 400);
  const list: readonly Line[] = [
    ...nameLines(words, rect.width, 15, 1),
    ...rows.map((text): Line => ({ text, weight: 400, sizePx, quiet: true, stepPx: 19 })),
  ];
  const top = rect.y + (rect.height - heightOf(list)) / 2;
  return stacked(list, rect.x + rect.width / 2, top, undefined, dimmed);
};

/** One line along the edge of an upright band that has no room across: as much as fits its length, trust before figures. */
const turned = (words: TransportWords, rect: Rect, dimmed: boolean): readonly Shape[] => {
  const { name, kind, trust, latency, mtu, loss } = words;
  const known = (facts: readonly (string | undefined)[]): string =>
    facts.map((fact) => (fact === undefined ? '' : `, ${fact}`)).join('');
  const candidates = [
    known([kind, latency, mtu, loss, trust]),
    known([kind, latency, mtu, trust]),
    known([mtu, trust]),
    known([trust]),
    '',
  ];
  const widthPx = (rest: string, sizePx: number): number =>
    textWidth(name, sizePx, 600) + textWidth(rest, sizePx, 400);
  const rest = candidates.find((candidate) => widthPx(candidate, 11.5) <= rect.height) ?? '';
  const sizePx = Math.max(9.5, Math.min(14, (14 * rect.height) / widthPx(rest, 14)));
  const [x, y] = [rect.x + rect.width / 2, rect.y + rect.height / 2];
  return [
    group(
      [
        shape(
          'text',
          { x: 0, y: sizePx * capShift, fontSize: sizePx, textAnchor: 'middle', fill: paint('ink') },
          [
            shape('tspan', { fontWeight: 600 }, [name]),
            shape('tspan', { fill: paint(dimmed ? 'ink' : 'ink-2') }, [rest]),
          ],
        ),
      ],
      { key: 'turned', attrs: { transform: `translate(${x} ${y}) rotate(-90)` } },
    ),
  ];
};

const centredName = (
  words: TransportWords,
  rect: Rect,
  sizePx: number,
  most: number,
  more?: string,
): readonly Shape[] => {
  const list = [
    ...nameLines(words, rect.width - 4, sizePx, most),
    ...(more === undefined
      ? []
      : [{ text: more, weight: 400 as const, sizePx: sizePx * 0.95, quiet: true, stepPx: sizePx * 1.25 }]),
  ];
  return stacked(
    list,
    rect.x + rect.width / 2,
    rect.y + (rect.height - heightOf(list)) / 2,
    undefined,
    false,
  );
};

/** A band's words: name, kind, latency as a dimension line from edge to edge, MTU, loss and trust, as far as known. */
export const bandText = (
  band: BandGeometry,
  words: TransportWords,
  level: Level,
  dimmed: boolean,
): Shape | undefined => {
  const { mode, rect } = band.text;
  const host = [...band.limbs, ...(band.header === undefined ? [] : [band.header])].find((r) =>
    contains(r, rect),
  );
  const across =
    mode === 'in' && host !== undefined && band.orientation === 'vertical' && host.height >= host.width;
  const room = across ? { ...rect, x: host.x, width: host.width } : rect;
  const inner = (): readonly Shape[] => {
    if (level === 'far') return [];
    if (level === 'plan') return centredName(words, room, 20, 3, words.mtu?.replace('MTU ', ''));
    if (mode === 'turned') return turned(words, rect, dimmed);
    if (mode === 'name-only') return centredName(words, room, 15, 3);
    if (mode === 'in' && !across) return flat(words, rect, level, dimmed);
    const list = lines(words, room.width - 8, level);
    const top = rect.y + Math.max(0, (rect.height - heightOf(list)) / 2);
    return stacked(
      list,
      room.x + room.width / 2,
      top,
      across ? { left: room.x, right: room.x + room.width } : undefined,
      dimmed,
    );
  };
  return group(inner(), { key: 'text' });
};
