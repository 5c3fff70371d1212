import type { DeviceGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { fitText } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import type { Level } from './level-of-detail.ts';
import { bracket as size } from './sizes.ts';
import { fittedLines } from './text-shape.ts';

/** The `]` that joins both members on the side where shared endpoints dock. */
export const pairBracket = (device: DeviceGeometry): Shape | undefined => {
  const [first, second] = device.plates;
  if (device.bracket === undefined || first === undefined || second === undefined) return undefined;
  const { side, rect } = device.bracket;
  const half = size.stroke / 2;
  const r = size.cornerRadius;
  const upright = side === 'left' || side === 'right';
  // Drawn as `]` along the axis away from the members; across runs from the first member's arm to the second's.
  const outwards = side === 'left' || side === 'top' ? -1 : 1;
  const edge = (plate: { readonly rect: typeof rect }): number => {
    if (side === 'right') return plate.rect.x + plate.rect.width;
    if (side === 'left') return plate.rect.x;
    return side === 'bottom' ? plate.rect.y + plate.rect.height : plate.rect.y;
  };
  const spine =
    side === 'right'
      ? rect.x + rect.width - half
      : side === 'left'
        ? rect.x + half
        : side === 'bottom'
          ? rect.y + rect.height - half
          : rect.y + half;
  const [from, to] = upright
    ? [rect.y + half, rect.y + rect.height - half]
    : [rect.x + half, rect.x + rect.width - half];
  const at = (along: number, across: number): string =>
    upright ? `${along} ${across}` : `${across} ${along}`;
  const corner = (along: number, across: number): string =>
    `A${r} ${r} 0 0 ${outwards > 0 === upright ? 1 : 0} ${at(along, across)}`;
  const d =
    `M${at(edge(first), from)}L${at(spine - outwards * r, from)}${corner(spine, from + r)}` +
    `L${at(spine, to - r)}${corner(spine - outwards * r, to)}L${at(edge(second), to)}`;
  return {
    ...shape('path', {
      d,
      fill: 'none',
      stroke: paint('ink'),
      strokeWidth: size.stroke,
      strokeLinejoin: 'round',
    }),
    key: 'bracket',
  };
};

/** "fw-ho HA pair" above the first member; at the plan level the name alone. */
export const pairTitle = (
  device: DeviceGeometry,
  name: string,
  level: Level,
  dimmed: boolean,
): Shape | undefined => {
  const plate = device.plates[0];
  if (plate === undefined || level === 'far') return undefined;
  const plan = level === 'plan';
  const note = 'HA pair';
  const sizePx = plan ? 21 : 15;
  const fitted = fitText(name, {
    maxWidthPx: plate.rect.width + (plan ? 30 : -40),
    sizePx,
    minSizePx: 11,
    weight: 600,
  });
  const lines = fittedLines(fitted, name, plate.rect.x, plate.rect.y - 8, 0, { weight: 600 });
  const words = plan
    ? lines
    : lines.map((line) => ({
        ...line,
        children: [
          ...(line.children ?? []),
          shape('tspan', { fontWeight: 400, fill: paint(dimmed ? 'ink' : 'ink-2') }, [`\u00a0${note}`]),
        ],
      }));
  return group(words, { key: 'title' });
};
