import { describe, expect, it } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { elementsOf } from '#engine/flood/storm.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';

const stormsOf = (design: Design, patch: MergePatch = {}) =>
  findStorms(floodGraph(indexNetwork(applyPatch(design, patch))));
const customerCable: MergePatch = {
  devices: Object.fromEntries(
    ['sw-s0', 'sw-s1'].map((id) => [id, { ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } }]),
  ),
  links: {
    'cb-quay': { kind: 'cable', a: { device: 'sw-s0', port: 'p9' }, b: { device: 'sw-s1', port: 'p9' } },
  },
};

describe('a design without a way round', () => {
  it.each([
    ['a pair of sites', pairDesign({ segments: ['a', 'b'] })],
    ['a hub with four spokes', hubDesign(4)],
    ['a hub on an HA pair', hubDesign(3, { hub: 'ha-pair' })],
    ['a chain', chainDesign(5)],
    ['a full mesh in one isolation group', meshDesign(4, { join: { isolation: 'mesh' } })],
  ])('has no storm: %s', (_title, design) => {
    expect(stormsOf(design)).toEqual([]);
  });
});

describe('a full mesh without isolation', () => {
  it('of three sites is one storm in which copies circulate, with the way round', () => {
    const [storm, ...others] = stormsOf(meshDesign(3));
    expect(others).toEqual([]);
    expect(storm).toEqual({
      key: 'tn-s0-s1-a tn-s0-s2-a tn-s1-s2-a',
      steps: [
        { collection: 'tunnels', id: 'tn-s0-s1-a', direction: 'a-to-b' },
        { collection: 'tunnels', id: 'tn-s1-s2-a', direction: 'a-to-b' },
        { collection: 'tunnels', id: 'tn-s0-s2-a', direction: 'b-to-a' },
      ],
      tunnels: ['tn-s0-s1-a', 'tn-s0-s2-a', 'tn-s1-s2-a'],
      cables: [],
      devices: ['fw-s0', 'fw-s1', 'fw-s2'],
      sites: ['s0', 's1', 's2'],
      segments: ['a'],
      copies: 'circulate',
      frames: ['arp', 'ipv4', 'ipv6', 'other'],
    });
    expect(elementsOf(storm!)).toHaveLength(3);
  });

  it('of four sites is one in which they multiply', () => {
    expect(stormsOf(meshDesign(4))).toMatchObject([{ copies: 'multiply', tunnels: { length: 6 } }]);
  });

  it('is a storm for each segment', () => {
    expect(stormsOf(meshDesign(3, { segments: ['a', 'b'] })).map(({ segments }) => segments)).toEqual([
      ['a'],
      ['b'],
    ]);
  });

  it('has no storm with a tunnel less, a VNI that differs, an association that is down, or isolation at one site', () => {
    const mesh = meshDesign(3);
    expect(stormsOf(mesh, { forwarders: { 'br-s2-a': { circuits: { 'tn-s1-s2-a': null } } } })).toEqual([]);
    expect(stormsOf(mesh, { tunnels: { 'tn-s1-s2-a': { b: { vni: 77 } } } })).toEqual([]);
    expect(stormsOf(mesh, { associations: { 'as-s1-s2': { a: { start: 'answers' } } } })).toEqual([]);
    const isolated = { 'tn-s0-s1-a': { isolation: 'one' }, 'tn-s0-s2-a': { isolation: 'one' } };
    expect(stormsOf(mesh, { forwarders: { 'br-s0-a': { circuits: isolated } } })).toEqual([]);
  });

  it('has none where endpoints keep tunnels of one VNI apart', () => {
    const mesh = meshDesign(3, { join: { vni: () => 10_110 } });
    const profile = { profile: 'multi' };
    expect(stormsOf(mesh)).toHaveLength(1);
    expect(
      stormsOf(mesh, {
        profiles: { multi: { name: 'Multipoint gateway', vniScope: 'multipoint' } },
        devices: { 'fw-s0': profile, 'fw-s1': profile, 'fw-s2': profile },
      }),
    ).toEqual([]);
  });
});

describe('a cable of the customer between two sites', () => {
  it('closes a ring with the tunnel, crossed with its VLAN', () => {
    const [storm] = stormsOf(pairDesign(), customerCable);
    expect(storm).toMatchObject({
      tunnels: ['tn-s0-s1-a'],
      cables: ['cb-quay', 'cb-s0-up1', 'cb-s1-up1'],
      copies: 'circulate',
      sites: ['s0', 's1'],
    });
    expect(storm!.steps).toHaveLength(4);
    expect(storm!.steps).toContainEqual({
      collection: 'links',
      id: 'cb-quay',
      direction: 'a-to-b',
      vlan: 110,
    });
  });

  it('is harmless where its ports carry another VLAN, are shut, or the standby member is at one end', () => {
    const pair = pairDesign();
    const port = (change: MergePatch): MergePatch => ({ devices: { 'sw-s1': { ports: { p9: change } } } });
    const with9 = applyPatch(pair, customerCable);
    expect(stormsOf(with9, port({ allowedVlans: [999] }))).toEqual([]);
    expect(stormsOf(with9, port({ shut: true }))).toEqual([]);
    const toPair = applyPatch(pairDesign({ hub: 'ha-pair' }), {
      devices: { 'sw-s1': { ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } } },
      links: {
        'cb-quay': {
          kind: 'cable',
          a: { device: 'sw-s1', port: 'p9' },
          b: { device: 'fw-s0', port: 'lan1', member: 2 },
        },
      },
    });
    expect(stormsOf(toPair)).toEqual([]);
    expect(stormsOf(toPair, { devices: { 'fw-s0': { mode: 'active-active' } } })).not.toEqual([]);
  });
});

describe('one site', () => {
  const twoCables = (aggregation?: string): MergePatch => ({
    devices: {
      'sw-s0': {
        ports: Object.fromEntries(
          [7, 8].map((n) => [
            `p${n}`,
            { number: n, role: 'lan', mode: 'trunk', ...(aggregation === undefined ? {} : { aggregation }) },
          ]),
        ),
      },
      'sw-s0b': {
        kind: 'switch',
        site: 's0',
        name: 'sw-s0b',
        ports: Object.fromEntries(
          [1, 2].map((n) => [
            `p${n}`,
            { number: n, role: 'lan', mode: 'trunk', ...(aggregation === undefined ? {} : { aggregation }) },
          ]),
        ),
      },
    },
    links: Object.fromEntries(
      [1, 2].map((n) => [
        `cb-s0-x${n}`,
        { kind: 'cable', a: { device: 'sw-s0', port: `p${n + 6}` }, b: { device: 'sw-s0b', port: `p${n}` } },
      ]),
    ),
  });

  it('storms on two cables between two switches unless they are one aggregate', () => {
    expect(stormsOf(pairDesign(), twoCables())).toMatchObject([
      { cables: ['cb-s0-x1', 'cb-s0-x2'], tunnels: [], steps: { length: 2 }, sites: ['s0'] },
    ]);
    expect(stormsOf(pairDesign(), twoCables('lag1'))).toEqual([]);
  });

  it('storms on a cable that joins two ports of one switch', () => {
    const patch: MergePatch = {
      devices: {
        'sw-s0': {
          ports: {
            p7: { number: 7, role: 'lan', mode: 'access', vlan: 110 },
            p8: { number: 8, role: 'lan', mode: 'access', vlan: 110 },
          },
        },
      },
      links: {
        'cb-own': { kind: 'cable', a: { device: 'sw-s0', port: 'p7' }, b: { device: 'sw-s0', port: 'p8' } },
      },
    };
    expect(stormsOf(pairDesign(), patch)).toMatchObject([
      { cables: ['cb-own'], steps: [{ id: 'cb-own', direction: 'a-to-b' }] },
    ]);
  });

  it('storms with two gateways between the same switch and the same far site', () => {
    const design = pairDesign();
    const { ports } = design.devices['fw-s0']!;
    const tunnel = design.tunnels['tn-s0-s1-a']!;
    const patch = {
      devices: {
        'fw-s0b': { ...design.devices['fw-s0'], name: 'fw-s0b', ports },
        'sw-s0': { ports: { p9: { number: 9, role: 'lan', mode: 'trunk', allowedVlans: [110] } } },
      },
      endpoints: { 'lo-s0b': { device: 'fw-s0b', name: 'lo-s0b', ipv4: '10.255.0.9/32' } },
      links: {
        'ld-s0b': { ...design.links['ld-s0-coast'], device: 'fw-s0b', ipv4: '198.51.100.99' },
        'cb-s0-up9': {
          kind: 'cable',
          a: { device: 'sw-s0', port: 'p9' },
          b: { device: 'fw-s0b', port: 'lan1' },
        },
      },
      tunnels: {
        'tn-second': {
          ...tunnel,
          name: 'tn-second',
          association: null,
          a: { ...tunnel.a, endpoint: 'lo-s0b', vni: 5 },
          b: { ...tunnel.b, vni: 5 },
        },
      },
      forwarders: {
        'br-s0b-a': {
          device: 'fw-s0b',
          kind: 'bridge',
          circuits: {
            access: { kind: 'port', rank: 'a0', port: 'lan1', vlans: [110] },
            second: { kind: 'tunnel', rank: 'a1', tunnel: 'tn-second' },
          },
        },
        'br-s1-a': { circuits: { second: { kind: 'tunnel', rank: 'b1', tunnel: 'tn-second' } } },
      },
    } as unknown as MergePatch;
    expect(stormsOf(design, patch)).toMatchObject([
      { tunnels: ['tn-s0-s1-a', 'tn-second'], cables: ['cb-s0-up1', 'cb-s0-up9'], copies: 'circulate' },
    ]);
  });

  it('storms on one cable when forwarders at both ends lead two VLANs into each other', () => {
    const both = { kind: 'port', rank: 'a5', port: 'lan2', vlans: [20] } as const;
    const one = { kind: 'port', rank: 'a6', port: 'lan2', vlans: [30] } as const;
    const patch: MergePatch = {
      links: {
        'cb-direct': {
          kind: 'cable',
          a: { device: 'fw-s0', port: 'lan2' },
          b: { device: 'fw-s1', port: 'lan2' },
        },
      },
      forwarders: {
        x0: { device: 'fw-s0', kind: 'bridge', circuits: { both, one } },
        x1: { device: 'fw-s1', kind: 'bridge', circuits: { both, one } },
      },
    };
    expect(stormsOf(pairDesign(), patch)).toMatchObject([
      { cables: ['cb-direct'], steps: [{ vlan: 20 }, { vlan: 30 }] },
    ]);
  });
});

describe('filters', () => {
  const filtered = (frames: string, action = 'permit'): MergePatch => ({
    forwarders: {
      'br-s0-a': {
        kind: 'cross-connect',
        policy: { first: { rank: 'a0', action, direction: 'both', frames } },
      },
    },
  });

  it('let a storm of those frames be that they pass, and name them', () => {
    const design = applyPatch(pairDesign(), customerCable);
    expect(stormsOf(design, filtered('arp'))).toMatchObject([{ frames: ['arp'] }]);
    expect(stormsOf(design, filtered('any'))).toMatchObject([{ frames: ['arp', 'ipv4', 'ipv6', 'other'] }]);
    expect(stormsOf(design, filtered('any', 'deny'))).toEqual([]);
  });

  it('do not add up: a ring of which each part passes another kind of frame carries none round', () => {
    const design = applyPatch(applyPatch(pairDesign(), customerCable), filtered('arp'));
    const far = {
      forwarders: {
        'br-s1-a': {
          kind: 'cross-connect',
          policy: { first: { rank: 'a0', action: 'permit', direction: 'both', frames: 'ipv4' } },
        },
      },
    };
    expect(stormsOf(design, far as MergePatch)).toEqual([]);
  });
});

describe('findStorms', () => {
  it('finds the same in a design whose entries come in another order', () => {
    const design = meshDesign(4, { segments: ['a', 'b'] });
    const turned = Object.fromEntries(
      Object.entries(design).map(([key, value]) => [
        key,
        typeof value === 'object' ? Object.fromEntries(Object.entries(value).reverse()) : value,
      ]),
    ) as unknown as Design;
    expect(stormsOf(turned)).toEqual(stormsOf(design));
  });
});
