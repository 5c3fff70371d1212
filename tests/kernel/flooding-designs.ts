import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import type { PlanOptions } from '../support/designs.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../support/designs.ts';
import { changed } from './changed.ts';

const bare: PlanOptions = { join: { protectedBy: false } };
const isolated: PlanOptions = { join: { protectedBy: false, isolation: 'mesh' } };

const meshOfThree = meshDesign(3, bare);
const safeMesh = meshDesign(3, isolated);

/** Isolation at one site of a mesh, which a site's own administrator may have thought enough. */
const isolatedAtOneSite = changed(meshOfThree, {
  forwarders: {
    'br-s0-a': {
      circuits: { 'tn-s0-s1-a': { isolation: 'mesh' }, 'tn-s0-s2-a': { isolation: 'mesh' } },
    },
  },
});

const withoutLeg = (design: Design, tunnel: string, sites: readonly string[]): Design =>
  changed(design, {
    tunnels: { [tunnel]: null },
    forwarders: Object.fromEntries(sites.map((site) => [`br-${site}-a`, { circuits: { [tunnel]: null } }])),
  });

/** One VNI for all, on equipment that takes tunnels of one VNI for a single circuit. */
const multipointMesh = changed(meshOfThree, {
  profiles: { linux: { name: 'One device, several destinations', vniScope: 'multipoint' } },
  devices: Object.fromEntries(['fw-s0', 'fw-s1', 'fw-s2'].map((id) => [id, { profile: 'linux' }])),
  tunnels: Object.fromEntries(
    Object.keys(meshOfThree.tunnels).map((id) => [id, { a: { vni: 10_000 }, b: { vni: 10_000 } }]),
  ),
});

/** A spanning tree over bridges that hand each other its frames. */
const meshWithSpanningTree = changed(meshOfThree, {
  profiles: { linux: { name: 'Passes bridges’ own frames', reservedGroups: { '00': 'pass' } } },
  devices: Object.fromEntries(['fw-s0', 'fw-s1', 'fw-s2'].map((id) => [id, { profile: 'linux' }])),
  forwarders: Object.fromEntries(
    ['br-s0-a', 'br-s1-a', 'br-s2-a'].map((id, i) => [
      id,
      { spanningTree: { mode: 'on', priority: 4096 * (i + 1) } },
    ]),
  ),
});

/** A second firewall on the access switch of the first, with a tunnel of its own to the same far bridge. */
const twoGatewaysAtOneSite = (far: MergePatch = {}): Design => {
  const pair = pairDesign(bare);
  const tunnel = pair.tunnels['tn-s0-s1-a']!;
  const forwarder = pair.forwarders['br-s0-a']!;
  const second = changed(pair, {
    devices: {
      'fw2-s0': { ...pair.devices['fw-s0']!, name: 'fw2-s0' },
      'sw-s0': { ports: { p9: { ...pair.devices['sw-s0']!.ports['p1']!, number: 9 } } },
    },
    links: {
      'ld2-s0': { ...pair.links['ld-s0-coast']!, device: 'fw2-s0', ipv4: '198.51.100.99' },
      'cb2-s0': {
        kind: 'cable',
        a: { device: 'sw-s0', port: 'p9' },
        b: { device: 'fw2-s0', port: 'lan1' },
      },
    },
    endpoints: { 'lo2-s0': { device: 'fw2-s0', name: 'lo2-s0', ipv4: '10.255.0.99/32' } },
    tunnels: {
      second: {
        ...tunnel,
        name: 'second',
        a: {
          ...tunnel.a,
          endpoint: 'lo2-s0',
          vni: 10_500,
          via: { first: { rank: 'a0', landing: 'ld2-s0' } },
        },
        b: { ...tunnel.b, vni: 10_500 },
      },
    },
    forwarders: {
      'br2-s0': {
        ...forwarder,
        device: 'fw2-s0',
        circuits: {
          access: forwarder.circuits['access']!,
          second: { kind: 'tunnel', rank: 'a5', tunnel: 'second' },
        },
      },
      'br-s1-a': { circuits: { second: { kind: 'tunnel', rank: 'a5', tunnel: 'second' } } },
    },
  } as MergePatch);
  return changed(second, far);
};

const isolatedPairOfTunnels = twoGatewaysAtOneSite({
  forwarders: {
    'br-s1-a': { circuits: { 'tn-s0-s1-a': { isolation: 'twins' }, second: { isolation: 'twins' } } },
  },
});

const twoSegments = pairDesign({ ...bare, segments: ['a', 'b'] });

/** Segment B's tunnel put into segment A's bridge at the head office. */
const leakingSegments = changed(twoSegments, {
  forwarders: {
    'br-s0-b': { circuits: { 'tn-s0-s1-b': null } },
    'br-s0-a': { circuits: { 'tn-s0-s1-b': { kind: 'tunnel', rank: 'a5', tunnel: 'tn-s0-s1-b' } } },
  },
});

const pair = pairDesign(bare);

/** Designs whose broadcasts come to an end, and single tunnels whose failure is tried on them. */
export const quietDesigns: readonly {
  readonly what: string;
  readonly design: Design;
  readonly failing?: string;
}[] = [
  { what: 'two sites', design: pair, failing: 'tn-s0-s1-a' },
  {
    what: 'a VNI that differs',
    design: changed(pair, { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_001 } } } }),
  },
  {
    what: 'a UDP port that differs',
    design: changed(pair, { tunnels: { 'tn-s0-s1-a': { b: { udpPort: 4790 } } } }),
  },
  {
    what: 'two sites on transports that do not meet',
    design: changed(pair, {
      transports: { fen: { ...pair.transports['coast']!, name: 'Fen access' } },
      links: { 'ld-s1-coast': { transport: 'fen' } },
    }),
  },
  {
    what: 'a tunnel that no bridge holds at one end',
    design: changed(pair, { forwarders: { 'br-s1-a': { circuits: { 'tn-s0-s1-a': null } } } }),
  },
  {
    what: 'a VLAN that a trunk leaves out',
    design: changed(pair, { devices: { 'sw-s1': { ports: { p1: { allowedVlans: [120] } } } } }),
  },
  {
    what: 'a shut port',
    design: changed(pair, { devices: { 'fw-s1': { ports: { lan1: { shut: true } } } } }),
  },
  { what: 'hub and spokes', design: hubDesign(3, bare), failing: 'tn-s0-s2-a' },
  { what: 'a hub that is an HA pair', design: hubDesign(2, { ...bare, hub: 'ha-pair' }) },
  { what: 'a hub that isolates its spokes', design: hubDesign(3, isolated) },
  { what: 'a chain of four', design: chainDesign(4, bare), failing: 'tn-s1-s2-a' },
  { what: 'a mesh of three with isolation', design: safeMesh, failing: 'tn-s0-s1-a' },
  { what: 'a mesh of four with isolation', design: meshDesign(4, isolated) },
  {
    what: 'a mesh with isolation and one leg missing',
    design: withoutLeg(safeMesh, 'tn-s0-s1-a', ['s0', 's1']),
  },
  {
    what: 'a mesh of three without its third tunnel',
    design: withoutLeg(meshOfThree, 'tn-s1-s2-a', ['s1', 's2']),
  },
  { what: 'isolation at one site of a mesh', design: isolatedAtOneSite },
  { what: 'a mesh of one VNI, multipoint', design: multipointMesh },
  { what: 'a mesh with a spanning tree that sees it', design: meshWithSpanningTree },
  { what: 'two gateways at one site, their tunnels isolated at the far end', design: isolatedPairOfTunnels },
  { what: 'two segments side by side', design: twoSegments },
  { what: 'a segment that leaks into another', design: leakingSegments },
];

/** Designs in which a broadcast goes on for ever. */
export const stormyDesigns: readonly { readonly what: string; readonly design: Design }[] = [
  { what: 'a mesh of three', design: meshOfThree },
  { what: 'a mesh of four', design: meshDesign(4, bare) },
  { what: 'two gateways on one access switch', design: twoGatewaysAtOneSite() },
  {
    what: 'a cable between two access ports of the customer',
    design: changed(pair, {
      devices: {
        'sw-s1': {
          ports: {
            p8: { number: 8, role: 'lan', mode: 'access', vlan: 110 },
            p9: { number: 9, role: 'lan', mode: 'access', vlan: 110 },
          },
        },
      },
      links: {
        'cb-loop': { kind: 'cable', a: { device: 'sw-s1', port: 'p8' }, b: { device: 'sw-s1', port: 'p9' } },
      },
    }),
  },
];
