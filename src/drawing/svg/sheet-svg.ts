import type { Design } from '../../engine/model/design.ts';
import type { Decorations, Tone } from '../decorations.ts';
import { noDecorations } from '../decorations.ts';
import type { SheetGeometry } from '../geometry.ts';
import { balloonParts } from '../parts/balloon-part.ts';
import { bandPart } from '../parts/band-part.ts';
import { cablePart } from '../parts/cable-part.ts';
import { cutMarks } from '../parts/cuts.ts';
import { devicePart } from '../parts/device-part.ts';
import type { DrawingFacts, TitleBlockFacts } from '../parts/drawing-facts.ts';
import { drawingFacts } from '../parts/drawing-facts.ts';
import { ghostParts } from '../parts/ghost-part.ts';
import { hopMarks } from '../parts/hop-marks.ts';
import { jacketPart } from '../parts/jacket-part.ts';
import { legendPart } from '../parts/legend-part.ts';
import type { Level } from '../parts/level-of-detail.ts';
import type { Look } from '../parts/look.ts';
import { loopChevrons } from '../parts/loop-chevrons.ts';
import { pinnedNotePart, standingNotesPart } from '../parts/notes-part.ts';
import { overhangParts } from '../parts/overhang-part.ts';
import { framePart, paperPart } from '../parts/paper-part.ts';
import { ringPart } from '../parts/ring-part.ts';
import { sitePart } from '../parts/site-part.ts';
import { tagParts } from '../parts/tag-part.ts';
import { titleBlockPart } from '../parts/title-block-part.ts';
import { trunkPart } from '../parts/trunk-part.ts';
import { route } from '../routing/route.ts';
import type { Shape } from '../shape.ts';
import type { Theme } from '../theme/tokens.ts';
import type { Layer } from './standalone-svg.ts';
import { standaloneSvg } from './standalone-svg.ts';

export interface SheetView {
  readonly level: Level;
  readonly decorations: Decorations;
  readonly facts: DrawingFacts;
}

const present = (shapes: readonly (Shape | undefined)[]): readonly Shape[] =>
  shapes.filter((shape): shape is Shape => shape !== undefined);

/** The whole sheet, back to front. */
export const sheetShapes = (geometry: SheetGeometry, view: SheetView): readonly Layer[] => {
  const { facts } = view;
  const look: Look = { level: view.level, decorations: view.decorations };
  const { sheet } = geometry;
  return [
    { name: 'paper', shapes: [paperPart(sheet)] },
    { name: 'frame', shapes: [framePart(sheet, look.level)] },
    { name: 'sites', shapes: geometry.sites.map((site) => sitePart(site, facts, look)) },
    { name: 'bands', shapes: geometry.bands.map((band) => bandPart(band, sheet, facts, look)) },
    { name: 'cables', shapes: geometry.cables.map((cable) => cablePart(cable, look)) },
    {
      name: 'cords',
      shapes: [
        ...geometry.trunks.map((trunk) => trunkPart(trunk, geometry, facts, look)),
        ...geometry.jackets.map((jacket) => jacketPart(jacket, geometry, facts, look)),
      ],
    },
    { name: 'devices', shapes: geometry.devices.map((device) => devicePart(device, facts, look)) },
    { name: 'rings', shapes: geometry.rings.map((ring) => ringPart(ring, facts, look)) },
    {
      name: 'furniture',
      shapes: present([
        standingNotesPart(geometry, facts, look),
        ...geometry.notes.map(({ id }) => pinnedNotePart(id, geometry, facts, look)),
        legendPart(sheet, facts.segments, look.level),
        titleBlockPart(sheet, facts.titleBlock, look.level),
      ]),
    },
    {
      name: 'faults',
      shapes: [
        ...loopChevrons(geometry, look),
        ...cutMarks(geometry, facts, look),
        ...overhangParts(geometry, facts, look),
        ...ghostParts(geometry, look),
      ],
    },
    {
      name: 'balloons',
      shapes: [
        ...tagParts(geometry, facts, look),
        ...hopMarks(geometry, facts, look),
        ...balloonParts(geometry, facts, look),
      ],
    },
  ];
};

export interface SheetSvgOptions {
  readonly theme: Theme;
  /** Ids of the segments each tunnel carries, as the engine follows them. */
  readonly tunnelSegments: ReadonlyMap<string, readonly string[]>;
  readonly level?: Level;
  readonly decorations?: Decorations;
  readonly titleBlock?: Partial<TitleBlockFacts>;
  /** Faces of Work Sans by weight as data URLs; without them the file names the font only. */
  readonly fonts?: { readonly [weight: number]: string };
  /** What `route` answers for the design, where the caller has it already. */
  readonly geometry?: SheetGeometry;
}

const pencilTones: ReadonlySet<Tone> = new Set(['selected', 'hovered', 'lit', 'dimmed']);

/** What may stand on paper: findings' marks and failures, but no selection, lamp, ghost or hidden segment. */
const printable = (decorations: Decorations): Decorations => ({
  ...decorations,
  tones: Object.fromEntries(
    Object.entries(decorations.tones).map(([key, tones]) => [
      key,
      tones.filter((tone) => !pencilTones.has(tone)),
    ]),
  ),
  ghosts: [],
  hops: [],
  hiddenSegments: [],
});

/** A whole sheet as one SVG file that needs nothing else: colours written in, fonts embedded where given. */
export const sheetSvgText = (design: Design, options: SheetSvgOptions): string => {
  const geometry = options.geometry ?? route(design);
  const decorations = options.decorations ?? noDecorations;
  const layers = sheetShapes(geometry, {
    level: options.level ?? 'near',
    decorations:
      options.theme === 'print' || options.theme === 'print-colour' ? printable(decorations) : decorations,
    facts: drawingFacts(design, options.tunnelSegments, options.titleBlock),
  });
  const { width, height } = geometry.sheet;
  return standaloneSvg(layers, {
    title: design.meta.title,
    theme: options.theme,
    viewBox: { width, height },
    size: { width, height },
    ...(options.fonts === undefined ? {} : { fonts: options.fonts }),
  });
};
