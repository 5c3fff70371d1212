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
  | 'balloons'
  | 'caution';

export interface Layer {
  readonly name: LayerName;
  readonly shapes: readonly Shape[];
}

/** One face of Work Sans as a data URL. */
export interface EmbeddedFace {
  readonly weight: number;
  readonly url: string;
  /** Absent: for all letters. */
  readonly unicodeRange?: string;
}

export interface StandaloneOptions {
  /** Read out in place of the picture. */
  readonly title: string;
  /** Absent where the shapes have plain colours already. */
  readonly theme?: Theme;
  readonly viewBox: {
    readonly x?: number;
    readonly y?: number;
    readonly width: number;
    readonly height: number;
  };
  /** In pixels, or with a unit. */
  readonly size: { readonly width: number | string; readonly height: number | string };
  /** Without them the file names the font only. */
  readonly fonts?: readonly EmbeddedFace[];
}

/** Only what cannot end the rule it stands in. */
const harmless = (value: string): string => value.replace(/["\\\n\r<>;{}]/g, '');
/** A data URL has a semicolon of its own. */
const fontUrl = (url: string): string => url.replace(/["\\\n\r<>]/g, '');

/** The rules of a stylesheet that bring faces along. */
export const fontFaceRules = (fonts: readonly EmbeddedFace[]): string =>
  fonts
    .map(
      ({ weight, url, unicodeRange }) =>
        `@font-face{font-family:'Work Sans';font-weight:${weight};src:url("${fontUrl(url)}")${
          unicodeRange === undefined ? '' : `;unicode-range:${harmless(unicodeRange)}`
        }}`,
    )
    .join('');

const round = (value: number): number => Math.round(value * 1000) / 1000;

/** Layers as one SVG file with the theme's colours and, where given, the fonts in it. */
export const standaloneSvg = (layers: readonly Layer[], options: StandaloneOptions): string => {
  const { viewBox, size, fonts = [], theme } = options;
  const box = [viewBox.x ?? 0, viewBox.y ?? 0, viewBox.width, viewBox.height].map(round).join(' ');
  return (
    `<svg xmlns="http://www.w3.org/2000/svg" width="${size.width}" height="${size.height}" ` +
    `viewBox="${box}" font-family="'Work Sans', sans-serif" ` +
    `style="font-feature-settings:'tnum' 1" role="img">` +
    `<title>${escapeXml(options.title)}</title>` +
    (fonts.length === 0 ? '' : `<style>${escapeXml(fontFaceRules(fonts))}</style>`) +
    layers.map(({ name, shapes }) => `<g class="layer-${name}">${toSvgText(shapes, theme)}</g>`).join('') +
    '</svg>'
  );
};
