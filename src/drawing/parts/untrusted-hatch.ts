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
  // 45° to the cord wherever it turns: a hatch that kept its direction on the sheet would bunch up in the corners.
  for (let along = pitchPx / 2; along < length; along += pitchPx * scale) {
    const { x, y, angle } = pathAt(path, along);
    const slant = angle - Math.PI / 4;
    const [dx, dy] = [Math.cos(slant) * half * Math.SQRT2, Math.sin(slant) * half * Math.SQRT2];
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
