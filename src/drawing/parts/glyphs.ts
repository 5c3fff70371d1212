import type { DeviceKind, hostFaces } from '../../engine/model/devices.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';

export type GlyphName =
  | DeviceKind
  | (typeof hostFaces)[number]
  | 'endpoint'
  | 'tunnel'
  | 'jacket'
  | 'cable'
  | 'transport'
  | 'site'
  | 'note';

interface Line {
  readonly d: string;
  readonly strokePx?: number;
  readonly dash?: string;
}
/** Drawn in a square of 20: lines of 1.6 unless they say otherwise, then what is filled. */
interface Glyph {
  readonly lines: readonly Line[];
  readonly fill?: string;
}

const disc = (x: number, y: number, r: number): string =>
  `M${x - r} ${y}a${r} ${r} 0 1 1 ${2 * r} 0a${r} ${r} 0 1 1 ${-2 * r} 0z`;

const glyphs: { readonly [name in GlyphName]: Glyph } = {
  // A sluice gate.
  firewall: {
    lines: [{ d: 'M3.4 4.8V18M16.6 4.8V18M2 4.8h16M10 1.4v5.4M6.8 1.4h6.4M6.4 15.6h7.2' }],
    fill: 'M6.4 7.2h7.2v5H6.4z',
  },
  'ha-pair': { lines: [{ d: 'M7.6 12.2h10.6v5H7.6zM4.6 4.2H2v11.6h5' }], fill: 'M5 2.8h10.6v5H5z' },
  // A bus bar with its taps.
  switch: {
    lines: [
      { d: 'M1.6 10h16.8', strokePx: 2.6 },
      {
        d: 'M4.4 10V4.6M10 10V4.6M15.6 10V4.6M7.2 10v5.4M12.8 10v5.4M3 4.2h2.8M8.6 4.2h2.8M14.2 4.2H17M5.8 15.8h2.8M11.4 15.8h2.8',
      },
    ],
  },
  // A fingerpost.
  router: {
    lines: [{ d: 'M10 1.8v16.4M6.4 18.2h7.2M10 9.6H4.2L1.7 11.9l2.5 2.3H10z' }],
    fill: 'M10 3.4h5.8l2.5 2.3-2.5 2.3H10z',
  },
  // A plug.
  host: {
    lines: [{ d: 'M10 18.4v-4.6M4.6 6.6h10.8v2.2a5 5 0 0 1-5 5h-.8a5 5 0 0 1-5-5zM7.4 6.4V2M12.6 6.4V2' }],
  },
  server: { lines: [{ d: 'M3 3h14v6H3zM3 11h14v6H3zM13.6 6h1M13.6 14h1M5.6 6h4M5.6 14h4' }] },
  controller: {
    lines: [{ d: 'M2.4 4.4h15.2v9.2H2.4zM7.5 4.4v9.2M12.5 4.4v9.2M1.2 16.8h17.6' }],
    fill: disc(4.95, 9, 1.3) + disc(10, 9, 1.3) + disc(15.05, 9, 1.3),
  },
  camera: {
    lines: [{ d: 'M3 7.4h14M4.4 7.4v1.8a5.6 5.6 0 0 0 11.2 0V7.4M10 7.4V3.2M5.6 3.2h8.8' }],
    fill: disc(10, 10.4, 1.7),
  },
  kiosk: {
    lines: [{ d: 'M5 2h10v16H5zM7.6 5h4.8v3.4H7.6zM7 11.6h6' }],
    fill: 'M8.4 11.6h3.2V16l-1.6-1-1.6 1z',
  },
  recorder: { lines: [{ d: `M2 5.4h16v9.2H2zM4 17h12${disc(6.8, 10, 2.3)}${disc(13.2, 10, 2.3)}` }] },
  endpoint: {
    lines: [
      { d: disc(12, 10, 5.2), strokePx: 3.2 },
      { d: 'M1.6 3.6v12.8M1.6 10h4', strokePx: 2 },
    ],
  },
  tunnel: {
    lines: [{ d: 'M5 10h10', strokePx: 3.4 }],
    fill: 'M1.6 6.6h3.6v6.8H1.6zM14.8 6.6h3.6v6.8h-3.6z',
  },
  jacket: {
    lines: [
      { d: 'M.6 8.3h18.8M.6 11.7h18.8', strokePx: 1.8 },
      { d: 'M4.8 5h10.4M4.8 15h10.4' },
      { d: 'M4.6 3.6v12.8M15.4 3.6v12.8', strokePx: 2.6 },
    ],
  },
  cable: { lines: [{ d: 'M3.4 14.4V9.6h13.2V5.6' }], fill: `${disc(3.4, 16, 1.7)}M15 2.4h3.2v3.2H15z` },
  transport: {
    lines: [
      { d: 'M1 5.4h18M1 14.6h18', strokePx: 1.8 },
      {
        d: 'M3.4 7.2 5 5.4M7.6 7.2l1.6-1.8M11.8 7.2l1.6-1.8M16 7.2l1.6-1.8M2.4 14.6 4 12.8M6.6 14.6l1.6-1.8M10.8 14.6l1.6-1.8M15 14.6l1.6-1.8',
        strokePx: 1.2,
      },
    ],
  },
  site: { lines: [{ d: 'M2.4 4.6h15.2v12H2.4z', dash: '5 1.8 1 1.8' }], fill: 'M2.4 2.4h7v2.2h-7z' },
  note: { lines: [{ d: 'M2.6 17 8 9.4h10M9.6 6h8M9.6 3h8' }], fill: disc(2.6, 17, 1.3) },
};

export interface GlyphPlace {
  /** Top left corner. */
  readonly x: number;
  readonly y: number;
  readonly size: number;
  readonly colour: string;
  /** Stroke in the glyph's own square of 20; 1.5 in the interface. */
  readonly strokePx?: number;
}

/** A glyph at a place, in one colour. */
export const glyph = (name: GlyphName, place: GlyphPlace): Shape => {
  const { lines, fill } = glyphs[name];
  const scale = Math.round((place.size / 20) * 1000) / 1000;
  return group(
    [
      ...lines.map((line, i): Shape => ({
        ...shape('path', {
          d: line.d,
          fill: 'none',
          stroke: place.colour,
          strokeWidth: line.strokePx ?? place.strokePx ?? 1.6,
          strokeLinejoin: 'round',
          strokeDasharray: line.dash,
        }),
        key: `line-${i}`,
      })),
      fill !== undefined && { ...shape('path', { d: fill, fill: place.colour }), key: 'fill' },
    ],
    { attrs: { transform: `translate(${place.x} ${place.y}) scale(${scale})` } },
  );
};

/** The program's mark, a sagging cord between two plugs, in a box of 34 × 20. */
export const mark = (place: { readonly x: number; readonly y: number; readonly width: number }): Shape => {
  const plug = (x: number): Shape =>
    shape('rect', {
      x,
      y: 1.2,
      width: 7.6,
      height: 5.6,
      fill: paint('brass'),
      stroke: paint('ink'),
      strokeWidth: 1.6,
    });
  return group(
    [
      shape('path', {
        d: 'M6.5 5.5C9 18.5 25 18.5 27.5 5.5',
        fill: 'none',
        stroke: paint('ink'),
        strokeWidth: 4.6,
      }),
      shape('path', {
        d: 'M11.8 12.4c3 2.7 7.4 2.7 10.4 0',
        fill: 'none',
        stroke: paint('brass'),
        strokeWidth: 1.8,
        strokeLinecap: 'round',
      }),
      plug(2.5),
      plug(23.9),
    ],
    { attrs: { transform: `translate(${place.x} ${place.y}) scale(${place.width / 34})` } },
  );
};
