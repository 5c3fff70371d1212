import ElkConstructor from 'elkjs';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { route } from '#drawing/routing/route.ts';
import type { ElkGraph } from '#drawing/tidy/elk-graph.ts';
import { elkGraphOf, positionsFromElk, selectionGraph, unusualSites } from '#drawing/tidy/elk-graph.ts';
import { tidySelection } from '#drawing/tidy/tidy-selection.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { hubDesign } from '../../support/designs.ts';
import { coveredCables, misplacedFrames, overPlates, throughSolid } from '../routing/sheet-checks.ts';

const lay = async (graph: ElkGraph): Promise<ElkGraph> => {
  const elk = new ElkConstructor();
  return (await elk.layout(structuredClone(graph) as never)) as unknown as ElkGraph;
};

/** A hub whose first spoke has two switches in a ring of cables with its gateway, and hosts on both. */
const withRing = (): Design => {
  const base = hubDesign(3, { segments: ['a'] });
  const port = (number: number) => ({ number, role: 'lan' as const, mode: 'trunk' as const });
  return applyPatch(base, {
    devices: {
      'fw-s1': { ports: { lan2: { number: 3, role: 'lan', mode: 'trunk' } } },
      'sw-s1': { ports: { p8: port(8), p9: { number: 9, role: 'lan', mode: 'access' } } },
      'sw-s1-b': {
        kind: 'switch',
        site: 's1',
        name: 'sw-s1-b',
        ports: { p1: port(1), p2: port(2), p3: { number: 3, role: 'lan', mode: 'access' } },
      },
      'h-s1-x': { kind: 'host', site: 's1', name: 'h-s1-x', ports: { p1: { number: 1, role: 'lan' } } },
      'h-s1-y': { kind: 'host', site: 's1', name: 'h-s1-y', ports: { p1: { number: 1, role: 'lan' } } },
    },
    links: {
      'cb-1': { kind: 'cable', a: { device: 'sw-s1', port: 'p8' }, b: { device: 'sw-s1-b', port: 'p1' } },
      'cb-2': { kind: 'cable', a: { device: 'sw-s1-b', port: 'p2' }, b: { device: 'fw-s1', port: 'lan2' } },
      'cb-3': { kind: 'cable', a: { device: 'sw-s1-b', port: 'p3' }, b: { device: 'h-s1-x', port: 'p1' } },
      'cb-4': { kind: 'cable', a: { device: 'sw-s1', port: 'p9' }, b: { device: 'h-s1-y', port: 'p1' } },
    },
  });
};

const clean = (design: Design): void => {
  const geometry = route(design);
  expect(misplacedFrames(geometry)).toEqual([]);
  expect([...overPlates(geometry), ...throughSolid(geometry)]).toEqual([]);
  expect(coveredCables(geometry)).toEqual([]);
  expect(geometry.crowded.filter((c) => c.what === 'no-way')).toEqual([]);
};

describe('sites that our own layouts do not cover', () => {
  it('are named, and only those', () => {
    expect(unusualSites(hubDesign(3)).map((graph) => graph.id)).toEqual([]);
    expect(unusualSites(withRing()).map((graph) => graph.id)).toEqual(['s1']);
  });
  it('get a plain placement without overlaps while no layout was computed', () => {
    const design = withRing();
    clean(applyPatch(design, tidy(design)));
  });
  it('take the layout that elkjs computed, gateway towards the transport', async () => {
    const design = withRing();
    const [graph] = unusualSites(design);
    const layout = positionsFromElk(graph!, await lay(elkGraphOf(graph!)));
    expect(Object.keys(layout.positions).sort()).toEqual(graph!.nodes.map((node) => node.id).sort());
    for (const node of graph!.nodes) {
      const at = layout.positions[node.id]!;
      expect(at.x + node.width + node.comb.beside).toBeLessThanOrEqual(layout.size.width + 0.5);
      expect(at.y + node.height).toBeLessThanOrEqual(layout.size.height + 0.5);
    }
    const gateway = layout.positions['fw-s1']!;
    for (const [id, at] of Object.entries(layout.positions))
      if (id !== 'fw-s1') expect(at.x).toBeLessThan(gateway.x);
    const tidied = applyPatch(design, tidy(design, { siteLayouts: { s1: layout } }));
    clean(tidied);
    // The site stands right of the band, so the layout is turned round.
    const at = tidied.layout.devices!;
    expect(at['fw-s1']!.x).toBeLessThan(at['sw-s1']!.x);
  });
  it('give the same layout every time', async () => {
    const [graph] = unusualSites(withRing());
    const once = positionsFromElk(graph!, await lay(elkGraphOf(graph!)));
    expect(positionsFromElk(graph!, await lay(elkGraphOf(graph!)))).toEqual(once);
  });
});

describe('tidying a selection', () => {
  it('moves the selected devices only, and keeps their corner', async () => {
    const base = withRing();
    const design = applyPatch(base, tidy(base));
    const ids = ['sw-s1', 'sw-s1-b', 'h-s1-x', 'h-s1-y'];
    const patch = tidySelection(design, ids, await lay(elkGraphOf(selectionGraph(design, ids))));
    const after = applyPatch(design, patch);
    expect(Object.keys((patch['layout'] as { devices: object }).devices).sort()).toEqual([...ids].sort());
    const least = (layout: Design['layout'], axis: 'x' | 'y'): number =>
      Math.min(...ids.map((id) => layout.devices![id]![axis]));
    expect(least(after.layout, 'x')).toBe(Math.round(least(design.layout, 'x')));
    expect(least(after.layout, 'y')).toBe(Math.round(least(design.layout, 'y')));
    expect(overPlates(route(after))).toEqual([]);
  });
  it('leaves locked devices alone', async () => {
    const base = withRing();
    const tidied = applyPatch(base, tidy(base));
    const design = applyPatch(tidied, { layout: { devices: { 'sw-s1': { locked: true } } } });
    const ids = ['sw-s1', 'sw-s1-b'];
    const patch = tidySelection(design, ids, await lay(elkGraphOf(selectionGraph(design, ids))));
    expect((patch['layout'] as { devices: object }).devices).not.toHaveProperty('sw-s1');
  });
  it('answers nothing when nothing is selected', () => {
    expect(tidySelection(hubDesign(2), [], { children: [] })).toEqual({});
  });
});
