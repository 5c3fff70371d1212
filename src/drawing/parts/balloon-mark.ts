import type { Severity } from '../decorations.ts';
import type { Point } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { Level } from './level-of-detail.ts';
import { octagon, severityToken } from './severity-mark.ts';
import { centredLine } from './text-shape.ts';

/** How much larger than near balloons are drawn at each level. */
export const balloonScale: { readonly [level in Level]: number } = { near: 1, work: 1, plan: 1.46, far: 2.6 };

const sizes = {
  near: { octagon: 13, ring: 11.8, number: 14, words: 14.5, dot: 3.2, leader: 1.6, rim: 4.5 },
  work: { octagon: 13, ring: 11.8, number: 14, words: 14.5, dot: 3.2, leader: 1.6, rim: 4.5 },
  plan: { octagon: 19, ring: 17.5, number: 19, words: 21, dot: 4.5, leader: 2.4, rim: 6 },
  far: { octagon: 34, ring: 31, number: 36, words: 0, dot: 7, leader: 4, rim: 10 },
} as const;

export interface BalloonMark {
  readonly number: number;
  readonly severity: Severity;
  readonly waived: boolean;
  readonly words?: string;
  readonly at: Point;
  /** What the leader points at. */
  readonly anchor: Point;
  readonly wordsSide: 'left' | 'right';
}

/** A finding on the sheet: leader and dot, octagon or ring with its number, and beside a blocking one a few words. */
export const balloonMark = (balloon: BalloonMark, level: Level): readonly Shape[] => {
  const size = sizes[level];
  const { at, anchor, severity, waived } = balloon;
  const colour = paint(waived ? 'ink-3' : severityToken[severity]);
  const solid = severity === 'blocking' && !waived;
  const radius = severity === 'blocking' ? size.octagon : size.ring;
  const length = Math.hypot(anchor.x - at.x, anchor.y - at.y);
  const start = {
    x: at.x + ((anchor.x - at.x) / (length || 1)) * radius,
    y: at.y + ((anchor.y - at.y) / (length || 1)) * radius,
  };
  const leader =
    length > radius + size.dot
      ? `M${start.x.toFixed(1)} ${start.y.toFixed(1)}L${anchor.x.toFixed(1)} ${anchor.y.toFixed(1)}`
      : '';
  const body = {
    fill: solid ? colour : paint('paper'),
    stroke: solid ? paint('paper') : colour,
    strokeWidth: solid ? 1.4 : 2,
    ...(waived ? { strokeDasharray: '4 3' } : {}),
  };
  const side = balloon.wordsSide === 'right' ? 1 : -1;
  return [
    ...(leader === ''
      ? []
      : [
          {
            ...shape('path', { d: leader, stroke: paint('paper'), strokeWidth: size.rim }),
            key: 'leader-rim',
          },
          {
            ...shape('path', {
              d: leader,
              stroke: colour,
              strokeWidth: size.leader,
              ...(waived ? { strokeDasharray: '4 3' } : {}),
            }),
            key: 'leader',
          },
          {
            ...shape('circle', {
              cx: anchor.x,
              cy: anchor.y,
              r: size.dot,
              fill: colour,
              stroke: paint('paper'),
              strokeWidth: 1.2,
            }),
            key: 'dot',
          },
        ]),
    severity === 'blocking'
      ? { ...shape('path', { d: octagon(at.x, at.y, radius + (solid ? 1 : 0)), ...body }), key: 'body' }
      : { ...shape('circle', { cx: at.x, cy: at.y, r: radius, ...body }), key: 'body' },
    centredLine(String(balloon.number), at.x, at.y, {
      sizePx: balloon.number > 99 ? size.number * 0.78 : size.number,
      weight: 700,
      anchor: 'middle',
      fill: solid ? paint('red-ink') : colour,
      key: 'number',
    }),
    ...(balloon.words === undefined || severity !== 'blocking' || size.words === 0
      ? []
      : [
          centredLine(balloon.words, at.x + side * (radius + 8), at.y, {
            sizePx: size.words,
            weight: 600,
            anchor: side === 1 ? 'start' : 'end',
            fill: colour,
            haloPx: size.rim,
            key: 'words',
          }),
        ]),
  ];
};
