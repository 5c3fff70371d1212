import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';

const none = new Map<string, readonly string[]>();

describe('what a drawing says', () => {
  it('lists segments by letter, AA after Z', () => {
    const design = pairDesign({ segments: ['a', 'b'] });
    const { a, b } = design.segments;
    const more: Design = {
      ...design,
      segments: { x: { ...a!, letter: 'AA' }, y: { ...b!, letter: 'Z' }, z: { ...b!, letter: 'C' } },
    };
    expect(drawingFacts(more, none).segments.map(({ letter }) => letter)).toEqual(['C', 'Z', 'AA']);
  });

  it('gives each tunnel the segments that the engine follows through it, in letter order', () => {
    const design = pairDesign({ segments: ['a', 'b'] });
    const [tunnel] = Object.keys(design.tunnels) as [string];
    const facts = drawingFacts(design, new Map([[tunnel, ['b', 'a', 'gone']]]));
    expect(facts.tunnels[tunnel]?.segments.map(({ letter }) => letter)).toEqual(['A', 'B']);
  });

  it('says of a pair which member is active', () => {
    const design = hubDesign(1, { hub: 'ha-pair' });
    const facts = drawingFacts(design, none);
    expect(facts.devices['fw-s0']?.members).toEqual([
      { member: 1, name: 'fw-s0-1', word: 'active' },
      { member: 2, name: 'fw-s0-2', word: 'standby' },
    ]);
    const device = design.devices['fw-s0']!;
    const both: Design = {
      ...design,
      devices: { ...design.devices, 'fw-s0': { ...device, mode: 'active-active' } as typeof device },
    };
    expect(drawingFacts(both, none).devices['fw-s0']?.members?.map(({ word }) => word)).toEqual([
      'active',
      'active',
    ]);
  });

  it('trusts only the company’s own transport unless its owner says otherwise', () => {
    const design = pairDesign();
    const transport = (kind: 'internet' | 'private-routed' | 'own-routed', trusted?: boolean) =>
      drawingFacts(
        {
          ...design,
          transports: { t: { name: 'Ring', kind, ...(trusted === undefined ? {} : { trusted }) } },
        },
        none,
      ).transports['t']?.trust;
    expect(transport('internet')).toBe('not trusted');
    expect(transport('private-routed')).toBe('not trusted');
    expect(transport('own-routed')).toBe('trusted');
    expect(transport('private-routed', true)).toBe('trusted');
  });

  it('says latency, MTU and loss of a transport in their units and keeps silent about unknown ones', () => {
    const words = drawingFacts(pairDesign(), none).transports['coast'];
    expect(words).toMatchObject({ latency: '18 ms ± 3', mtu: 'MTU 1500', loss: 'loss 0.02 %' });
    const bare = drawingFacts({ ...pairDesign(), transports: { t: { name: 'T', kind: 'internet' } } }, none);
    expect(Object.keys(bare.transports['t'] ?? {})).toEqual(['name', 'kind', 'trusted', 'trust']);
  });

  it('counts VLANs and subnets that differ between sites instead of choosing one', () => {
    const design = pairDesign();
    const segment = design.segments['a']!;
    const sites = Object.fromEntries(
      ['s0', 's1', 's2'].map((id, i) => [id, { vlan: 100 + i, subnets: [`10.${i}.0.0/24`] }]),
    );
    const facts = drawingFacts({ ...design, segments: { a: { ...segment, sites } } }, none);
    expect(facts.segments[0]).toMatchObject({ vlan: '3 VLANs', subnet: '3 subnets', carries: 'unicast' });
  });

  it('lets a revision fill cells of the title block', () => {
    const facts = drawingFacts(pairDesign(), none, { revision: 'C', status: 'In review' });
    expect(facts.titleBlock).toMatchObject({ revision: 'C', status: 'In review', sheet: '1/1' });
  });

  it('counts what a collapsed site hides in its gateway’s second line', () => {
    const design = pairDesign();
    const collapsed: Design = {
      ...design,
      layout: { sites: { s1: { x: 0, y: 0, width: 100, height: 100, collapsed: true } } },
    };
    expect(drawingFacts(collapsed, none).devices['fw-s1']?.second).toBe('2 more devices');
    expect(drawingFacts(design, none).devices['fw-s1']?.second).toBe('firewall');
  });
});
