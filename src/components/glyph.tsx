import { glyph, type GlyphName } from '../drawing/parts/glyphs.ts';
import { Shapes } from './shapes.tsx';

interface GlyphProps {
  readonly name: GlyphName;
  readonly size?: number;
  /** Where it stands when it is part of another drawing. */
  readonly x?: number;
  readonly y?: number;
}

/** The sign of a kind of part, in the colour of the text round it. It says nothing to a screen reader. */
export function Glyph({ name, size = 20, x, y }: GlyphProps) {
  return (
    <svg aria-hidden="true" viewBox="0 0 20 20" width={size} height={size} x={x} y={y} className="shrink-0">
      <Shapes shapes={[glyph(name, { x: 0, y: 0, size: 20, colour: 'currentColor', strokePx: 1.5 })]} />
    </svg>
  );
}
