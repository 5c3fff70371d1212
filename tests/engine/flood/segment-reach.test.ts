import { describe, expect, it } from 'vitest';
import { segmentReach } from '#engine/flood/segment-reach.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';

const of = (design: Design, patch: MergePatch = {}, segment = 'a') =>
  segmentReach(indexNetwork(applyPatch(design, patch)), segment);
const barriers = (design: Design, patch: MergePatch) =>
  of(design, patch).partings.map(({ barrier }) => barrier);

describe('segmentReach', () => {
  it('finds one group where everybody hears everybody', () => {
    for (const design of [
      pairDesign({ segments: ['a', 'b'], hostsPerSite: 3 }),
      hubDesign(3, { hub: 'ha-pair' }),
      chainDesign(4),
      meshDesign(4, { join: { isolation: 'm' } }),
    ]) {
      const { groups, partings, unattachedSites } = of(design);
      expect(groups).toHaveLength(1);
      expect([partings, unattachedSites]).toEqual([[], []]);
    }
  });

  it('names the tunnel where frames end and what is wrong with it, after the crossings that they make', () => {
    const { groups, partings } = of(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } });
    expect(groups.map(({ points }) => points)).toEqual([
      [{ site: 's0', device: 'h-s0-a' }],
      [{ site: 's1', device: 'h-s1-a' }],
    ]);
    expect(partings).toMatchObject([
      {
        from: 0,
        to: 1,
        barrier: { code: 'tunnel-down', tunnel: 'tn-s0-s1-a', reasons: [{ code: 'vni-mismatch' }] },
      },
      { from: 1, to: 0 },
    ]);
    expect(partings[0]!.path.map(({ id }) => id)).toEqual(['cb-h-s0-a', 'cb-s0-up1', 'tn-s0-s1-a']);
  });

  it.each<[string, MergePatch, object]>([
    [
      'a trunk of the switch',
      { devices: { 'sw-s0': { ports: { p1: { allowedVlans: [999] } } } } },
      { code: 'vlan-not-allowed', device: 'sw-s0', port: 'p1', vlan: 110, direction: 'out' },
    ],
    [
      'a port of the gateway',
      { devices: { 'fw-s0': { ports: { lan1: { allowedVlans: [999] } } } } },
      { code: 'vlan-not-allowed', device: 'fw-s0', port: 'lan1', vlan: 110, direction: 'in' },
    ],
    [
      'an access port in another VLAN',
      { devices: { 'sw-s0': { ports: { p2: { vlan: 990 } } } } },
      { code: 'other-access-vlan', device: 'sw-s0', port: 'p2', vlan: 110, has: 990 },
    ],
    [
      'a circuit that is missing',
      { forwarders: { 'br-s0-a': { circuits: { access: null } } } },
      { code: 'no-circuit', device: 'fw-s0', port: 'lan1', vlan: 110 },
    ],
    [
      'a shut port',
      { devices: { 'sw-s0': { ports: { p1: { shut: true } } } } },
      { code: 'port-shut', device: 'sw-s0', port: 'p1', cable: 'cb-s0-up1' },
    ],
    [
      'a filter',
      { forwarders: { 'br-s0-a': { kind: 'cross-connect' } } },
      { code: 'filter', device: 'fw-s0', forwarder: 'br-s0-a' },
    ],
    [
      'an association',
      { associations: { 'as-s0-s1': { a: { start: 'answers' } } } },
      { code: 'tunnel-down', tunnel: 'tn-s0-s1-a' },
    ],
    [
      'a tunnel that no forwarder holds at the far end',
      { forwarders: { 'br-s1-a': { circuits: { 'tn-s0-s1-a': null } } } },
      { code: 'tunnel-unclaimed', tunnel: 'tn-s0-s1-a', device: 'fw-s1' },
    ],
    ['a host that is not cabled', { links: { 'cb-h-s0-a': null } }, { code: 'not-cabled', device: 'h-s0-a' }],
    [
      'nothing between the sites',
      {
        forwarders: {
          'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
          'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
        },
      },
      { code: 'not-joined', fromSite: 's0', toSite: 's1' },
    ],
    [
      'a host on a trunk',
      { devices: { 'h-s0-a': { ports: { p1: { mode: 'trunk' } } } } },
      { code: 'tag-at-access-port', device: 'sw-s0', port: 'p2', vlan: 110 },
    ],
    [
      'a trunk without native VLAN',
      { devices: { 'sw-s0': { ports: { p2: { mode: 'trunk', vlan: null } } } } },
      { code: 'no-native-vlan', device: 'sw-s0', port: 'p2' },
    ],
  ])('names %s', (_title, patch, barrier) => {
    const { groups, partings } = of(pairDesign(), patch);
    const home = groups.findIndex(({ points }) => points.some(({ device }) => device === 'h-s0-a'));
    expect(partings.find(({ from }) => from === home)?.barrier).toMatchObject(barrier);
  });

  it('explains the way back by what explains the way there', () => {
    const { partings } = of(pairDesign(), {
      forwarders: { 'br-s1-a': { circuits: { 'tn-s0-s1-a': null } } },
    });
    expect(partings.map(({ barrier }) => barrier.code)).toEqual(['tunnel-unclaimed', 'tunnel-unclaimed']);
  });

  it('names the standby member that a lone uplink ends at', () => {
    const patch = { links: { 'cb-s0-up1': null } };
    expect(barriers(pairDesign({ hub: 'ha-pair' }), patch)).toContainEqual({
      code: 'standby',
      device: 'fw-s0',
      member: 2,
      port: 'lan1',
    });
  });

  it('names tags that the far end of a tunnel takes none of', () => {
    const whole = { circuits: { access: { vlans: 'all' } } } as const;
    const patch: MergePatch = {
      forwarders: { 'br-s0-a': whole, 'br-s1-a': whole },
      tunnels: { 'tn-s0-s1-a': { a: { innerTags: 'keep' } } },
    };
    expect(barriers(pairDesign(), patch)).toContainEqual({
      code: 'tag-discarded',
      tunnel: 'tn-s0-s1-a',
      device: 'fw-s1',
      vlan: 110,
    });
  });

  it('names the isolation that keeps spokes apart, and only them', () => {
    const { groups, partings } = of(hubDesign(3, { join: { isolation: 'spokes' } }));
    expect(groups).toHaveLength(4);
    expect(partings).toHaveLength(6);
    expect(new Set(partings.map(({ barrier }) => JSON.stringify(barrier)))).toEqual(
      new Set([
        JSON.stringify({ code: 'isolation', device: 'fw-s0', forwarder: 'br-s0-a', group: 'spokes' }),
      ]),
    );
  });

  it('names the port that spanning tree blocks for a VLAN that has no other way', () => {
    const on = { settings: { spanningTree: { mode: 'on' } } };
    const port = (number: number, allowedVlans: number[]) => ({
      number,
      role: 'lan',
      mode: 'trunk',
      allowedVlans,
    });
    const patch = {
      devices: {
        'sw-s0': { ...on, ports: { p7: port(7, [999]), p8: port(8, [110]) } },
        'sw-x': {
          kind: 'switch',
          site: 's0',
          name: 'sw-x',
          ...on,
          ports: {
            p1: port(1, [999]),
            p2: port(2, [110]),
            p3: { number: 3, role: 'lan', mode: 'access', vlan: 110 },
          },
        },
      },
      links: {
        'cb-1': { kind: 'cable', a: { device: 'sw-s0', port: 'p7' }, b: { device: 'sw-x', port: 'p1' } },
        'cb-2': { kind: 'cable', a: { device: 'sw-s0', port: 'p8' }, b: { device: 'sw-x', port: 'p2' } },
        'cb-h-s0-a': { b: { device: 'sw-x', port: 'p3' } },
      },
    } as MergePatch;
    expect(barriers(pairDesign(), patch)).toContainEqual({
      code: 'spanning-tree',
      device: 'sw-x',
      port: 'p2',
    });
  });

  it('stands a port in the VLAN for a site without hosts, and names sites that have none', () => {
    const unhosted = (patch: MergePatch = {}) =>
      of(pairDesign(), {
        devices: { 'h-s1-a': null, ...((patch.devices ?? {}) as MergePatch) },
        links: { 'cb-h-s1-a': null },
        forwarders: (patch.forwarders ?? {}) as MergePatch,
      });
    expect(unhosted().groups).toEqual([
      {
        points: [
          { site: 's0', device: 'h-s0-a' },
          { site: 's1', device: 'sw-s1', port: 'p2' },
        ],
      },
    ]);
    const viaGateway = unhosted({ devices: { 'sw-s1': { ports: { p2: { vlan: 999 } } } } });
    expect(viaGateway.groups[0]!.points).toContainEqual({ site: 's1', device: 'fw-s1', port: 'lan1' });
    const nowhere = unhosted({
      devices: { 'sw-s1': { ports: { p2: { vlan: 999 } } } },
      forwarders: { 'br-s1-a': { circuits: { access: null } } },
    });
    expect(nowhere.unattachedSites).toEqual(['s1']);
  });

  it('follows neighbour discovery where a segment carries IPv6 alone', () => {
    const patch: MergePatch = {
      segments: { a: { protocols: ['ipv6'] } },
      forwarders: { 'br-s0-a': { multicast: 'drop' } },
    };
    expect(of(pairDesign(), patch)).toMatchObject({
      frame: 'ipv6',
      partings: [{ barrier: { code: 'filter' } }, {}],
    });
  });
});
