import { cordSample } from '../drawing/parts/cord.ts';
import { paletteOf } from '../drawing/theme/segment-tokens.ts';
import { Shapes } from './shapes.tsx';

interface SegmentSwatchProps {
  readonly letter: string;
  readonly squarePx?: number;
  /** How much of its cord follows the letter. */
  readonly cordPx?: number;
}

/** A segment's letter with a length of its cord: colour, pattern and letter, so that none has to carry it alone. */
export function SegmentSwatch({ letter, squarePx = 17, cordPx = 20 }: SegmentSwatchProps) {
  const width = squarePx + cordPx + 2;
  const height = squarePx + 2;
  const sample = cordSample({ letter, palette: paletteOf(letter) }, 1, height / 2, squarePx, cordPx);
  return (
    <svg
      role="img"
      aria-label={`Segment ${letter}`}
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      className="shrink-0"
    >
      <Shapes shapes={[sample]} />
    </svg>
  );
}
