import type { JacketGeometry, Path, Point, RingGeometry, SheetGeometry } from '#drawing/geometry.ts';
import type { CordSegment, DrawingFacts, TunnelFacts } from '#drawing/parts/drawing-facts.ts';
import type { Shape } from '#drawing/shape.ts';
import { paletteOf } from '#drawing/theme/segment-tokens.ts';

export const segmentOf = (letter: string): CordSegment => ({
  id: letter.toLowerCase(),
  letter,
  palette: paletteOf(letter),
});

const line = (from: Point, to: Point): Path => [
  { kind: 'move', to: from },
  { kind: 'line', to },
];

/** A level jacket of 400 px whose lanes carry the given tunnels, its mouths at x 100 and 500, y 200. */
export const levelJacket = (
  id: string,
  kind: 'jacket' | 'bare',
  tunnels: readonly string[],
): JacketGeometry => {
  const offset = (k: number): number => (k - (tunnels.length - 1) / 2) * 16;
  return {
    id,
    kind,
    polyline: [
      { x: 100, y: 200 },
      { x: 500, y: 200 },
    ],
    radii: [],
    path: line({ x: 100, y: 200 }, { x: 500, y: 200 }),
    width: 16 * tunnels.length + 4,
    pitch: 16,
    lanes: tunnels.map((tunnel, k) => {
      const y = 200 + offset(k);
      return {
        tunnel,
        path: line({ x: 100, y }, { x: 500, y }),
        tails: { a: line({ x: 73, y }, { x: 100, y }), b: line({ x: 527, y }, { x: 500, y }) },
      };
    }),
    cuffs: [],
    crossings: [],
    overBand: [],
    noWay: false,
  };
};

export const ringWith = (endpoint: string, tunnel: string): RingGeometry => ({
  endpoint,
  device: 'fw',
  side: 'right',
  centre: { x: 0, y: 200 },
  docksOn: 'plate',
  groups: [
    {
      jacket: 'as',
      end: 'a',
      mouth: { x: 100, y: 200 },
      ferrules: [{ tunnel, end: 'a', rect: { x: 3, y: 189.5, width: 70, height: 21 }, capSide: 'right' }],
    },
  ],
  label: {
    text: '10.255.0.1',
    at: { x: 40, y: 230 },
    anchor: 'middle',
    rect: { x: 0, y: 216, width: 80, height: 18 },
  },
});

export const sheetWith = (parts: Partial<SheetGeometry>): SheetGeometry => ({
  sheet: {
    size: 'A3',
    width: 1280,
    height: 905,
    frame: { x: 32, y: 30, width: 1218, height: 847 },
    columns: 8,
    rows: 6,
    titleBlock: { x: 764, y: 763, width: 486, height: 114 },
    legend: { x: 32, y: 763, width: 585, height: 114 },
  },
  sites: [],
  bands: [],
  devices: [],
  rings: [],
  jackets: [],
  trunks: [],
  cables: [],
  notes: [],
  crowded: [],
  ...parts,
});

export const factsWith = (
  tunnels: { readonly [id: string]: Partial<TunnelFacts> },
  more: Partial<DrawingFacts> = {},
): DrawingFacts => ({
  segments: [],
  sites: {},
  keptBack: {},
  devices: {},
  transports: {},
  associations: {},
  endpoints: {},
  notes: {},
  forwarders: {},
  titleBlock: {
    legalOwner: 'Ternwick Net',
    createdBy: 'R. Halloran',
    status: 'Draft',
    documentType: 'L2 overlay design',
    approvedBy: '–',
    identification: 'SMF-L2-004',
    title: 'Terminals stretch',
    supplementaryTitle: 'Saltmarsh Ferries',
    dateOfIssue: '–',
    revision: 'C',
    language: 'en',
    sheet: '1/1',
  },
  tunnels: Object.fromEntries(
    Object.entries(tunnels).map(([id, tunnel]) => [
      id,
      { segments: [segmentOf('A')], vni: {}, endpoints: { a: 'lo-a', b: 'lo-b' }, ...tunnel },
    ]),
  ),
  ...more,
});

/** A shape with all shapes inside it. */
export const allShapes = (shape: Shape): readonly Shape[] => [
  shape,
  ...(shape.children ?? []).flatMap((child) => (typeof child === 'string' ? [] : allShapes(child))),
];

/** All that can be read in a shape; tooltips left out. */
export const wordsOf = (shape: Shape): readonly string[] =>
  allShapes(shape)
    .filter(({ el }) => el === 'text')
    .map(readable);

const readable = (shape: Shape): string =>
  (shape.children ?? [])
    .map((child) => (typeof child === 'string' ? child : child.el === 'title' ? '' : readable(child)))
    .join('');

/** The shapes of a group that have a key of this beginning. */
export const keyed = (shape: Shape, start: string): readonly Shape[] =>
  allShapes(shape).filter(({ key }) => key?.startsWith(start) ?? false);
