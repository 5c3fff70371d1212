import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { SheetGeometry } from '#drawing/geometry.ts';
import { route } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import {
  askewCrossings,
  closeRuns,
  coveredCables,
  coveredWords,
  crampedPips,
  crookedRuns,
  misplacedFrames,
  missedLandings,
  outsideBand,
  overPlates,
  reversed,
  throughSolid,
  tightCorners,
  touchingPaths,
  twistedTails,
} from '../routing/sheet-checks.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { ferriesDesign } from './ferries.ts';

const two = { segments: ['a', 'b'] } as const;
const three = { segments: ['a', 'b', 'c'] } as const;
const designs: { readonly [name: string]: () => Design } = {
  'a pair of sites': () => pairDesign(two),
  'a pair of sites with three segments and an HA pair': () => pairDesign({ ...three, hub: 'ha-pair' }),
  'a pair of sites with nine hosts each': () => pairDesign({ ...three, hostsPerSite: 3 }),
  'a pair of sites with a bare tunnel': () => pairDesign({ segments: ['a'], join: { protectedBy: false } }),
  'a hub of 2': () => hubDesign(2, two),
  'a hub of 3 with an HA pair': () => hubDesign(3, { ...two, hub: 'ha-pair' }),
  'a hub of 3 with bare tunnels': () => hubDesign(3, { ...two, join: { protectedBy: false } }),
  'a hub of 4 with four segments': () => hubDesign(4, { segments: ['a', 'b', 'c', 'd'] }),
  'a hub of 5': () => hubDesign(5, { segments: ['a'] }),
  'a hub of 8 with an HA pair': () => hubDesign(8, { ...two, hub: 'ha-pair' }),
  'a chain of 3': () => chainDesign(3, { segments: ['a'] }),
  'a chain of 5': () => chainDesign(5, two),
  'a mesh of 3': () => meshDesign(3, two),
  'a mesh of 4': () => meshDesign(4, two),
  'a mesh of 4 with an HA pair': () => meshDesign(4, { segments: ['a'], hub: 'ha-pair' }),
  'two transports': () => ferriesDesign(),
  'the demo with its notes': () => terminalsStretch('Terminals stretch', 'SMF-L2-004'),
  'two transports with the hub on both': () => ferriesDesign({ hubOnBoth: true }),
};

const tidied = (design: Design): Design => applyPatch(design, tidy(design));
const hubs = Object.keys(designs).filter((name) => name.startsWith('a hub') || name.startsWith('a pair'));

describe.each(Object.entries(designs))('%s, tidied', (name, make) => {
  const design = tidied(make());
  const geometry: SheetGeometry = route(design);

  it('is a valid layout with a place for everything', () => {
    const parsed = parseDesign(design);
    expect(parsed.ok ? [] : parsed.problems).toEqual([]);
    expect(Object.keys(design.layout.devices ?? {}).sort()).toEqual(Object.keys(design.devices).sort());
    expect(Object.keys(design.layout.sites ?? {}).sort()).toEqual(Object.keys(design.sites).sort());
    expect(Object.keys(design.layout.transports ?? {}).sort()).toEqual(Object.keys(design.transports).sort());
  });
  it('draws every association and cable', () => {
    expect(geometry.jackets.filter((j) => j.kind === 'jacket').map((j) => j.id)).toEqual(
      Object.keys(design.associations).sort(),
    );
    const drawnLinks = new Set(geometry.cables.flatMap((cable) => cable.links));
    expect(Object.keys(design.links).filter((id) => !drawnLinks.has(id))).toEqual([]);
    expect(new Set(geometry.jackets.flatMap((j) => j.lanes.map((l) => l.tunnel)))).toEqual(
      new Set(Object.keys(design.tunnels)),
    );
  });
  it('is not crowded anywhere', () => expect(geometry.crowded).toEqual([]));
  it('keeps parallel jackets apart by their widths', () => expect(closeRuns(geometry)).toEqual([]));
  it('keeps drawn middle lines apart between crossings', () => expect(touchingPaths(geometry)).toEqual([]));
  it('leads nothing over plates, ferrules, title block or legend', () =>
    expect([...throughSolid(geometry), ...overPlates(geometry)]).toEqual([]));
  it('runs level and upright only, and straight out of every mouth', () =>
    expect(crookedRuns(geometry)).toEqual([]));
  it('leads every jacket through its own band, clear of its edges', () =>
    expect(outsideBand(geometry)).toEqual([]));
  it('turns no corner tighter than the inner lane allows', () => expect(tightCorners(geometry)).toEqual([]));
  it('crosses at right angles', () => expect(askewCrossings(geometry).askew).toBe(0));
  it('keeps lanes in the order of their ferrules', () => expect(twistedTails(geometry)).toEqual([]));
  it('keeps frames on the sheet and off each other', () => expect(misplacedFrames(geometry)).toEqual([]));
  it('keeps pips apart', () => expect(crampedPips(geometry)).toEqual([]));
  it('lays no cable on another', () => expect(coveredCables(geometry)).toEqual([]));
  it('lands every WAN cable in its band', () => expect(missedLandings(geometry, design)).toEqual([]));
  it('keeps words free of everything', () => expect(coveredWords(geometry)).toEqual([]));
  it('has room for the words of its bands inside them', () => {
    for (const band of geometry.bands) expect(['in', 'turned']).toContain(band.text.mode);
  });
  it('comes out the same with every list reversed', () => {
    const turned = tidied(reversed(make()));
    expect(turned.layout).toEqual(design.layout);
    expect(route(reversed(design))).toEqual(geometry);
  });
  it('stays as it is when tidied again', () => expect(tidy(design)).toEqual({}));
  if (hubs.includes(name) || name === 'two transports' || name.startsWith('the demo'))
    it('has no crossing, being a hub', () =>
      expect(geometry.jackets.flatMap((j) => j.crossings)).toEqual([]));
});

it('a mesh of 4 crosses at most twice', () => {
  const geometry = route(tidied(meshDesign(4, two)));
  expect(geometry.jackets.flatMap((jacket) => jacket.crossings).length).toBeLessThanOrEqual(2);
});

it('words stand upright in the usual designs', () => {
  for (const design of [
    pairDesign(two),
    hubDesign(3, two),
    chainDesign(5, two),
    meshDesign(4, two),
    ferriesDesign(),
  ])
    for (const band of route(tidied(design)).bands) expect(band.text.mode).toBe('in');
});

it('a chain has no crossing', () => {
  expect(route(tidied(chainDesign(5, two))).jackets.flatMap((jacket) => jacket.crossings)).toEqual([]);
});

it('takes the smallest sheet that holds the design', () => {
  const sizeOf = (design: Design): string | undefined => tidied(design).layout.sheet;
  expect(sizeOf(pairDesign(two))).toBe('A3');
  expect(sizeOf(hubDesign(3, { ...two, hub: 'ha-pair' }))).toBe('A3');
  expect(sizeOf(meshDesign(4, two))).toBe('A3');
  expect(sizeOf(ferriesDesign())).toBe('A3');
  expect(sizeOf(terminalsStretch('Terminals stretch', 'SMF-L2-004'))).toBe('A3');
  expect(sizeOf(chainDesign(5, two))).toBe('A2');
  expect(sizeOf(hubDesign(8, { ...two, hub: 'ha-pair' }))).toBe('A1');
});

describe('spokes of a hub stand', () => {
  const order = (design: Design): readonly string[] => {
    const { layout } = tidied(design);
    return Object.keys(design.sites)
      .filter((id) => layout.sites![id]!.x > layout.transports!['coast']!.limbs[0]!.x)
      .sort((a, b) => layout.sites![a]!.y - layout.sites![b]!.y);
  };
  it('in the order in which their names are read', () => {
    const renamed = applyPatch(hubDesign(3, { segments: ['a'] }), {
      sites: { s1: { name: 'Pier 10' }, s2: { name: 'Pier 2' }, s3: { name: 'Marl' } },
    });
    expect(order(renamed)).toEqual(['s3', 's2', 's1']);
  });
  it('next to each other where a second transport joins them', () => {
    expect(order(ferriesDesign())).toEqual(['gul', 'orr', 'ske']);
    const renamed = applyPatch(ferriesDesign(), { sites: { orr: { name: 'Abbot Point' } } });
    expect(order(renamed)).toEqual(['orr', 'ske', 'gul']);
  });
});

it('leaves locked devices and sites where they are', () => {
  const design = tidied(hubDesign(3, two));
  const moved = applyPatch(design, {
    layout: { devices: { 'h-s1-a': { x: 333, y: 222, locked: true } }, sites: { s2: { locked: true } } },
  });
  const again = tidied(moved);
  expect(again.layout.devices?.['h-s1-a']).toEqual({ x: 333, y: 222, locked: true });
  expect(again.layout.sites?.['s2']).toEqual(moved.layout.sites?.['s2']);
});
