import { createElement, type ReactNode } from 'react';
import { elementKey } from '../drawing/decorations.ts';
import type { Shape } from '../drawing/shape.ts';

/** The drawing's shapes as SVG elements. What a pointer can find in them is in `data-ref` and `data-part`. */
export function Shapes({ shapes }: { readonly shapes: readonly Shape[] }) {
  return shapes.map((shape, at) => elementOf(shape, at));
}

function elementOf(shape: Shape, at: number): ReactNode {
  const { ref, part } = shape.data ?? {};
  return createElement(
    shape.el,
    {
      ...shape.attrs,
      key: shape.key ?? at,
      'data-ref': ref === undefined ? undefined : elementKey(ref),
      'data-part': part,
    },
    shape.children?.map((child, childAt) => (typeof child === 'string' ? child : elementOf(child, childAt))),
  );
}
