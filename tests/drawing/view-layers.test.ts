import { describe, expect, it } from 'vitest';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { noDecorations } from '#drawing/decorations.ts';
import { route } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import type { ViewChoice, ViewLayer } from '#drawing/view-layers.ts';
import { partVisibility, visibleDecorations, visibleGeometry, wholeSheet } from '#drawing/view-layers.ts';
import { hubDesign, pairDesign } from '../support/designs.ts';

const tidied = (design: Design): Design => applyPatch(design, tidy(design));
const design = tidied(hubDesign(3, { segments: ['a', 'b'], hub: 'ha-pair' }));
const viewOf = (of: Design, view: ViewChoice) => partVisibility(of, tunnelSegments(indexNetwork(of)), view);
const only = (...layers: ViewLayer[]): ViewChoice => ({ layers });

const tunnelOf = (of: Design, segment: string): string =>
  [...tunnelSegments(indexNetwork(of))].find(([, segments]) => segments.includes(segment))![0];
const idOf = (collection: 'devices' | 'links', kind: string): string =>
  Object.entries(design[collection]).find(([, entry]) => entry.kind === kind)![0];
const hostOfB = Object.entries(design.devices).find(
  ([, device]) => device.kind === 'host' && device.segment === 'b',
)![0];
const [host, hub, cable, landing] = [
  idOf('devices', 'host'),
  idOf('devices', 'ha-pair'),
  idOf('links', 'cable'),
  idOf('links', 'landing'),
];
const [transport, endpoint, association] = (['transports', 'endpoints', 'associations'] as const).map(
  (collection) => Object.keys(design[collection])[0]!,
) as [string, string, string];

describe('the layers of a sheet', () => {
  it.each([
    // layer, host, gateway, cable, landing, transport, endpoint, association, tunnel
    ['cabling', 'shown', 'shown', 'shown', 'shown', 'faded', 'hidden', 'hidden', 'hidden'],
    ['underlay', 'faded', 'shown', 'hidden', 'shown', 'shown', 'hidden', 'hidden', 'hidden'],
    ['overlay', 'faded', 'shown', 'hidden', 'hidden', 'faded', 'shown', 'shown', 'shown'],
  ] as const)('of the %s show its own parts on faded ground', (layer, ...expected) => {
    const visibilityOf = viewOf(design, only(layer));
    expect([
      visibilityOf({ collection: 'devices', id: host }),
      visibilityOf({ collection: 'devices', id: hub }),
      visibilityOf({ collection: 'links', id: cable }),
      visibilityOf({ collection: 'links', id: landing }),
      visibilityOf({ collection: 'transports', id: transport }),
      visibilityOf({ collection: 'endpoints', id: endpoint }),
      visibilityOf({ collection: 'associations', id: association }),
      visibilityOf({ collection: 'tunnels', id: tunnelOf(design, 'a') }),
    ]).toEqual(expected);
  });

  it('together show everything, and so does a choice of none', () => {
    for (const view of [wholeSheet, only()]) {
      const visibilityOf = viewOf(design, view);
      for (const collection of ['devices', 'links', 'transports', 'endpoints', 'tunnels'] as const)
        for (const id of Object.keys(design[collection]))
          expect(visibilityOf({ collection, id }), `${collection} ${id}`).toBe('shown');
    }
  });

  it('leave every plate, band and site in its place', () => {
    const whole = route(design);
    const cabling = visibleGeometry(whole, viewOf(design, only('cabling')));
    expect(cabling.jackets).toEqual([]);
    expect(cabling.rings).toEqual([]);
    expect(cabling.devices).toEqual(whole.devices);
    expect(cabling.bands).toEqual(whole.bands);
    expect(cabling.cables).toEqual(whole.cables);
  });

  it('show a note as what it speaks of', () => {
    const noted = applyPatch(design, {
      notes: {
        pinned: {
          text: 'No jumbo frames here',
          target: { collection: 'tunnels', id: tunnelOf(design, 'a') },
        },
        standing: { text: 'Verify on your equipment' },
      },
    });
    const visibilityOf = viewOf(noted, only('cabling'));
    expect(visibilityOf({ collection: 'notes', id: 'pinned' })).toBe('hidden');
    expect(visibilityOf({ collection: 'notes', id: 'standing' })).toBe('shown');
  });
});

describe('a choice of segments', () => {
  const chosen = viewOf(design, { layers: wholeSheet.layers, segments: ['b'] });

  it('keeps the tunnels that carry one of them, with their associations and endpoints', () => {
    expect(chosen({ collection: 'tunnels', id: tunnelOf(design, 'b') })).toBe('shown');
    expect(chosen({ collection: 'tunnels', id: tunnelOf(design, 'a') })).toBe('hidden');
    expect(chosen({ collection: 'associations', id: association })).toBe('shown');
    expect(chosen({ collection: 'endpoints', id: endpoint })).toBe('shown');
    const none = viewOf(design, { layers: wholeSheet.layers, segments: [] });
    expect(none({ collection: 'associations', id: association })).toBe('hidden');
    expect(none({ collection: 'endpoints', id: endpoint })).toBe('hidden');
  });

  it('makes ground of the hosts of other segments', () => {
    for (const [id, device] of Object.entries(design.devices))
      if (device.kind === 'host')
        expect(chosen({ collection: 'devices', id })).toBe(device.segment === 'b' ? 'shown' : 'faded');
  });

  it('takes the other lanes out of jackets and the other ferrules off combs, and moves nothing', () => {
    const whole = route(design);
    const left = visibleGeometry(whole, chosen);
    expect(left.jackets.map(({ path, width }) => ({ path, width }))).toEqual(
      whole.jackets.map(({ path, width }) => ({ path, width })),
    );
    for (const jacket of left.jackets) {
      expect(jacket.lanes).toHaveLength(1);
      expect(whole.jackets.flatMap(({ lanes }) => lanes)).toContainEqual(jacket.lanes[0]);
    }
    for (const ring of left.rings) {
      const places = ring.groups.flatMap(({ ferrules }) => ferrules);
      expect(places.every(({ tunnel }) => tunnelSegments(indexNetwork(design)).get(tunnel)![0] === 'b')).toBe(
        true,
      );
      if (ring.comb === undefined) continue;
      const [from, to] = ring.comb.spine;
      for (const { rect } of places) {
        expect(from.y).toBeLessThanOrEqual(rect.y + rect.height / 2);
        expect(to.y).toBeGreaterThanOrEqual(rect.y + rect.height / 2);
      }
    }
  });

  it('drops a jacket with nothing left in it', () => {
    const apart = tidied(pairDesign({ segments: ['a'] }));
    const view = viewOf(apart, { layers: wholeSheet.layers, segments: ['b'] });
    expect(visibleGeometry(route(apart), view).jackets).toEqual([]);
  });
});

describe('marks in a view', () => {
  it('stand on what is shown only', () => {
    const [a, b] = [tunnelOf(design, 'a'), tunnelOf(design, 'b')];
    const marked = {
      ...noDecorations,
      cuts: [{ tunnel: a }, { tunnel: b }],
      loops: [
        { steps: [{ collection: 'tunnels' as const, id: a, direction: 'a-to-b' as const }] },
        { steps: [{ collection: 'tunnels' as const, id: b, direction: 'a-to-b' as const }] },
      ],
      overhangs: [{ tunnel: a, end: 'a' as const, packetBytes: 1604, mtuBytes: 1500 }],
      balloons: [
        {
          number: 1,
          severity: 'blocking' as const,
          waived: false,
          at: { collection: 'tunnels' as const, id: a },
        },
        {
          number: 2,
          severity: 'blocking' as const,
          waived: false,
          at: { collection: 'devices' as const, id: hostOfB },
        },
      ],
    };
    const left = visibleDecorations(marked, viewOf(design, { layers: ['overlay'], segments: ['b'] }));
    expect(left.cuts).toEqual([{ tunnel: b }]);
    expect(left.loops).toEqual([marked.loops[1]]);
    expect(left.overhangs).toEqual([]);
    expect(left.balloons.map(({ number }) => number)).toEqual([2]);
    expect(visibleDecorations(marked, viewOf(design, wholeSheet))).toEqual(marked);
  });
});
