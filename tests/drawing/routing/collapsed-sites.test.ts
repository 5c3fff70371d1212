import { describe, expect, it } from 'vitest';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { sitePart } from '#drawing/parts/site-part.ts';
import { noDecorations } from '#drawing/decorations.ts';
import { overlap } from '#drawing/routing/rects.ts';
import { route } from '#drawing/routing/route.ts';
import { toSvgText } from '#drawing/svg/to-svg-text.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { tidySite } from '#drawing/tidy/tidy-site.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { hubDesign } from '../../support/designs.ts';

const plan = hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] });
const design = applyPatch(plan, tidy(plan));
const collapse = (of: Design, site: string): Design =>
  applyPatch(of, { layout: { sites: { [site]: { collapsed: true } } } });
const frameOf = (of: Design, site: string) => route(of).sites.find(({ id }) => id === site)!.rect;
const drawnIn = (of: Design, site: string): readonly string[] =>
  route(of)
    .devices.map(({ id }) => id)
    .filter((id) => of.devices[id]!.site === site);
const noEndpoints = (of: Design, site: string): Design => {
  const gone = Object.keys(of.endpoints).filter((id) => of.devices[of.endpoints[id]!.device]!.site === site);
  const without = (collection: 'tunnels' | 'associations') =>
    Object.fromEntries(Object.keys(of[collection]).map((id) => [id, null]));
  return applyPatch(of, {
    endpoints: Object.fromEntries(gone.map((id) => [id, null])),
    tunnels: without('tunnels'),
    associations: without('associations'),
    forwarders: Object.fromEntries(Object.keys(of.forwarders).map((id) => [id, null])),
  });
};

describe.each([
  ['a firewall', 's1'],
  ['an HA pair', 's0'],
])('a collapsed site of %s', (_kind, site) => {
  const closed = collapse(design, site);

  it('keeps the gateway that its cords end on, and its frame close round that', () => {
    expect(drawnIn(closed, site)).toEqual([site === 's0' ? 'fw-s0' : 'fw-s1']);
    const [before, after] = [frameOf(design, site), frameOf(closed, site)];
    expect(after.width * after.height).toBeLessThan(before.width * before.height);
    const gateway = route(closed).devices.find(({ id }) => id === `fw-${site}`)!.rect;
    expect(after.x).toBeLessThan(gateway.x);
    expect(after.y + after.height).toBeGreaterThan(gateway.y + gateway.height);
  });

  it('has all its cords, and no cable to what is kept back', () => {
    const geometry = route(closed);
    const lanes = geometry.jackets.flatMap((jacket) => jacket.lanes.map(({ tunnel }) => tunnel));
    expect(lanes.sort()).toEqual(Object.keys(closed.tunnels).sort());
    const drawn = new Set(geometry.devices.map(({ id }) => id));
    for (const { links } of geometry.cables)
      for (const id of links) {
        const link = closed.links[id]!;
        if (link.kind === 'cable') expect(drawn.has(link.a.device) && drawn.has(link.b.device)).toBe(true);
      }
  });

  it('shows the ports of cables to what is kept back, clear of all others', () => {
    const { pips } = route(closed).devices.find(({ id }) => id === `fw-${site}`)!;
    expect(pips.filter(({ cabled, shape }) => cabled && shape === 'square').length).toBeGreaterThan(0);
    pips.forEach((pip, i) => {
      for (const other of pips.slice(i + 1))
        expect(Math.hypot(pip.at.x - other.at.x, pip.at.y - other.at.y)).toBeGreaterThan(9);
    });
  });

  it('stays collapsed when the sheet is tidied, and comes out in order when it is opened', () => {
    const tidied = applyPatch(closed, tidy(closed));
    expect(parseDesign(tidied)).toMatchObject({ ok: true });
    expect(tidied.layout.sites![site]!.collapsed).toBe(true);
    const opened = applyPatch(tidied, { layout: { sites: { [site]: { collapsed: null } } } });
    const devices = route(opened).devices.filter(({ id }) => opened.devices[id]!.site === site);
    expect(devices).toHaveLength(
      Object.values(design.devices).filter((device) => device.site === site).length,
    );
    devices.forEach((device, i) => {
      for (const other of devices.slice(i + 1)) expect(overlap(device.rect, other.rect)).toBe(false);
    });
  });

  it('says what it keeps back', () => {
    const facts = drawingFacts(closed, new Map());
    const words = facts.keptBack[site]!;
    expect(words).toMatch(/^1 switch, \d hosts?$/);
    const shape = sitePart(
      route(closed).sites.find(({ id }) => id === site)!,
      facts,
      {
        level: 'near',
        decorations: noDecorations,
      },
    );
    expect(toSvgText([shape])).toContain(words);
    expect(facts.keptBack['s2']).toBeUndefined();
  });
});

it('a site whose gateway ends no cord collapses to a plate of its own', () => {
  const closed = collapse(noEndpoints(design, 's1'), 's1');
  expect(drawnIn(closed, 's1')).toEqual([]);
  const { x, y } = closed.layout.sites!['s1']!;
  expect(frameOf(closed, 's1')).toMatchObject({ x, y, width: 190 });
  expect(drawingFacts(closed, new Map()).keptBack['s1']).toMatch(/^1 firewall, 1 switch, \d hosts?$/);
  expect(applyPatch(closed, tidy(closed)).layout.sites!['s1']).toMatchObject({ collapsed: true, width: 190 });
});

describe('tidying one site', () => {
  const strewn = applyPatch(design, {
    layout: { devices: { 'h-s1-a': { x: 700, y: 60 }, 'sw-s1': { x: 720, y: 70 } } },
  });

  it('lays it out where its frame is, and moves nothing else', () => {
    const after = applyPatch(strewn, tidySite(strewn, route(strewn), 's1'));
    const [before, frame] = [frameOf(strewn, 's1'), frameOf(after, 's1')];
    expect(Math.abs(frame.x - before.x)).toBeLessThanOrEqual(12);
    expect(Math.abs(frame.y - before.y)).toBeLessThanOrEqual(12);
    const own = route(after).devices.filter(({ id }) => after.devices[id]!.site === 's1');
    own.forEach((device, i) => {
      for (const other of own.slice(i + 1)) expect(overlap(device.rect, other.rect)).toBe(false);
    });
    for (const [id, at] of Object.entries(strewn.layout.devices!))
      if (strewn.devices[id]!.site !== 's1') expect(after.layout.devices![id]).toEqual(at);
  });

  it('leaves a locked device, and all of a locked site', () => {
    const held = applyPatch(strewn, { layout: { devices: { 'sw-s1': { locked: true } } } });
    const after = applyPatch(held, tidySite(held, route(held), 's1'));
    expect(after.layout.devices!['sw-s1']).toEqual(held.layout.devices!['sw-s1']);
    const locked = applyPatch(strewn, { layout: { sites: { s1: { locked: true } } } });
    expect(tidySite(locked, route(locked), 's1')).toEqual({});
  });
});
