import Elk from 'elkjs/lib/elk.bundled.js';
import { describe, expect, it } from 'vitest';
import { tidyDevices, tidySheet, type LayOut } from '../../src/canvas/tidy-sheet.ts';
import { route } from '../../src/drawing/routing/route.ts';
import { unusualSites } from '../../src/drawing/tidy/elk-graph.ts';
import { applyPatch } from '../../src/engine/model/merge-patch.ts';
import { parseDesign } from '../../src/engine/model/parse-design.ts';
import { pairDesign } from '../support/designs.ts';

const elk = new Elk();
const layOut: LayOut = (graph) => elk.layout(graph);

const trunk = (number: number) => ({ number, role: 'lan', mode: 'trunk' }) as const;
/** A site with a second and a third switch in a chain: none of the drawing's own templates fits it. */
const chained = applyPatch(pairDesign(), {
  devices: {
    'sw-s0': { ports: { up: trunk(40) } },
    'sw-mid': { kind: 'switch', site: 's0', name: 'sw-mid', ports: { p1: trunk(1), p2: trunk(2) } },
    'sw-far': { kind: 'switch', site: 's0', name: 'sw-far', ports: { p1: trunk(1) } },
  },
  links: {
    x1: { kind: 'cable', a: { device: 'sw-s0', port: 'up' }, b: { device: 'sw-mid', port: 'p1' } },
    x2: { kind: 'cable', a: { device: 'sw-mid', port: 'p2' }, b: { device: 'sw-far', port: 'p1' } },
  },
});

const overlaps = (design: typeof chained): number => {
  const rects = route(design).devices.map((device) => device.rect);
  return rects.flatMap((a, i) =>
    rects
      .slice(i + 1)
      .filter(
        (b) => a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height,
      ),
  ).length;
};

describe('tidying with elkjs', () => {
  it('asks it for the sites that no template fits, and for no others', async () => {
    const asked: string[] = [];
    const patch = await tidySheet(chained, (graph) => {
      asked.push(graph.id);
      return layOut(graph);
    });
    expect(asked).toHaveLength(1);
    expect(unusualSites(chained).map((site) => site.id)).toEqual(['s0']);
    const after = applyPatch(chained, patch);
    expect(parseDesign(after).ok).toBe(true);
    expect(Object.keys(after.layout.devices!)).toHaveLength(Object.keys(chained.devices).length);
    expect(overlaps(after)).toBe(0);
  });

  it('gives the same sheet every time', async () => {
    expect(await tidySheet(chained, layOut)).toEqual(await tidySheet(chained, layOut));
  });

  it('lays out a selection without moving anything else', async () => {
    const placed = applyPatch(chained, await tidySheet(chained, layOut));
    const chosen = ['sw-s0', 'sw-mid', 'sw-far'];
    const heap = applyPatch(placed, {
      layout: { devices: Object.fromEntries(chosen.map((id) => [id, { x: 60, y: 600 }])) },
    });
    expect(overlaps(heap)).toBeGreaterThan(0);
    const after = applyPatch(heap, await tidyDevices(heap, chosen, layOut));
    expect(overlaps(after)).toBe(0);
    for (const [id, at] of Object.entries(heap.layout.devices!))
      if (!chosen.includes(id)) expect(after.layout.devices![id]).toEqual(at);
  });
});
