import type { Severity } from '../decorations.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import type { BaseToken } from '../theme/tokens.ts';
import { paint } from '../theme/paint.ts';

export const severityToken: { readonly [severity in Severity]: BaseToken } = {
  blocking: 'red',
  degrading: 'degr',
  advisory: 'advi',
};

const round = (value: number): number => Math.round(value * 100) / 100;

/** Path data of a regular octagon that stands on an edge. */
export const octagon = (x: number, y: number, radius: number): string => {
  const corners = Array.from({ length: 8 }, (_, i) => {
    const angle = Math.PI / 8 + (i * Math.PI) / 4;
    return `${round(x + radius * Math.cos(angle))} ${round(y + radius * Math.sin(angle))}`;
  });
  return `M${corners.join('L')}z`;
};

/** A severity's shape centred on a point: solid octagon, triangle with its lower half filled, hollow lozenge. */
export const severityMark = (severity: Severity, x: number, y: number, size: number): Shape => {
  const colour = paint(severityToken[severity]);
  const half = size / 2;
  if (severity === 'blocking') return shape('path', { d: octagon(x, y, half * 1.04), fill: colour });
  if (severity === 'degrading') {
    const [top, bottom, middle] = [y - half * 0.86, y + half * 0.82, y + half * 0.1];
    const wide = half * 0.95;
    // The sides at the height of the fill's upper edge.
    const inner = (wide * (middle - top)) / (bottom - top);
    return group([
      shape('path', {
        d: `M${round(x)} ${round(top)}L${round(x + wide)} ${round(bottom)}H${round(x - wide)}z`,
        fill: 'none',
        stroke: colour,
        strokeWidth: round(size * 0.115),
        strokeLinejoin: 'round',
      }),
      shape('path', {
        d: `M${round(x - inner)} ${round(middle)}H${round(x + inner)}L${round(x + wide)} ${round(bottom)}H${round(x - wide)}z`,
        fill: colour,
      }),
    ]);
  }
  const r = half * 0.9;
  return shape('path', {
    d: `M${round(x)} ${round(y - r)}L${round(x + r)} ${y}L${round(x)} ${round(y + r)}L${round(x - r)} ${y}z`,
    fill: 'none',
    stroke: colour,
    strokeWidth: round(size * 0.115),
  });
};
