import { describe, expect, it } from 'vitest';
import type { Design, ElementRef } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { everySingleFailure, singlePointsOfFailure } from '#engine/outage/every-single-failure.ts';
import { outage } from '#engine/outage/outage.ts';
import type { Outage } from '#engine/outage/outage.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { largeDesign } from '../../support/large-design.ts';

const lose = (design: Design, ...failed: readonly ElementRef[]): Outage => {
  const answer = outage(design, failed, { pairs: true });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
};
const partedIn = ({ segments }: Outage): readonly string[] =>
  segments.flatMap(({ segment, pairs }) =>
    pairs!.map(({ a, b, lost }) => `${segment}: ${a.device} ${b.device} ${lost}`),
  );
const tunnel = (id: string): ElementRef => ({ collection: 'tunnels', id });

describe('an outage', () => {
  it('of a spoke’s tunnel parts that spoke from all others, on that segment only', () => {
    const found = lose(hubDesign(2, { segments: ['a', 'b'] }), tunnel('tn-s0-s1-a'));
    expect(partedIn(found)).toEqual(['a: h-s0-a h-s1-a both', 'a: h-s1-a h-s2-a both']);
    expect(found.segments[0]!.cutOff.map(({ device }) => device)).toEqual(['h-s1-a']);
    expect(found.pairCount).toBe(2);
    expect(found.tunnelsDown).toEqual([{ tunnel: 'tn-s0-s1-a', reasons: [] }]);
  });

  it('of an association parts all segments that it carries', () => {
    const found = lose(pairDesign({ segments: ['a', 'b'] }), { collection: 'associations', id: 'as-s0-s1' });
    expect(found.segments.map(({ segment, pairCount }) => [segment, pairCount])).toEqual([
      ['a', 1],
      ['b', 1],
    ]);
  });

  it('of a gateway, its site or its switch counts hosts that are in service, and names those that are not', () => {
    const chain = chainDesign(3);
    expect(partedIn(lose(chain, { collection: 'devices', id: 'fw-s1' }))).toEqual([
      'a: h-s0-a h-s1-a both',
      'a: h-s0-a h-s2-a both',
      'a: h-s1-a h-s2-a both',
    ]);
    const site = lose(chain, { collection: 'sites', id: 's1' });
    expect(partedIn(site)).toEqual(['a: h-s0-a h-s2-a both']);
    expect(site.gone).toEqual([{ site: 's1', device: 'h-s1-a' }]);
    expect(lose(chain, { collection: 'devices', id: 'h-s1-a' })).toMatchObject({
      segments: [],
      pairCount: 0,
    });
  });

  it('leaves hosts together that share a switch, and parts them with it', () => {
    const design = pairDesign({ hostsPerSite: 2 });
    const uplink = lose(design, { collection: 'links', id: 'cb-s0-up1' });
    expect(partedIn(uplink)).not.toContain('a: h-s0-a h-s0-a1 both');
    expect(uplink.pairCount).toBe(4);
    expect(partedIn(lose(design, { collection: 'devices', id: 'sw-s0' }))).toContain(
      'a: h-s0-a h-s0-a1 both',
    );
    expect(lose(design, { collection: 'devices', id: 'fw-s0', port: 'lan1' }).pairCount).toBe(4);
  });

  it('of one way where two are joined in the other direction loses that way alone', () => {
    const oneWay = applyPatch(hubDesign(2), {
      forwarders: {
        'br-s0-a': {
          circuits: { 'tn-s0-s1-a': { isolation: 'spokes' }, 'tn-s0-s2-a': { isolation: 'spokes' } },
        },
      },
    });
    expect(partedIn(lose(oneWay, tunnel('tn-s0-s1-a')))).toEqual(['a: h-s0-a h-s1-a both']);
    const policy: MergePatch = {
      forwarders: {
        'br-s1-a': {
          kind: 'cross-connect',
          policy: { out: { rank: 'a0', action: 'permit', direction: 'to-tunnel', frames: 'any' } },
        },
      },
    };
    expect(partedIn(lose(applyPatch(hubDesign(2), policy), tunnel('tn-s0-s1-a')))).toEqual([
      'a: h-s0-a h-s1-a b-to-a',
      'a: h-s1-a h-s2-a a-to-b',
    ]);
  });

  it('in a site without hosts parts its port', () => {
    const design = applyPatch(pairDesign(), { devices: { 'h-s1-a': null }, links: { 'cb-h-s1-a': null } });
    expect(partedIn(lose(design, tunnel('tn-s0-s1-a')))).toEqual(['a: h-s0-a sw-s1 both']);
    const own = lose(design, { collection: 'devices', id: 'sw-s1', port: 'p2' });
    expect(own).toMatchObject({ pairCount: 0, gone: [{ device: 'sw-s1', port: 'p2' }] });
  });

  it('of a transport falls back on the landings that come next, and says so', () => {
    const design = applyPatch(pairDesign(), {
      transports: { moor: { name: 'Moor line', kind: 'private-routed' } },
      links: {
        'ld-s0-moor': { kind: 'landing', device: 'fw-s0', port: 'wan1', transport: 'moor' },
        'ld-s1-moor': { kind: 'landing', device: 'fw-s1', port: 'wan1', transport: 'moor' },
      },
      associations: {
        'as-s0-s1': {
          a: { via: { second: { rank: 'b0', landing: 'ld-s0-moor' } } },
          b: { via: { second: { rank: 'b0', landing: 'ld-s1-moor' } } },
        },
      },
    });
    const coast = lose(design, { collection: 'transports', id: 'coast' });
    expect(coast.pairCount).toBe(0);
    expect(coast.tunnelsMoved).toMatchObject([
      {
        tunnel: 'tn-s0-s1-a',
        from: { transport: 'coast' },
        to: { transport: 'moor', landingA: 'ld-s0-moor' },
      },
    ]);
    const both = lose(
      design,
      { collection: 'transports', id: 'coast' },
      { collection: 'transports', id: 'moor' },
    );
    expect(both.pairCount).toBe(1);
    expect(both.tunnelsDown).toMatchObject([
      { tunnel: 'tn-s0-s1-a', reasons: [{ code: 'association-down', association: 'as-s0-s1' }] },
    ]);
  });

  it('of a cable opens the port that a spanning tree had blocked', () => {
    const ring = applyPatch(pairDesign({ hostsPerSite: 2 }), {
      devices: {
        'sw-s0': { settings: { spanningTree: { mode: 'on' } }, ports: { p8: trunk(8), p9: trunk(9) } },
        'sw-far': {
          kind: 'switch',
          site: 's0',
          name: 'sw-far',
          settings: { spanningTree: { mode: 'on' } },
          ports: { p1: trunk(1), p2: trunk(2), p3: { number: 3, role: 'lan', mode: 'access', vlan: 110 } },
        },
      },
      links: {
        'cb-ring-1': {
          kind: 'cable',
          a: { device: 'sw-s0', port: 'p8' },
          b: { device: 'sw-far', port: 'p1' },
        },
        'cb-ring-2': {
          kind: 'cable',
          a: { device: 'sw-s0', port: 'p9' },
          b: { device: 'sw-far', port: 'p2' },
        },
        'cb-h-s0-a1': { b: { device: 'sw-far', port: 'p3' } },
      },
    });
    const links = ['cb-ring-1', 'cb-ring-2'].map((id): ElementRef => ({ collection: 'links', id }));
    for (const one of links) expect(lose(ring, one).pairCount).toBe(0);
    expect(lose(ring, ...links).segments[0]!.cutOff).toMatchObject([{ device: 'h-s0-a1' }]);
  });

  it('refuses what the design doesn’t hold and what can’t fail, naming field and value', () => {
    const design = hubDesign(1, { hub: 'ha-pair' });
    expect(
      outage(design, [
        { collection: 'tunnels', id: 'tn-none' },
        { collection: 'segments', id: 'a' },
        { collection: 'devices', id: 'fw-s1', member: 2 },
        { collection: 'devices', id: 'fw-s0', port: 'wan7' },
      ]),
    ).toMatchObject({
      ok: false,
      problems: [
        { field: 'failed.0.id', value: 'tn-none', expected: "the id of one of the design's tunnels" },
        { field: 'failed.1.collection', value: 'segments' },
        { field: 'failed.2.member', value: 2 },
        { field: 'failed.3.port', value: 'wan7' },
      ],
    });
  });
});

const trunk = (number: number): MergePatch => ({ number, role: 'lan', mode: 'trunk', allowedVlans: [110] });

describe('every single failure', () => {
  it('answers as each outage on its own does', () => {
    const design = hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] });
    const all = everySingleFailure(design);
    expect(all.length).toBe(
      Object.keys(design.sites).length +
        Object.keys(design.devices).length +
        1 +
        Object.keys(design.transports).length +
        Object.keys(design.links).length +
        Object.keys(design.associations).length +
        Object.keys(design.tunnels).length,
    );
    for (const { element, ...found } of all)
      expect({ ok: true, ...found }).toEqual(outage(design, [element]));
  });

  it('finds the single points of failure, the worst first', () => {
    const points = singlePointsOfFailure(everySingleFailure(hubDesign(3)));
    expect(points[0]!.pairCount).toBe(6);
    const worst = points.filter(({ pairCount }) => pairCount === 6).map(({ element }) => element.id);
    expect(worst).toEqual(['fw-s0', 'ld-s0-coast', 'coast']);
    expect(points.at(-1)!.pairCount).toBeGreaterThan(0);
    // A storm-free mesh of three has a second way between no two sites: a tunnel parts its ends, and they only.
    const mesh = singlePointsOfFailure(everySingleFailure(meshDesign(3, { join: { isolation: 'mesh' } })));
    expect(mesh.find(({ element }) => element.id === 'tn-s0-s1-a')!.pairCount).toBe(1);
    expect(mesh.find(({ element }) => element.id === 'fw-s0')!.pairCount).toBe(2);
  });

  it('get through the largest plan in one run', () => {
    const design = largeDesign();
    const count = (collection: 'sites' | 'devices' | 'links' | 'tunnels' | 'segments'): number =>
      Object.keys(design[collection]).length;
    expect([count('sites'), count('devices'), count('segments')]).toEqual([200, 1_000, 200]);
    expect(count('links')).toBeGreaterThan(2_800);
    expect(count('tunnels')).toBeGreaterThan(490);
    const all = everySingleFailure(design);
    // All 200 piers of segment A hang on the head office's switch and gateways.
    expect(singlePointsOfFailure(all)[0]!.pairCount).toBeGreaterThan(19_000);
  }, 60_000);
});
