import type { Path } from '../geometry.ts';
import { pathAt, pathData, pathLength } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { Level } from './level-of-detail.ts';

const wide = { near: 20, work: 20, plan: 21, far: 34 } as const;
const pitchPx = 7;

/** Under a bare cord on an untrusted transport: a paper bed with red hatch at 45°, seen on both sides of the casing. */
export const untrustedHatch = (path: Path, level: Level, index: number): readonly Shape[] => {
  const width = wide[level];
  const half = width / 2;
  const scale = width / 20;
  const length = pathLength(path);
  const lines: string[] = [];
  // The hatch keeps its direction on the sheet while the cord turns, as a hatched area would.
  for (let along = pitchPx / 2; along < length; along += pitchPx * scale) {
    const { x, y, angle } = pathAt(path, along);
    const across = { x: -Math.sin(angle), y: Math.cos(angle) };
    const slant = { x: Math.SQRT1_2, y: -Math.SQRT1_2 };
    const rise = across.x * slant.x + across.y * slant.y;
    // Along a piece that itself runs at 45° the strokes stand square to the cord.
    const [dx, dy] =
      Math.abs(rise) < 0.35
        ? [across.x * half, across.y * half]
        : [(slant.x / rise) * half, (slant.y / rise) * half];
    lines.push(
      `M${(x - dx).toFixed(1)} ${(y - dy).toFixed(1)}L${(x + dx).toFixed(1)} ${(y + dy).toFixed(1)}`,
    );
  }
  return [
    {
      ...shape('path', { d: pathData(path), fill: 'none', stroke: paint('paper'), strokeWidth: width }),
      key: `bed-${index}`,
    },
    {
      ...shape('path', { d: lines.join(''), fill: 'none', stroke: paint('red'), strokeWidth: 2 * scale }),
      key: `hatch-${index}`,
    },
  ];
};
