import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import type { RingGeometry, SheetGeometry } from '#drawing/geometry.ts';
import { bundlesOf } from '#drawing/routing/bundles.ts';
import { plateSize } from '#drawing/routing/stands.ts';
import { route } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { ferriesDesign } from '../tidy/ferries.ts';
import { closeRuns, crookedRuns, overPlates, throughSolid, twistedTails } from './sheet-checks.ts';

const tidied = (design: Design): Design => applyPatch(design, tidy(design));
const changed = (design: Design, patch: unknown): Design => applyPatch(design, patch as MergePatch);
const ringAt = (geometry: SheetGeometry, endpoint: string): RingGeometry =>
  geometry.rings.find((ring) => ring.endpoint === endpoint)!;
const plain = tidied(pairDesign({ segments: ['a', 'b'] }));

describe('rings and combs', () => {
  it('stand 16 px off their plate and 21 px off a bracket', () => {
    const geometry = route(tidied(hubDesign(3, { segments: ['a'], hub: 'ha-pair' })));
    const hub = geometry.devices.find((d) => d.id === 'fw-s0')!;
    const spoke = geometry.devices.find((d) => d.id === 'fw-s1')!;
    expect(ringAt(geometry, 'lo-s0').centre.x - (hub.bracket!.rect.x + hub.bracket!.rect.width)).toBe(21);
    expect(spoke.rect.x - ringAt(geometry, 'lo-s1').centre.x).toBe(16);
    expect(ringAt(geometry, 'lo-s0').docksOn).toBe('bracket');
  });
  it('have no comb with a single tunnel', () => {
    expect(ringAt(route(tidied(pairDesign())), 'lo-s0').comb).toBeUndefined();
    expect(ringAt(route(plain), 'lo-s0').comb).toBeDefined();
  });
  it('keep ferrules of a group 25 px apart and groups 39 px', () => {
    const [ring] = route(tidied(hubDesign(2, { segments: ['a', 'b'] }))).rings;
    const ys = ring!.groups.flatMap((group) => group.ferrules.map((f) => f.rect.y));
    expect(ys.slice(1).map((y, i) => y - ys[i]!)).toEqual([25, 39, 25]);
  });
  it('grow their ferrules for numbers of seven and eight digits', () => {
    const wide = changed(plain, { tunnels: { 'tn-s0-s1-a': { a: { vni: 16_777_215 } } } });
    const widths = ringAt(route(wide), 'lo-s0').groups[0]!.ferrules.map((f) => f.rect.width);
    expect(Math.max(...widths)).toBe(88);
    expect(Math.min(...widths)).toBe(70);
  });
  it('turn ferrules into flags on an upright comb, apart from each other', () => {
    for (const side of ['top', 'bottom'] as const) {
      const design = changed(plain, { layout: { endpoints: { 'lo-s0': { side } } } });
      const geometry = route(design);
      const ring = ringAt(geometry, 'lo-s0');
      expect(ring.side).toBe(side);
      const [first, second] = ring.groups[0]!.ferrules;
      expect(second!.rect.x - first!.rect.x).toBe(78);
      expect(first!.capSide).toBe(side);
      expect([...crookedRuns(geometry), ...overPlates(geometry), ...twistedTails(geometry)]).toEqual([]);
      // Under this gateway stands its switch: no cord can leave there.
      expect(geometry.jackets[0]!.noWay).toBe(side === 'bottom');
    }
  });
  it('stack on one edge with room for both addresses', () => {
    const geometry = route(tidied(ferriesDesign({ hubOnBoth: true })));
    const [a, b] = geometry.rings.filter((ring) => ring.device === 'fw-ho');
    expect(a!.side).toBe(b!.side);
    expect(Math.abs(a!.centre.y - b!.centre.y)).toBeGreaterThanOrEqual(32);
  });
  it("dock a member's own endpoint on that member", () => {
    const base = hubDesign(2, { segments: ['a'], hub: 'ha-pair' });
    const design = tidied(changed(base, { endpoints: { 'lo-s0': { member: 2 } } }));
    const geometry = route(design);
    const ring = ringAt(geometry, 'lo-s0');
    expect(ring.docksOn).toBe('plate');
  });
  it("follow a person's order of the comb", () => {
    const design = tidied(hubDesign(3, { segments: ['a'] }));
    const order = ['as-s0-s3', 'as-s0-s2', 'as-s0-s1'];
    const geometry = route(changed(design, { layout: { endpoints: { 'lo-s0': { order } } } }));
    expect(ringAt(geometry, 'lo-s0').groups.map((group) => group.jacket)).toEqual(order);
    expect([...closeRuns(geometry), ...throughSolid(geometry)]).toEqual([]);
  });
});

describe('bundles', () => {
  it('lay the tunnels of one association side by side and a bare tunnel alone', () => {
    expect(bundlesOf(plain).map((b) => [b.kind, b.id, b.tunnels.length])).toEqual([
      ['jacket', 'as-s0-s1', 2],
    ]);
    const bare = pairDesign({ segments: ['a', 'b'], join: { protectedBy: false } });
    expect(bundlesOf(bare).map((b) => [b.kind, b.id])).toEqual([
      ['bare', 'tn-s0-s1-a'],
      ['bare', 'tn-s0-s1-b'],
    ]);
  });
  it('turn a tunnel that was drawn the other way about, so that its lane still runs from its own end a', () => {
    const tunnel = plain.tunnels['tn-s0-s1-b']!;
    const design = changed(plain, { tunnels: { 'tn-s0-s1-b': { a: tunnel.b, b: tunnel.a } } });
    const geometry = route(design);
    const [jacket] = geometry.jackets;
    expect(jacket!.lanes).toHaveLength(2);
    const lane = jacket!.lanes.find((l) => l.tunnel === 'tn-s0-s1-b')!;
    const start = lane.path[0]!.to;
    const far = ringAt(geometry, 'lo-s1').groups[0]!.mouth;
    expect(Math.hypot(start.x - far.x, start.y - far.y)).toBeLessThan(12);
    const ferrule = ringAt(geometry, 'lo-s1').groups[0]!.ferrules.find((f) => f.tunnel === 'tn-s0-s1-b')!;
    expect(ferrule.end).toBe('a');
    expect(twistedTails(geometry)).toEqual([]);
  });
  it('show an association that carries nothing yet', () => {
    const empty = changed(plain, { tunnels: { 'tn-s0-s1-a': null, 'tn-s0-s1-b': null } });
    const [jacket] = route(empty).jackets;
    expect(jacket).toMatchObject({ id: 'as-s0-s1', lanes: [], noWay: false });
  });
  it('draw one jacket for each pair of endpoints that an association joins', () => {
    const design = changed(plain, {
      endpoints: { 'lo-s0-x': { device: 'fw-s0', name: 'lo-s0-x', ipv4: '10.255.9.1/32' } },
      tunnels: { 'tn-s0-s1-b': { a: { endpoint: 'lo-s0-x' } } },
    });
    const geometry = route(design);
    expect(geometry.jackets.map((jacket) => [jacket.id, jacket.part])).toEqual([
      ['as-s0-s1', 0],
      ['as-s0-s1', 1],
    ]);
    expect([...closeRuns(geometry), ...throughSolid(geometry)]).toEqual([]);
  });
  it('leave out tunnels that lead nowhere or back to their own ring', () => {
    const design = changed(plain, {
      tunnels: { 'tn-s0-s1-a': { b: { endpoint: 'lo-s0' } }, 'tn-s0-s1-b': { b: { endpoint: 'gone' } } },
    });
    expect(route(design).jackets.flatMap((jacket) => jacket.lanes)).toEqual([]);
  });
  it('mark the part of a bare cord that lies over an untrusted band', () => {
    const design = tidied(pairDesign({ segments: ['a'], join: { protectedBy: false } }));
    const [cord] = route(design).jackets;
    const limb = design.layout.transports!['coast']!.limbs[0]!;
    expect(cord!.kind).toBe('bare');
    expect(cord!.cuffs).toEqual([]);
    expect(cord!.overBand).toHaveLength(1);
    expect(cord!.overBand[0]![0]!.to.x).toBeCloseTo(limb.x, 0);
    expect(cord!.overBand[0]!.at(-1)!.to.x).toBeCloseTo(limb.x + limb.width, 0);
    const trusted = changed(design, { transports: { coast: { trusted: true } } });
    expect(route(trusted).jackets[0]!.overBand).toEqual([]);
  });
});

describe('cables', () => {
  it('draw all cables of one aggregation as one line', () => {
    const port = (number: number) => ({ number, role: 'lan', mode: 'trunk', aggregation: 'up' });
    const design = tidied(
      changed(pairDesign({ segments: ['a'] }), {
        devices: {
          'fw-s0': { ports: { lan1: { aggregation: 'down' }, lan2: { aggregation: 'down' } } },
          'sw-s0': { ports: { p1: { aggregation: 'up' }, p7: port(7) } },
        },
        links: {
          'cb-x': { kind: 'cable', a: { device: 'sw-s0', port: 'p7' }, b: { device: 'fw-s0', port: 'lan2' } },
        },
      }),
    );
    const cable = route(design).cables.find((c) => c.aggregated)!;
    expect([...cable.links].sort()).toEqual(['cb-s0-up1', 'cb-x']);
    expect(route(design).cables.filter((c) => c.links.includes('cb-x'))).toHaveLength(1);
  });
  it('run straight from a switch to its gateway and to a single host on each side', () => {
    for (const cable of route(plain).cables.filter((c) => c.landing === undefined))
      expect(cable.polyline, cable.links[0]).toHaveLength(2);
  });
  it('say at an HA pair that the address holds after failover', () => {
    const geometry = route(tidied(hubDesign(2, { segments: ['a'], hub: 'ha-pair' })));
    const labels = geometry.cables.filter((c) => c.links[0] === 'ld-s0-coast').map((c) => c.label!.text);
    expect(labels).toEqual(['198.51.100.10', '198.51.100.10 after failover']);
  });
  it('mirror a host that is cabled on its left edge', () => {
    const geometry = route(plain);
    const hosts = geometry.devices.filter((d) => d.kind === 'host');
    for (const host of hosts) expect(host.mirrored).toBe(host.pips[0]!.side === 'left');
    expect(hosts.some((host) => host.mirrored)).toBe(true);
  });
});

describe('plates', () => {
  it('grow with their names and addresses, and never below their usual size', () => {
    const host = plain.devices['h-s0-a']!;
    expect(plateSize(host)).toEqual({ width: 112, height: 42 });
    const long = changed(plain, {
      devices: { 'h-s0-a': { addresses: ['2001:db8:1234:5678:9abc:def0:1234:5678/64'] } },
    });
    expect(plateSize(long.devices['h-s0-a']!).width).toBeGreaterThan(250);
    expect(plateSize(plain.devices['fw-s0']!)).toEqual({ width: 136, height: 76 });
  });
  it('keep two devices apart in a tidied site even when one is wide', () => {
    const base = changed(pairDesign({ segments: ['a', 'b'] }), {
      devices: { 'h-s0-a': { addresses: ['2001:db8:1234:5678:9abc:def0:1234:5678/64'] } },
    });
    const geometry = route(tidied(base));
    expect([...overPlates(geometry), ...throughSolid(geometry)]).toEqual([]);
    expect(geometry.crowded).toEqual([]);
  });
});
