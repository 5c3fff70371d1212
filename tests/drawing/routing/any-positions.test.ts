import fc from 'fast-check';
import { describe, expect, it, vi } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { route, routeWhileDragging } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { ferriesDesign } from '../tidy/ferries.ts';
import { closeRuns, crookedRuns, overPlates, reversed, throughSolid } from './sheet-checks.ts';

const bases: readonly Design[] = [
  pairDesign({ segments: ['a', 'b', 'c'], hub: 'ha-pair' }),
  hubDesign(3, { segments: ['a', 'b'], hub: 'ha-pair' }),
  hubDesign(4, { segments: ['a'], join: { protectedBy: false } }),
  chainDesign(4, { segments: ['a', 'b'] }),
  meshDesign(4, { segments: ['a', 'b'] }),
  ferriesDesign(),
  ferriesDesign({ hubOnBoth: true }),
];
const tidied = bases.map((design) => applyPatch(design, tidy(design)));

const place = fc.record({
  x: fc.integer({ min: -200, max: 1700 }),
  y: fc.integer({ min: -100, max: 1100 }),
});
const sides = fc.constantFrom('left', 'right', 'top', 'bottom');
const share = fc.integer({ min: 0, max: 99 });

/** Sites thrown to new places with all that stands in them, single devices moved or forgotten, bands moved, rings pinned. */
const thrown: fc.Arbitrary<Design> = fc
  .record({
    base: fc.integer({ min: 0, max: bases.length - 1 }),
    sheet: fc.constantFrom('A3', 'A2', 'A1'),
    sites: fc.array(fc.record({ pick: share, to: place }), { maxLength: 4 }),
    devices: fc.array(fc.record({ pick: share, to: fc.option(place) }), { maxLength: 4 }),
    bands: fc.array(fc.record({ pick: share, to: fc.option(place), lying: fc.boolean() }), { maxLength: 1 }),
    pins: fc.array(fc.record({ pick: share, side: sides }), { maxLength: 2 }),
  })
  .map(({ base, sheet, sites, devices, bands, pins }) => {
    const design = tidied[base]!;
    const pickOf = (list: object, pick: number): string => {
      const ids = Object.keys(list).sort();
      return ids[pick % ids.length]!;
    };
    const moved: Record<string, unknown> = {};
    const frames: Record<string, unknown> = {};
    for (const { pick, to } of sites) {
      const id = pickOf(design.sites, pick);
      const from = design.layout.sites![id]!;
      frames[id] = to;
      for (const [device, at] of Object.entries(design.layout.devices!))
        if (design.devices[device]!.site === id)
          moved[device] = { x: at.x - from.x + to.x, y: at.y - from.y + to.y };
    }
    for (const { pick, to } of devices) moved[pickOf(design.devices, pick)] = to;
    const transports: Record<string, unknown> = {};
    for (const { pick, to, lying } of bands)
      transports[pickOf(design.transports, pick)] =
        to === null
          ? null
          : { limbs: [{ ...to, ...(lying ? { width: 900, height: 122 } : { width: 122, height: 700 }) }] };
    const endpoints = Object.fromEntries(
      pins.map(({ pick, side }) => [pickOf(design.endpoints, pick), { side }]),
    );
    return applyPatch(design, {
      layout: { sheet, sites: frames, devices: moved, transports, endpoints },
    } as MergePatch);
  });

const runs = { numRuns: 60 };
// Each run routes whole sheets anew.
vi.setConfig({ testTimeout: 120_000 });

describe('wherever things stand', () => {
  it('no cord passes over a faceplate, and what cannot pass says so', () => {
    fc.assert(
      fc.property(thrown, (design) => {
        const geometry = route(design);
        expect(overPlates(geometry)).toEqual([]);
        expect(crookedRuns(geometry)).toEqual([]);
        const told = new Set(geometry.crowded.filter((c) => c.what === 'no-way').flatMap((c) => c.ids));
        for (const jacket of geometry.jackets) expect(told.has(jacket.id)).toBe(jacket.noWay);
        for (const cable of geometry.cables) if (cable.noWay) expect(told.has(cable.links[0]!)).toBe(true);
        const lost = [...geometry.jackets.filter((j) => j.noWay).map((j) => j.id)];
        lost.push(...geometry.cables.filter((c) => c.noWay).map((c) => c.links[0]!));
        expect([...told].filter((id) => !lost.includes(id))).toEqual([]);
      }),
      runs,
    );
  });
  it('no cord or cable that has a way leads over ferrules, title block or legend', () => {
    fc.assert(
      fc.property(thrown, (design) => {
        expect(
          throughSolid(route(design)).filter((text) => !text.includes('plate of') && !text.includes('sync')),
        ).toEqual([]);
      }),
      runs,
    );
  });
  it('jackets overlap only where the drawing says that it is crowded', () => {
    fc.assert(
      fc.property(thrown, (design) => {
        const geometry = route(design);
        if (closeRuns(geometry).length > 0)
          expect(geometry.crowded.some((c) => c.what === 'overlap')).toBe(true);
      }),
      runs,
    );
  });
  it('the order of lists makes no difference', () => {
    fc.assert(
      fc.property(thrown, (design) => {
        expect(route(reversed(design))).toEqual(route(design));
      }),
      { numRuns: 25 },
    );
  });
  it('every tunnel, device and link is drawn', () => {
    fc.assert(
      fc.property(thrown, (design) => {
        const geometry = route(design);
        expect(geometry.jackets.flatMap((j) => j.lanes.map((l) => l.tunnel)).sort()).toEqual(
          Object.keys(design.tunnels).sort(),
        );
        expect(geometry.devices.map((d) => d.id)).toEqual(Object.keys(design.devices).sort());
        expect([...new Set(geometry.cables.flatMap((c) => c.links))].sort()).toEqual(
          Object.keys(design.links).sort(),
        );
        for (const device of geometry.devices)
          for (const value of [device.rect.x, device.rect.y, device.rect.width, device.rect.height])
            expect(Number.isFinite(value)).toBe(true);
      }),
      { numRuns: 25 },
    );
  });
});

describe('designs that are hardly there', () => {
  it('draws a design without any layout', () => {
    for (const design of bases) {
      const geometry = route(design);
      expect(geometry.devices.map((d) => d.id)).toEqual(Object.keys(design.devices).sort());
      expect(overPlates(geometry)).toEqual([]);
    }
  });
  it('draws what references nothing', () => {
    const design = tidied[1]!;
    const broken = applyPatch(design, {
      sites: { s1: null },
      devices: { 'fw-s2': null, 'sw-s3': null },
      transports: { coast: null },
      links: { 'ld-s0-coast': null },
    });
    const geometry = route(broken);
    expect(geometry.devices.map((d) => d.id)).toEqual(Object.keys(broken.devices).sort());
    expect(geometry.bands).toEqual([]);
  });
});

describe('dragging', () => {
  const moveSite = (design: Design, site: string, dx: number, dy: number): Design => {
    const from = design.layout.sites![site]!;
    return applyPatch(design, {
      layout: {
        sites: { [site]: { x: from.x + dx, y: from.y + dy } },
        devices: Object.fromEntries(
          Object.entries(design.layout.devices!)
            .filter(([id]) => design.devices[id]!.site === site)
            .map(([id, at]) => [id, { x: at.x + dx, y: at.y + dy }]),
        ),
      },
    });
  };

  it('ends in the same drawing after one step or forty', () => {
    for (const design of tidied) {
      const site = Object.keys(design.sites).sort().at(-1)!;
      let dragged = design;
      for (let step = 0; step < 40; step += 1) {
        dragged = moveSite(dragged, site, -9, 2);
        route(dragged);
      }
      expect(route(dragged)).toEqual(route(moveSite(design, site, -360, 80)));
    }
  });
  it('draws a clean sheet the same while dragging and on the drop, and never a cord over a plate', () => {
    for (const design of tidied) {
      expect(routeWhileDragging(design, design)).toEqual(route(design));
      const site = Object.keys(design.sites).sort().at(-1)!;
      for (let step = 1; step <= 12; step += 1)
        expect(overPlates(routeWhileDragging(moveSite(design, site, -40 * step, 11 * step), design))).toEqual(
          [],
        );
    }
  });
  it('while one site is dragged leaves jackets and cables between the others as they are', () => {
    for (const design of tidied) {
      const site = Object.keys(design.sites).sort().at(-1)!;
      const inSite = (device: string): boolean => design.devices[device]!.site === site;
      const before = route(design);
      const dragged = routeWhileDragging(moveSite(design, site, -4, 2), design);
      const away = before.jackets.filter(({ id }) => {
        const association = design.associations[id];
        return association !== undefined && !inSite(association.a.device) && !inSite(association.b.device);
      });
      for (const jacket of away)
        expect(dragged.jackets.find(({ id }) => id === jacket.id)!.polyline).toEqual(jacket.polyline);
      for (const cable of before.cables) {
        const link = design.links[cable.links[0]!]!;
        if (link.kind !== 'cable' || inSite(link.a.device) || inSite(link.b.device)) continue;
        expect(dragged.cables.find(({ links }) => links[0] === cable.links[0])!.polyline).toEqual(
          cable.polyline,
        );
      }
    }
  });
  it('keeps the ways of jackets that have nothing to do with what moves', () => {
    for (const design of tidied) {
      const host = Object.keys(design.devices).find((id) => design.devices[id]!.kind === 'host')!;
      const at = design.layout.devices![host]!;
      const nudged = applyPatch(design, { layout: { devices: { [host]: { x: at.x + 2, y: at.y + 1 } } } });
      expect(route(nudged).jackets).toEqual(route(design).jackets);
    }
  });
  it('lets a ring change sides as its device crosses the band', () => {
    const design = tidied[1]!;
    const before = route(design).rings.find((ring) => ring.device === 'fw-s1')!;
    const band = design.layout.transports!['coast']!.limbs[0]!;
    const frame = design.layout.sites!['s1']!;
    const across = moveSite(design, 's1', band.x - 420 - frame.x, 0);
    expect(before.side).toBe('left');
    expect(route(across).rings.find((ring) => ring.device === 'fw-s1')!.side).toBe('right');
  });
  it('gives back the very same drawing while nothing that is drawn changes', () => {
    const design = tidied[0]!;
    const renamed = applyPatch(design, { meta: { title: 'Another title' } });
    expect(route(renamed)).toBe(route(design));
    const moved = applyPatch(design, { notes: { n1: { text: 'Mind the tide', standing: true } } });
    expect(route(moved)).not.toBe(route(design));
  });
});
