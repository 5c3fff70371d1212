import type { CableGeometry, Point } from '../geometry.ts';
import { elementKey } from '../decorations.ts';
import { nearestAlong, offsetPath, pathAt, pathData, pathLength, subPath } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { BaseToken } from '../theme/tokens.ts';
import { changeToneOf, changeUnderlay } from './change-marks.ts';
import { measures } from './level-of-detail.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, tonesOf } from './look.ts';
import { cable as size } from './sizes.ts';
import { labelText } from './text-shape.ts';

const line = (d: string, colour: BaseToken, widthPx: number, key: string, extra: object = {}): Shape => ({
  ...shape('path', { d, fill: 'none', stroke: paint(colour), strokeWidth: widthPx, ...extra }),
  key,
});

/** A tie round both cables of an aggregation, on the middle of their way. */
const tie = (cable: CableGeometry): Shape => {
  const { x, y, angle } = pathAt(cable.path, pathLength(cable.path) / 2);
  const upright = Math.abs(Math.sin(angle)) > 0.7;
  const { width, height } = size.lagEllipse;
  return {
    ...shape('ellipse', {
      cx: x,
      cy: y,
      rx: (upright ? height : width) / 2,
      ry: (upright ? width : height) / 2,
      fill: 'none',
      stroke: paint('ink'),
      strokeWidth: 1.7,
    }),
    key: 'tie',
  };
};

/** At a crossing the newer line parts the older one by a paper rim. */
const crossingHalo = (cable: CableGeometry, crossing: Point, index: number): Shape => {
  const along = nearestAlong(cable.path, crossing);
  const width = (cable.aggregated ? size.lagGap : 0) + size.stroke + 2 * 4.5;
  return line(pathData(subPath(cable.path, along - 6, along + 6)), 'paper', width, `halo-${index}`);
};

/** A cable or an aggregation of cables, or a WAN port's cable to its landing in a band with its address. */
export const cablePart = (cable: CableGeometry, look: Look): Shape => {
  const refs = cable.links.map((id) => ({ collection: 'links' as const, id }));
  const tones = refs.flatMap((ref) => tonesOf(look, ref));
  const first = refs[0] ?? { collection: 'links' as const, id: '' };
  const widthPx = measures[look.level].cablePx;
  const dimmed = tones.includes('dimmed');
  const failed = tones.includes('failed');
  const marked = tones.includes('selected') || tones.includes('hovered');
  const lit = tones.includes('lit');
  const change = changeToneOf(tones);
  const spread = cable.aggregated ? size.lagGap : 0;
  const whole = pathData(cable.path);
  const colour = cable.noWay
    ? 'blue'
    : failed || tones.includes('fault')
      ? 'red'
      : change === 'removed'
        ? 'ink-3'
        : 'ink';
  const dash = cable.noWay
    ? { strokeDasharray: '7 5' }
    : failed || change === 'removed'
      ? { strokeDasharray: '7 4' }
      : {};
  const lines = cable.aggregated
    ? [
        line(pathData(offsetPath(cable.path, -spread / 2)), colour, widthPx, 'line-1', dash),
        line(pathData(offsetPath(cable.path, spread / 2)), colour, widthPx, 'line-2', dash),
      ]
    : [line(whole, colour, widthPx, 'line', dash)];
  const labelled = cable.label !== undefined && (look.level === 'near' || look.level === 'work');
  return group(
    [
      ...cable.crossings.map((crossing, i) => crossingHalo(cable, crossing, i)),
      lit && line(whole, 'lamp-line', 12.6 + spread, 'lamp-edge'),
      lit && line(whole, 'lamp', 10 + spread, 'lamp'),
      marked && line(whole, 'blue', 11 + spread, 'pencil-edge'),
      marked && line(whole, 'blue-soft', 8.4 + spread, 'pencil'),
      ...changeUnderlay(whole, change, widthPx + spread),
      ...lines,
      cable.aggregated && look.level !== 'far' && tie(cable),
      cable.landing !== undefined &&
        look.level !== 'far' && {
          ...shape('rect', { ...cable.landing.bar, fill: paint(colour === 'red' ? 'red' : 'ink') }),
          key: 'landing',
        },
      labelled &&
        cable.label !== undefined && {
          ...labelText(cable.label, {
            sizePx: look.level === 'work' ? 13.6 : 14,
            fill: paint(dimmed ? 'ink' : 'ink-2'),
            haloPx: 5,
          }),
          key: 'label',
        },
    ],
    {
      key: `${elementKey(first)}-${Math.round(cable.polyline[0]?.x ?? 0)}-${Math.round(cable.polyline[0]?.y ?? 0)}`,
      data: { ref: first, part: 'cable' },
      ...(dimmed ? { attrs: { opacity: dimmedOpacity } } : {}),
    },
  );
};
