import type { Design } from '../../engine/model/design.ts';
import type { SheetSize } from '../../engine/model/layout.ts';
import type { Decorations, Tone } from '../decorations.ts';
import { noDecorations } from '../decorations.ts';
import type { Rect, SheetGeometry } from '../geometry.ts';
import type { DrawingFacts, TitleBlockFacts } from '../parts/drawing-facts.ts';
import { drawSheet, sheetOfDesign } from '../sheets/draw-sheet.ts';
import { segmentsOnSheet, sheetFacts } from '../sheets/sheet-facts.ts';
import type { Shape } from '../shape.ts';
import { shape } from '../shape.ts';
import type { Layer } from '../svg/standalone-svg.ts';
import { sheetShapes } from '../svg/sheet-shapes.ts';
import { paint } from '../theme/paint.ts';
import type { Theme } from '../theme/tokens.ts';
import type { ViewChoice, VisibilityOf } from '../view-layers.ts';
import {
  fadedOpacity,
  partVisibility,
  viewLayers,
  visibleDecorations,
  visibleGeometry,
  wholeSheet,
} from '../view-layers.ts';
import { cautionLine } from './caution-line.ts';
import { pictureBox } from './paper-sizes.ts';
import { factsWithoutAddresses, geometryWithoutAddresses } from './without-addresses.ts';
import { fadedColours, pictureColours, withColours } from './written-colours.ts';

export interface PictureOptions {
  readonly look: Theme;
  /** Which sheet of several; absent: the first. */
  readonly number?: number;
  /** Ids of the segments each tunnel carries, as the engine follows them. */
  readonly tunnelSegments: ReadonlyMap<string, readonly string[]>;
  /** Which layers and segments; absent: the whole sheet. */
  readonly view?: ViewChoice;
  /** Absent: with addresses. */
  readonly addresses?: boolean;
  /** What the checks have to show; absent: a drawing without findings. */
  readonly decorations?: Decorations;
  readonly titleBlock?: Partial<TitleBlockFacts>;
  /** What `drawSheet` answers for it, where the caller has it already. */
  readonly geometry?: SheetGeometry;
}

/** A sheet ready to leave: shapes in plain colours from back to front, and what part of their world the paper holds. */
export interface SheetPicture {
  readonly title: string;
  readonly sheet: SheetSize;
  readonly box: Rect;
  readonly layers: readonly Layer[];
}

const pencilTones: ReadonlySet<Tone> = new Set(['selected', 'hovered', 'lit', 'dimmed']);

/** What may leave: findings' marks and failures, but no selection, lamp, ghost or hidden segment. */
const withoutPencil = (decorations: Decorations): Decorations => {
  const { hops: _hops, ...rest } = decorations;
  return {
    ...rest,
    tones: Object.fromEntries(
      Object.entries(decorations.tones).map(([key, tones]) => [
        key,
        tones.filter((tone) => !pencilTones.has(tone)),
      ]),
    ),
    ghosts: [],
    hiddenSegments: [],
  };
};

/** The legend names what the picture shows: chosen segments, and others that share a tunnel with them. */
const legendOf = (
  facts: DrawingFacts,
  geometry: SheetGeometry,
  view: ViewChoice,
): DrawingFacts['segments'] => {
  if (view.segments === undefined) return facts.segments;
  const named = new Set(view.segments);
  for (const { lanes } of geometry.jackets)
    for (const { tunnel } of lanes) for (const { id } of facts.tunnels[tunnel]?.segments ?? []) named.add(id);
  return facts.segments.filter(({ id }) => named.has(id));
};

/** What a picture leaves out of its sheet, in words; empty for the whole of it. */
const leftOutWords = (facts: DrawingFacts, view: ViewChoice, addresses: boolean): string => {
  const layers = viewLayers.filter((layer) => view.layers.length === 0 || view.layers.includes(layer));
  const letters = facts.segments.filter(({ id }) => view.segments?.includes(id)).map(({ letter }) => letter);
  const shown = [
    ...(layers.length < viewLayers.length ? [layers.join(' and ')] : []),
    ...(view.segments === undefined
      ? []
      : letters.length === 0
        ? ['no segment']
        : [`${letters.length === 1 ? 'segment' : 'segments'} ${letters.join(', ')}`]),
  ];
  return [
    ...(shown.length > 0 ? [`Shows ${shown.join(', ')} only`] : []),
    ...(addresses ? [] : ['Addresses left out']),
  ].join(' · ');
};

const fadedShapes =
  (visibilityOf: VisibilityOf, colours: ReturnType<typeof pictureColours>) =>
  (shape: Shape): Shape => {
    const ref = shape.data?.ref;
    const faded = ref !== undefined && visibilityOf(ref) === 'faded';
    return withColours(shape, faded ? fadedColours(colours, fadedOpacity) : colours);
  };

/**
 * A sheet as it leaves: the drawing of the screen at 100 % whatever is in view there, in a theme's colours, with a line of
 * caution under it. Blue pencil, lamp and selection stay behind.
 */
export const sheetPicture = (design: Design, options: PictureOptions): SheetPicture => {
  const { look, number = 1, tunnelSegments, view = wholeSheet, addresses = true } = options;
  const drawn = sheetOfDesign(design, number);
  const visibilityOf = partVisibility(drawn.design, segmentsOnSheet(drawn, tunnelSegments), view);
  const routed = visibleGeometry(options.geometry ?? drawSheet(design, number), visibilityOf);
  const geometry = addresses ? routed : geometryWithoutAddresses(routed);
  const all = sheetFacts(drawn, tunnelSegments, options.titleBlock);
  const facts = addresses ? all : factsWithoutAddresses(all);
  const decorations = visibleDecorations(withoutPencil(options.decorations ?? noDecorations), visibilityOf);
  const colours = pictureColours(look);
  const box = pictureBox(geometry.sheet);
  const layers = sheetShapes(geometry, {
    level: 'near',
    decorations,
    facts: { ...facts, segments: legendOf(facts, geometry, view) },
  });
  const coloured = layers.map(({ name, shapes }): Layer => {
    if (name === 'paper')
      return { name, shapes: [withColours(shape('rect', { ...box, fill: paint('paper') }), colours)] };
    return { name, shapes: shapes.map(fadedShapes(visibilityOf, colours)) };
  });
  const line = cautionLine(geometry.sheet, leftOutWords(all, view, addresses));
  return {
    title: drawn.of === 1 ? design.meta.title : `${design.meta.title}, sheet ${number} of ${drawn.of}`,
    sheet: geometry.sheet.size,
    box,
    layers: [...coloured, { name: 'caution', shapes: [withColours(line, colours)] }],
  };
};
