import { mark } from '../drawing/parts/glyphs.ts';
import { Shapes } from './shapes.tsx';

/** The mark: a sagging cord between two brass plugs. */
export function Mark({ width = 34 }: { readonly width?: number }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 34 20" width={width} height={(width * 20) / 34} className="shrink-0">
      <Shapes shapes={[mark({ x: 0, y: 0, width: 34 })]} />
    </svg>
  );
}
