import type { PipShape, Point } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import { pip as size } from './sizes.ts';

export interface PipState {
  readonly cabled: boolean;
  readonly shut?: boolean;
  readonly fault?: boolean;
  readonly hovered?: boolean;
}

const outline = (form: PipShape, { x, y }: Point, upright: boolean): string => {
  const half = size.size / 2;
  if (form === 'square') return `M${x - half} ${y - half}h${size.size}v${size.size}h${-size.size}z`;
  if (form === 'round') {
    const r = size.accessRadius;
    return `M${x - r} ${y}a${r} ${r} 0 1 1 ${2 * r} 0a${r} ${r} 0 1 1 ${-2 * r} 0z`;
  }
  if (form === 'lozenge') {
    const r = size.wanReach;
    return `M${x - r} ${y}L${x} ${y - r}L${x + r} ${y}L${x} ${y + r}z`;
  }
  const { width, height } = size.memberLink;
  const [w, h] = upright ? [height, width] : [width, height];
  return `M${x - w / 2} ${y - h / 2}h${w}v${h}h${-w}z`;
};

/** A port on its device's outline. A member link's bar lies along the edge: `upright` on a left or right one. */
export const pipMark = (form: PipShape, at: Point, state: PipState, upright = false): Shape => {
  const stroke = state.fault ? paint('red') : state.hovered ? paint('blue') : paint('ink');
  const filled = state.fault ? paint('red') : state.cabled && !state.shut ? paint('ink') : paint('plate');
  const slash = state.shut ? `M${at.x - 7.5} ${at.y + 7.5}L${at.x + 7.5} ${at.y - 7.5}` : '';
  const mark = shape('path', {
    d: outline(form, at, upright) + slash,
    fill: state.hovered && !state.cabled ? paint('plate') : filled,
    stroke,
    strokeWidth: 1.6,
    strokeLinejoin: 'miter',
  });
  if (!state.hovered) return mark;
  return group([
    shape('circle', {
      cx: at.x,
      cy: at.y,
      r: 10,
      fill: paint('blue-soft'),
      stroke: paint('blue'),
      strokeWidth: 1.6,
    }),
    mark,
  ]);
};
