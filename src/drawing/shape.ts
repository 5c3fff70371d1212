import type { ElementRef } from '../engine/model/design.ts';

// A drawing as plain data. The canvas renders it with React, exports and thumbnails as SVG text.

export type ShapeElement =
  'circle' | 'ellipse' | 'g' | 'line' | 'path' | 'polygon' | 'rect' | 'text' | 'title' | 'tspan';

/** Names as React spells them (`strokeWidth`); `to-svg-text` turns them into SVG's. Undefined ones are left out. */
export interface ShapeAttributes {
  readonly [name: string]: string | number | undefined;
}

/** What a pointer finds in a shape. */
export interface ShapeData {
  readonly ref?: ElementRef;
  /** Which part of the element it is, for example `pip`, `cord`, `ferrule-a`, `accept`. */
  readonly part?: string;
}

export interface Shape {
  readonly el: ShapeElement;
  readonly attrs: ShapeAttributes;
  readonly children?: readonly (Shape | string)[];
  /** Unique among siblings. */
  readonly key?: string;
  readonly data?: ShapeData;
}

export const shape = (
  el: ShapeElement,
  attrs: ShapeAttributes,
  children?: readonly (Shape | string)[],
): Shape => ({ el, attrs, ...(children === undefined ? {} : { children }) });

export interface GroupOptions {
  readonly key?: string;
  readonly data?: ShapeData;
  readonly attrs?: ShapeAttributes;
}

/** A group; undefined and false children are left out. */
export const group = (
  children: readonly (Shape | undefined | false)[],
  options: GroupOptions = {},
): Shape => ({
  el: 'g',
  attrs: options.attrs ?? {},
  children: children.filter((child): child is Shape => child !== undefined && child !== false),
  ...(options.key === undefined ? {} : { key: options.key }),
  ...(options.data === undefined ? {} : { data: options.data }),
});
