import type { Shape } from '../shape.ts';
import type { Theme } from '../theme/tokens.ts';
import { escapeXml, toSvgText } from './to-svg-text.ts';

export type LayerName =
  | 'paper'
  | 'frame'
  | 'sites'
  | 'bands'
  | 'cables'
  | 'cords'
  | 'devices'
  | 'rings'
  | 'furniture'
  | 'faults'
  | 'balloons';

export interface Layer {
  readonly name: LayerName;
  readonly shapes: readonly Shape[];
}

interface Extent {
  readonly width: number;
  readonly height: number;
}
export interface StandaloneOptions {
  /** Read out in place of the picture. */
  readonly title: string;
  readonly theme: Theme;
  readonly viewBox: Extent;
  readonly size: Extent;
  readonly fonts?: { readonly [weight: number]: string };
}

/** Only addresses that cannot end the rule they stand in. */
const fontUrl = (url: string): string => url.replace(/["\\\n\r<>]/g, '');

const fontFaces = (fonts: { readonly [weight: number]: string }): string =>
  Object.entries(fonts)
    .map(
      ([weight, url]) =>
        `@font-face{font-family:'Work Sans';font-weight:${weight};src:url("${fontUrl(url)}")}`,
    )
    .join('');

/** Layers as one SVG file with the theme's colours and, where given, the fonts in it. */
export const standaloneSvg = (layers: readonly Layer[], options: StandaloneOptions): string => {
  const { viewBox, size, fonts, theme } = options;
  return (
    `<svg xmlns="http://www.w3.org/2000/svg" width="${size.width}" height="${size.height}" ` +
    `viewBox="0 0 ${viewBox.width} ${viewBox.height}" font-family="'Work Sans', sans-serif" ` +
    `style="font-feature-settings:'tnum' 1" role="img">` +
    `<title>${escapeXml(options.title)}</title>` +
    (fonts === undefined ? '' : `<style>${escapeXml(fontFaces(fonts))}</style>`) +
    layers.map(({ name, shapes }) => `<g class="layer-${name}">${toSvgText(shapes, theme)}</g>`).join('') +
    '</svg>'
  );
};
