import type { Decorations } from '../decorations.ts';
import type { SheetGeometry } from '../geometry.ts';
import { balloonParts } from '../parts/balloon-part.ts';
import { bandPart } from '../parts/band-part.ts';
import { cablePart } from '../parts/cable-part.ts';
import { cutMarks } from '../parts/cuts.ts';
import { devicePart } from '../parts/device-part.ts';
import type { DrawingFacts } from '../parts/drawing-facts.ts';
import { ghostParts } from '../parts/ghost-part.ts';
import { hopMarks } from '../parts/hop-marks.ts';
import { jacketPart } from '../parts/jacket-part.ts';
import { legendPart } from '../parts/legend-part.ts';
import type { Level } from '../parts/level-of-detail.ts';
import type { Look } from '../parts/look.ts';
import { loopChevrons } from '../parts/loop-chevrons.ts';
import { pinnedNotePart, standingNotesPart } from '../parts/notes-part.ts';
import { overhangParts } from '../parts/overhang-part.ts';
import { flagPart } from '../parts/flag-part.ts';
import { framePart, paperPart } from '../parts/paper-part.ts';
import { ringPart } from '../parts/ring-part.ts';
import { sitePart } from '../parts/site-part.ts';
import { tagParts } from '../parts/tag-part.ts';
import { titleBlockPart } from '../parts/title-block-part.ts';
import { trunkPart } from '../parts/trunk-part.ts';
import type { Shape } from '../shape.ts';
import type { Layer } from './standalone-svg.ts';

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
    {
      name: 'devices',
      shapes: [
        ...geometry.devices.map((device) => devicePart(device, facts, look)),
        ...(geometry.flags ?? []).map((flag) => flagPart(flag, look)),
      ],
    },
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
