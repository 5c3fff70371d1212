import { describe, expect, it } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { isolationCure } from '#engine/flood/isolation-cure.ts';
import { reach } from '#engine/flood/reach.ts';
import { removalPatch } from '#engine/flood/removal-patch.ts';
import { suggestCuts } from '#engine/flood/suggest-cuts.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';

const firstStorm = (design: Design) => {
  const network = indexNetwork(design);
  return { network, storm: findStorms(floodGraph(network))[0]! };
};
const cutsOf = (design: Design) => {
  const { network, storm } = firstStorm(design);
  return suggestCuts(network, storm);
};
/** A second transport for the tunnel between s0 and s1, slower or narrower. */
const overMoor = (moor: MergePatch): MergePatch => ({
  transports: { moor: { name: 'Moor radio', kind: 'own-routed', families: [4], ...moor } },
  devices: Object.fromEntries(
    ['fw-s0', 'fw-s1'].map((id) => [id, { ports: { wan9: { number: 9, role: 'wan' } } }]),
  ),
  links: Object.fromEntries(
    ['s0', 's1'].map((site) => [
      `ld-${site}-moor`,
      { kind: 'landing', device: `fw-${site}`, port: 'wan9', transport: 'moor' },
    ]),
  ),
  associations: {
    'as-s0-s1': {
      a: { via: { first: { landing: 'ld-s0-moor' } } },
      b: { via: { first: { landing: 'ld-s1-moor' } } },
    },
  },
});

describe('suggestCuts', () => {
  it('offers one tunnel of a triangle and says that fewer cannot do', () => {
    expect(cutsOf(meshDesign(3))).toEqual({ tunnels: ['tn-s1-s2-a'], cables: [], isSmallest: true });
  });

  it('keeps what is fast, then what is wide', () => {
    expect(cutsOf(applyPatch(meshDesign(3), overMoor({ latencyUs: 40_000 })))).toMatchObject({
      tunnels: ['tn-s0-s1-a'],
    });
    expect(
      cutsOf(applyPatch(meshDesign(3), overMoor({ latencyUs: 18_000, rateBps: 2_000_000 }))),
    ).toMatchObject({ tunnels: ['tn-s1-s2-a'] });
    const wide = applyPatch(meshDesign(3), { transports: { coast: { rateBps: 100_000_000 } } });
    expect(cutsOf(applyPatch(wide, overMoor({ latencyUs: 18_000, rateBps: 2_000_000 })))).toMatchObject({
      tunnels: ['tn-s0-s1-a'],
    });
  });

  it('offers as many of a larger mesh as leave a tree, without a claim to be smallest', () => {
    const cuts = cutsOf(meshDesign(5));
    expect(cuts.tunnels).toHaveLength(10 - 4);
    expect(cuts.isSmallest).toBe(false);
  });

  it('takes the tunnel out rather than the cable that closes the ring', () => {
    const design = applyPatch(pairDesign(), {
      devices: Object.fromEntries(
        ['sw-s0', 'sw-s1'].map((id) => [id, { ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } }]),
      ),
      links: {
        'cb-quay': { kind: 'cable', a: { device: 'sw-s0', port: 'p9' }, b: { device: 'sw-s1', port: 'p9' } },
      },
    });
    expect(cutsOf(design)).toEqual({ tunnels: ['tn-s0-s1-a'], cables: [], isSmallest: true });
  });

  it('finds a cut where a single cable carries the ring in two VLANs', () => {
    const circuits = Object.fromEntries(
      [20, 30].map((vlan) => [`v${vlan}`, { kind: 'port', rank: `a${vlan}`, port: 'lan2', vlans: [vlan] }]),
    );
    const design = applyPatch(pairDesign(), {
      links: {
        'cb-direct': {
          kind: 'cable',
          a: { device: 'fw-s0', port: 'lan2' },
          b: { device: 'fw-s1', port: 'lan2' },
        },
      },
      forwarders: {
        x0: { device: 'fw-s0', kind: 'bridge', circuits },
        x1: { device: 'fw-s1', kind: 'bridge', circuits },
      },
    } as MergePatch);
    expect(cutsOf(design)).toEqual({ tunnels: [], cables: ['cb-direct'], isSmallest: true });
  });
});

describe('removalPatch', () => {
  it('leaves a valid design: circuits go with their tunnel, a note loses its pin', () => {
    const design = applyPatch(meshDesign(3), {
      notes: { n1: { text: 'Leased', target: { collection: 'tunnels', id: 'tn-s1-s2-a' } } },
    });
    const after = applyPatch(
      design,
      removalPatch(indexNetwork(design), { tunnels: ['tn-s1-s2-a'], cables: ['cb-h-s0-a'] }),
    );
    expect(parseDesign(after)).toMatchObject({ ok: true });
    expect(after.forwarders['br-s1-a']!.circuits).not.toHaveProperty('tn-s1-s2-a');
    expect(after.notes.n1).toEqual({ text: 'Leased' });
  });
});

describe('isolationCure', () => {
  it('puts all tunnels of a full mesh into one group at every site, after which each hears each once', () => {
    const design = meshDesign(4);
    const { network, storm } = firstStorm(design);
    const cure = isolationCure(network, storm)!;
    expect(cure).toMatchObject({ group: 'mesh', forwarders: ['br-s0-a', 'br-s1-a', 'br-s2-a', 'br-s3-a'] });
    const cured = indexNetwork(applyPatch(design, cure.patch));
    expect(findStorms(floodGraph(cured))).toEqual([]);
    expect(reach(cured, { host: 'h-s2-a' }).deliveries.map(({ copies }) => copies)).toEqual([1, 1, 1]);
  });

  it('takes a group name that nothing else in these forwarders has', () => {
    const design = applyPatch(meshDesign(3), {
      forwarders: { 'br-s0-a': { circuits: { access: { isolation: 'mesh' } } } },
    });
    const { network, storm } = firstStorm(design);
    expect(isolationCure(network, storm)?.group).toBe('mesh-2');
  });

  it('has nothing to offer where sites would lose each other: a ring of four, or two tunnels between the same two', () => {
    const ring = applyPatch(meshDesign(4), {
      tunnels: { 'tn-s0-s2-a': null, 'tn-s1-s3-a': null },
      forwarders: {
        'br-s0-a': { circuits: { 'tn-s0-s2-a': null } },
        'br-s2-a': { circuits: { 'tn-s0-s2-a': null } },
        'br-s1-a': { circuits: { 'tn-s1-s3-a': null } },
        'br-s3-a': { circuits: { 'tn-s1-s3-a': null } },
      },
    });
    const one = firstStorm(ring);
    expect(one.storm.tunnels).toHaveLength(4);
    expect(isolationCure(one.network, one.storm)).toBeUndefined();
    const design = hubDesign(1);
    const circuit = { kind: 'tunnel', rank: 'b1', tunnel: 'tn-again' } as const;
    const twice = applyPatch(design, {
      tunnels: {
        'tn-again': {
          ...design.tunnels['tn-s0-s1-a']!,
          name: 'tn-again',
          a: { ...design.tunnels['tn-s0-s1-a']!.a, vni: 8 },
          b: { ...design.tunnels['tn-s0-s1-a']!.b, vni: 8 },
        },
      },
      forwarders: {
        'br-s0-a': { circuits: { again: circuit } },
        'br-s1-a': { circuits: { again: circuit } },
      },
    } as MergePatch);
    const two = firstStorm(twice);
    expect(two.storm.tunnels).toEqual(['tn-again', 'tn-s0-s1-a']);
    expect(isolationCure(two.network, two.storm)).toBeUndefined();
  });
});
