import type { DeviceKind } from '../../engine/model/devices.ts';
import type { Rect } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { fitText, textWidth } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import type { GlyphName } from './glyphs.ts';
import { glyph } from './glyphs.ts';
import type { Level } from './level-of-detail.ts';
import { measures } from './level-of-detail.ts';
import { plateOutline, stripOutline } from './outlines.ts';
import { firewallChamfer, hostGlyphColumn, strip } from './sizes.ts';
import { capShift, fittedLines } from './text-shape.ts';

export interface FaceplateFacts {
  readonly kind: DeviceKind;
  readonly name: string;
  readonly glyph: GlyphName;
  readonly second?: string;
}

export interface FaceplateState {
  readonly level: Level;
  /** The strip of a standby member is open and hatched. */
  readonly standby?: boolean;
  readonly mirrored?: boolean;
  readonly failed?: boolean;
  readonly fault?: boolean;
  readonly dimmed?: boolean;
}

const secondInk = (state: FaceplateState): string => paint(state.dimmed ? 'ink' : 'ink-2');

const outlineStroke = (state: FaceplateState): Record<string, string | number | undefined> => {
  const width = measures[state.level].outlinePx;
  if (state.failed)
    return {
      stroke: paint('red'),
      strokeWidth: width + 0.6,
      strokeDasharray: '7 4',
      strokeLinejoin: 'round',
    };
  if (state.fault) return { stroke: paint('red'), strokeWidth: width + 0.4, strokeLinejoin: 'miter' };
  return { stroke: paint('ink'), strokeWidth: width, strokeLinejoin: 'miter' };
};

const hatchPitch = 6;
/** 45° hatch of the open strip, inside the silhouette's chamfers. */
const stripHatch = (r: Rect): Shape => {
  const inset = 1.4;
  const [left, right] = [r.x + inset, r.x + r.width - inset];
  const [top, bottom] = [r.y + inset, r.y + strip.height];
  const lines: string[] = [];
  // Each line rises from `foot` on the strip's lower edge: x + y is the same all along it, as along the left chamfer.
  const firstFoot = left + top + firewallChamfer - bottom;
  for (let foot = firstFoot + hatchPitch; foot < right; foot += hatchPitch) {
    const onRightChamfer = (right - top - firewallChamfer + bottom + foot) / 2;
    const from = Math.max(foot, left);
    const to = Math.min(foot + bottom - top, right, onRightChamfer);
    if (to > from) lines.push(`M${from} ${bottom - (from - foot)}L${to} ${bottom - (to - foot)}`);
  }
  return {
    ...shape('path', { d: lines.join(''), stroke: paint('rule-2'), strokeWidth: 1.4, fill: 'none' }),
    key: 'hatch',
  };
};

const stripName = (facts: FaceplateFacts, r: Rect, state: FaceplateState): readonly Shape[] => {
  const open = state.standby || state.failed;
  const colour = paint(open ? 'ink' : 'strip-ink');
  const middle = r.y + strip.height / 2;
  const plan = state.level === 'plan';
  const fitted = plan
    ? fitText(facts.name, { maxWidthPx: r.width - 12, sizePx: 21, minSizePx: 15, weight: 600 })
    : fitText(facts.name, {
        maxWidthPx: r.width - strip.nameAt - 8,
        sizePx: 16,
        minSizePx: 11,
        weight: 600,
      });
  const line = fitted.lines[0] ?? '';
  const width = textWidth(line, fitted.sizePx, 600);
  const x = plan ? r.x + r.width / 2 : r.x + strip.nameAt;
  const gap = state.standby && {
    ...shape('rect', {
      x: plan ? x - width / 2 - 5 : r.x + strip.glyphAt - 3,
      // Lower than the strip: the hatch shows along its edges.
      y: r.y + 4.5,
      width: plan ? width + 10 : strip.nameAt - strip.glyphAt + width + 8,
      height: strip.height - 8.5,
      fill: paint('plate'),
    }),
    key: 'gap',
  };
  return [
    gap,
    !plan && {
      ...glyph(facts.glyph, {
        x: r.x + strip.glyphAt,
        y: middle - strip.glyphSize / 2,
        size: strip.glyphSize,
        colour,
      }),
      key: 'glyph',
    },
    ...fittedLines(fitted, facts.name, x, middle + fitted.sizePx * capShift, 0, {
      weight: 600,
      fill: colour,
      anchor: plan ? 'middle' : 'start',
    }),
  ].filter((part): part is Shape => part !== false && part !== undefined);
};

const bodyContent = (facts: FaceplateFacts, r: Rect, state: FaceplateState): Shape | undefined => {
  const top = r.y + strip.height;
  const height = r.height - strip.height;
  const middle = top + height / 2;
  const x = r.x + r.width / 2;
  if (state.level === 'plan') {
    // Ports crowd a switch's body: its strip is enough.
    if (state.failed || height < 38 || facts.kind === 'switch') return undefined;
    return {
      ...glyph(facts.glyph, { x: x - 13, y: middle - 14, size: 26, colour: paint('ink') }),
      key: 'glyph',
    };
  }
  const words = state.failed ? 'failed' : facts.second;
  if (words === undefined) return undefined;
  const size = state.level === 'work' ? 14 : 13;
  const weight = state.failed ? 600 : 400;
  // A little above the middle: port numbers stand along the lower edge.
  const y = facts.kind === 'switch' ? middle : top + Math.min(height / 2, 19);
  const fitted = fitText(words, { maxWidthPx: r.width - 44, sizePx: size, minSizePx: 10, weight });
  return group(
    fittedLines(fitted, words, x, y + fitted.sizePx * capShift, 0, {
      anchor: 'middle',
      weight,
      fill: state.failed ? paint('red') : secondInk(state),
    }),
    { key: 'second' },
  );
};

const hostContent = (facts: FaceplateFacts, r: Rect, state: FaceplateState): readonly Shape[] => {
  const name = (text: string, x: number, y: number, sizePx: number, width: number, centred: boolean): Shape =>
    group(
      (() => {
        const fitted = fitText(text, {
          maxWidthPx: width,
          sizePx,
          minSizePx: centred ? 14.5 : 10.5,
          weight: 600,
        });
        return fittedLines(fitted, text, x, y + fitted.sizePx * capShift, 0, {
          weight: 600,
          anchor: centred ? 'middle' : 'start',
          ...(state.failed ? { fill: paint('red') } : {}),
        });
      })(),
      { key: 'name' },
    );
  const middle = r.y + r.height / 2;
  if (state.level === 'plan') return [name(facts.name, r.x + r.width / 2, middle, 19.5, r.width - 14, true)];
  const columnX = state.mirrored ? r.x + r.width - hostGlyphColumn : r.x;
  const textX = state.mirrored ? r.x + 8 : r.x + hostGlyphColumn + 7;
  const textWidthPx = r.width - hostGlyphColumn - 15;
  const rule = state.mirrored ? columnX : columnX + hostGlyphColumn;
  const parts: Shape[] = [
    {
      ...shape('line', {
        x1: rule,
        x2: rule,
        y1: r.y + 1,
        y2: r.y + r.height - 1,
        stroke: paint('rule-2'),
        strokeWidth: 1,
      }),
      key: 'rule',
    },
    {
      ...glyph(facts.glyph, {
        x: columnX + hostGlyphColumn / 2 - 7.5,
        y: middle - 7.5,
        size: 15,
        colour: paint('ink'),
      }),
      key: 'glyph',
    },
  ];
  const address =
    state.level === 'near' && !state.failed ? facts.second : state.failed ? 'failed' : undefined;
  if (address === undefined) {
    parts.push(name(facts.name, textX, middle, state.level === 'work' ? 14.8 : 13.5, textWidthPx, false));
    return parts;
  }
  const fitted = fitText(address, { maxWidthPx: textWidthPx + 3, sizePx: 12.5, minSizePx: 9, whole: true });
  parts.push(
    name(facts.name, textX, middle - 7.6, 13.5, textWidthPx, false),
    ...fittedLines(fitted, address, textX, middle + 7.6 + fitted.sizePx * capShift, 0, {
      fill: state.failed ? paint('red') : secondInk(state),
      weight: state.failed ? 600 : 400,
    }),
  );
  return parts;
};

/** One faceplate: body, outline in its kind's silhouette, name strip and second line; a host's name and address. */
export const faceplate = (facts: FaceplateFacts, r: Rect, state: FaceplateState): readonly Shape[] => {
  const outline = plateOutline(facts.kind, r);
  const stroke = outlineStroke(state);
  if (state.level === 'far') {
    const solid = facts.kind !== 'host' && !state.standby && !state.failed;
    return [
      { ...shape('path', { d: outline, fill: paint(solid ? 'strip' : 'plate'), ...stroke }), key: 'plate' },
    ];
  }
  if (facts.kind === 'host')
    return [
      { ...shape('path', { d: outline, fill: paint('plate'), ...stroke }), key: 'plate' },
      ...hostContent(facts, r, state),
    ];
  const open = state.standby || state.failed;
  const second = bodyContent(facts, r, state);
  return [
    { ...shape('path', { d: outline, fill: paint('plate') }), key: 'plate' },
    ...(open
      ? [
          ...(state.standby ? [stripHatch(r)] : []),
          {
            ...shape('line', {
              x1: r.x,
              x2: r.x + r.width,
              y1: r.y + strip.height,
              y2: r.y + strip.height,
              stroke: paint(state.failed ? 'red' : 'ink'),
              strokeWidth: state.failed ? 1.6 : 1.4,
            }),
            key: 'strip-edge',
          },
        ]
      : [{ ...shape('path', { d: stripOutline(facts.kind, r), fill: paint('strip') }), key: 'strip' }]),
    { ...shape('path', { d: outline, fill: 'none', ...stroke }), key: 'outline' },
    ...stripName(facts, r, state),
    ...(second === undefined ? [] : [second]),
  ];
};
