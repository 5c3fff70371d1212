import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { noDecorations } from '#drawing/decorations.ts';
import type { Point, SheetGeometry } from '#drawing/geometry.ts';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { pathAt, pathLength } from '#drawing/path-geometry.ts';
import { route } from '#drawing/routing/route.ts';
import { sheetShapes } from '#drawing/svg/sheet-shapes.ts';
import { toSvgText } from '#drawing/svg/to-svg-text.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { hubDesign } from '../../support/designs.ts';
import {
  closeRuns,
  coveredWords,
  crookedRuns,
  misplacedFrames,
  overPlates,
  reversed,
  throughSolid,
} from './sheet-checks.ts';

const tidied = (design: Design): Design => applyPatch(design, tidy(design));

describe.each([9, 12, 30, 60])('a hub of %i', (spokes) => {
  const design = tidied(hubDesign(spokes, { segments: ['a', 'b'], hub: 'ha-pair' }));
  const geometry: SheetGeometry = route(design);
  const [trunk] = geometry.trunks;
  const ring = geometry.rings.find((r) => r.endpoint === 'lo-s0')!;

  it('collapses its comb to one bar that counts its tunnels', () => {
    expect(ring.manifold?.tunnels).toBe(2 * spokes);
    expect(ring.comb).toBeUndefined();
    expect(ring.groups).toHaveLength(spokes);
    expect(new Set(ring.groups.map(({ mouth }) => `${mouth.x} ${mouth.y}`)).size).toBe(1);
  });
  it('leads every jacket into the one trunk', () => {
    expect(geometry.trunks).toHaveLength(1);
    expect(trunk!.endpoint).toBe('lo-s0');
    expect(trunk!.isProtected).toBe(true);
    expect(new Set(trunk!.pieces.flatMap((piece) => piece.jackets))).toEqual(
      new Set(Object.keys(design.associations)),
    );
  });
  it('begins every branch at the edge of the trunk and ends it at its own mouth', () => {
    const samples = trunk!.pieces.flatMap(({ path, width }) => {
      const length = pathLength(path);
      return Array.from({ length: Math.ceil(length / 4) + 1 }, (_, i) => ({
        at: pathAt(path, i * 4),
        width,
      }));
    });
    const offTrunk = (p: Point): number =>
      Math.min(...samples.map(({ at, width }) => Math.abs(Math.hypot(at.x - p.x, at.y - p.y) - width / 2)));
    for (const jacket of geometry.jackets) {
      expect(jacket.noWay).toBe(false);
      expect(jacket.polyline).toHaveLength(2);
      expect(offTrunk(jacket.polyline[0]!), jacket.id).toBeLessThan(5);
      const far = geometry.rings
        .flatMap((r) => r.groups)
        .find((group) => group.jacket === jacket.id && group.end === 'b')!;
      expect(jacket.polyline.at(-1)).toEqual(far.mouth);
      expect(jacket.cuffs).toHaveLength(2);
      for (const lane of jacket.lanes) {
        expect(lane.tails.a).toEqual([]);
        expect(lane.tails.b.length).toBe(2);
      }
    }
  });
  it('thins as jackets part: at its beginning all are in it, at its ends one', () => {
    const atMouth = trunk!.pieces.filter(
      ({ path }) => path[0]!.to.x === ring.groups[0]!.mouth.x && path[0]!.to.y === ring.groups[0]!.mouth.y,
    );
    expect(Math.max(...atMouth.map((piece) => piece.jackets.length))).toBe(spokes);
    expect(Math.min(...trunk!.pieces.map((piece) => piece.jackets.length))).toBe(1);
    const widths = trunk!.pieces.map((piece) => piece.width);
    expect(widths).toEqual([...widths].sort((a, b) => a - b));
  });
  it('has no crossing, nothing crowded, nothing over plates or words', () => {
    expect(geometry.jackets.flatMap((jacket) => jacket.crossings)).toEqual([]);
    expect(geometry.crowded).toEqual([]);
    expect([...closeRuns(geometry), ...throughSolid(geometry), ...overPlates(geometry)]).toEqual([]);
    expect([...misplacedFrames(geometry), ...coveredWords(geometry)]).toEqual([]);
    for (const { path, width } of trunk!.pieces) {
      const length = pathLength(path);
      for (let along = 0; along <= length; along += 6) {
        const p = pathAt(path, along);
        for (const device of geometry.devices)
          for (const { rect } of device.plates) {
            const dx = Math.max(rect.x - p.x, p.x - rect.x - rect.width, 0);
            const dy = Math.max(rect.y - p.y, p.y - rect.y - rect.height, 0);
            expect(Math.hypot(dx, dy)).toBeGreaterThanOrEqual(width / 2 - 1);
          }
      }
    }
  });
});

it('eight groups still show their ferrules', () => {
  const geometry = route(tidied(hubDesign(8, { segments: ['a'] })));
  expect(geometry.trunks).toEqual([]);
  expect(geometry.rings.every((ring) => ring.manifold === undefined)).toBe(true);
});

it('bare tunnels share a trunk that says so', () => {
  const geometry = route(tidied(hubDesign(9, { segments: ['a'], join: { protectedBy: false } })));
  expect(geometry.trunks.map((trunk) => trunk.isProtected)).toEqual([false]);
});

it('a spoke thrown behind the hub leaves the trunk to the others and finds its own way, or says that it has none', () => {
  const design = tidied(hubDesign(12, { segments: ['a'] }));
  const at = design.layout.sites!['s5']!;
  const hub = design.layout.sites!['s0']!;
  const moved = applyPatch(design, {
    layout: {
      sites: { s5: { x: hub.x - 420, y: hub.y } },
      devices: Object.fromEntries(
        Object.entries(design.layout.devices!)
          .filter(([id]) => design.devices[id]!.site === 's5')
          .map(([id, p]) => [id, { x: p.x - at.x + hub.x - 420, y: p.y - at.y + hub.y }]),
      ),
    },
  });
  const geometry = route(moved);
  expect([...overPlates(geometry), ...crookedRuns(geometry)]).toEqual([]);
  expect(geometry.trunks[0]!.pieces.flatMap((piece) => piece.jackets)).not.toContain('as-s0-s5');
});

it('comes out the same with every list reversed', () => {
  const design = tidied(hubDesign(11, { segments: ['a'] }));
  expect(route(reversed(design))).toEqual(route(design));
});

it('draws the trunk under its branches, with a hairline for each segment', () => {
  const design = tidied(hubDesign(12, { segments: ['a', 'b'] }));
  const geometry = route(design);
  const segments = new Map(
    Object.keys(design.tunnels).map((id) => [id, [id.endsWith('-a') ? 'a' : 'b']] as const),
  );
  const facts = drawingFacts(design, segments);
  const layers = sheetShapes(geometry, { level: 'near', decorations: noDecorations, facts });
  const cords = layers.find((layer) => layer.name === 'cords')!.shapes;
  expect(cords[0]!.key).toBe('trunk-endpoints/lo-s0');
  expect(cords).toHaveLength(1 + geometry.jackets.length);
  const text = toSvgText([cords[0]!]);
  const pieces = geometry.trunks[0]!.pieces.length;
  expect(text.match(/var\(--jacket\)/g)).toHaveLength(pieces);
  expect(text.match(/var\(--seg-a\)/g)).toHaveLength(pieces);
  expect(text.match(/var\(--seg-b\)/g)).toHaveLength(pieces);
});

it('a site that tidying collapsed stands in order when it is opened', () => {
  const design = tidied(hubDesign(26, { segments: ['a'] }));
  expect(design.layout.sites!['s3']!.collapsed).toBe(true);
  expect(route(design).devices.map((device) => device.id)).not.toContain('h-s3-a');
  const opened = applyPatch(design, { layout: { sites: { s3: { collapsed: null } } } });
  const devices = route(opened).devices.filter((device) => opened.devices[device.id]!.site === 's3');
  expect(devices.map((device) => device.id)).toEqual(['fw-s3', 'h-s3-a', 'sw-s3']);
  devices.forEach((device, i) => {
    for (const other of devices.slice(i + 1)) {
      const apart =
        device.rect.x + device.rect.width <= other.rect.x ||
        other.rect.x + other.rect.width <= device.rect.x ||
        device.rect.y + device.rect.height <= other.rect.y ||
        other.rect.y + other.rect.height <= device.rect.y;
      expect(apart, `${device.id} and ${other.id}`).toBe(true);
    }
  });
});
