import type { Shape } from '../shape.ts';
import type { EmbeddedFace } from '../svg/standalone-svg.ts';
import { standaloneSvg } from '../svg/standalone-svg.ts';
import type { PaperName } from './paper-sizes.ts';
import { paperSizesMm } from './paper-sizes.ts';
import type { SheetPicture } from './sheet-picture.ts';

/**
 * Not every drawing program knows `paint-order`: it would lay the rim over its letters. So the rim is an element of its own
 * under the one that is read.
 */
const rimApart = (drawn: Shape): readonly Shape[] => {
  if (drawn.attrs['paintOrder'] === 'stroke') {
    const { paintOrder: _order, stroke, strokeWidth, strokeLinejoin, ...inside } = drawn.attrs;
    const rim = { stroke, strokeWidth, strokeLinejoin, fill: stroke };
    return [
      { ...drawn, attrs: { ...inside, ...rim, ...(drawn.el === 'text' ? { 'aria-hidden': 'true' } : {}) } },
      { ...drawn, attrs: inside },
    ];
  }
  if (drawn.children === undefined) return [drawn];
  return [
    {
      ...drawn,
      children: drawn.children.flatMap((child): readonly (Shape | string)[] =>
        typeof child === 'string' ? [child] : rimApart(child),
      ),
    },
  ];
};

export interface PictureSvgOptions {
  /** Without them the file names the font only. */
  readonly fonts?: readonly EmbeddedFace[];
  /** Gives the file the size of a paper; absent, that of the sheet's own. */
  readonly paper?: PaperName;
}

/** A picture as one SVG file that needs nothing else: text as text, real size in millimetres, fonts embedded where given. */
export const pictureSvgText = (picture: SheetPicture, options: PictureSvgOptions = {}): string => {
  const { width, height } = paperSizesMm[options.paper ?? picture.sheet];
  return standaloneSvg(
    picture.layers.map(({ name, shapes }) => ({ name, shapes: shapes.flatMap(rimApart) })),
    {
      title: picture.title,
      viewBox: picture.box,
      size: { width: `${width}mm`, height: `${height}mm` },
      ...(options.fonts === undefined ? {} : { fonts: options.fonts }),
    },
  );
};
