import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { reach } from '#engine/flood/reach.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { meshDesign, pairDesign } from '../../support/designs.ts';

const on = { spanningTree: { mode: 'on' } } as const;
const stormsOf = (design: Design) => findStorms(floodGraph(indexNetwork(design)));
const switchIn = (site: string, name: string, ports: number) => ({
  kind: 'switch',
  site,
  name,
  ports: Object.fromEntries(
    Array.from({ length: ports }, (_, i) => [`p${i + 1}`, { number: i + 1, role: 'lan', mode: 'trunk' }]),
  ),
});
const cable = (a: string, portA: string, b: string, portB: string) => ({
  kind: 'cable',
  a: { device: a, port: portA },
  b: { device: b, port: portB },
});
/** Two more switches that make a ring with the site's own. */
const ring = applyPatch(pairDesign(), {
  devices: {
    'sw-s0': {
      ports: { p7: { number: 7, role: 'lan', mode: 'trunk' }, p8: { number: 8, role: 'lan', mode: 'trunk' } },
    },
    'sw-x': switchIn('s0', 'sw-x', 3),
    'sw-y': switchIn('s0', 'sw-y', 3),
  },
  links: {
    'cb-0x': cable('sw-s0', 'p7', 'sw-x', 'p1'),
    'cb-xy': cable('sw-x', 'p2', 'sw-y', 'p1'),
    'cb-y0': cable('sw-y', 'p2', 'sw-s0', 'p8'),
  },
} as MergePatch);
const settings = (ids: readonly string[], of: MergePatch = on): MergePatch => ({
  devices: Object.fromEntries(ids.map((id) => [id, { settings: of }])),
});

describe('spanning tree on a ring of switches', () => {
  it('ends the storm where it is on at all of them, and everybody is still reached once', () => {
    expect(stormsOf(ring)).toHaveLength(1);
    const treed = applyPatch(ring, settings(['sw-s0', 'sw-x', 'sw-y']));
    expect(stormsOf(treed)).toEqual([]);
    expect(reach(indexNetwork(treed), { host: 'h-s1-a' }).deliveries).toMatchObject([
      { host: 'h-s0-a', copies: 1 },
    ]);
  });

  it('ends it on two cables between two of them and on a cable from one to itself', () => {
    const more = applyPatch(ring, {
      links: { 'cb-xy2': cable('sw-x', 'p3', 'sw-y', 'p3'), 'cb-y0': null },
    } as MergePatch);
    expect(stormsOf(more)).toHaveLength(1);
    expect(stormsOf(applyPatch(more, settings(['sw-x', 'sw-y'])))).toEqual([]);
    const own = applyPatch(ring, {
      links: { 'cb-xy': null, 'cb-own': cable('sw-x', 'p2', 'sw-x', 'p3') },
    } as MergePatch);
    expect(stormsOf(own)).toHaveLength(1);
    expect(stormsOf(applyPatch(own, settings(['sw-x'])))).toEqual([]);
  });

  it('does not cover a switch that takes no part and drops BPDUs, as one does of which nothing is known', () => {
    const two = applyPatch(ring, settings(['sw-s0', 'sw-x']));
    expect(stormsOf(two)).toHaveLength(1);
    const passing = applyPatch(two, {
      profiles: { plain: { name: 'Plain switch', reservedGroups: { '00': 'pass' } } },
      devices: { 'sw-y': { profile: 'plain', ports: { p1: { nativeVlan: 1 }, p2: { nativeVlan: 1 } } } },
    });
    expect(stormsOf(passing)).toEqual([]);
  });

  it('blocks away from the bridge with the best priority, and rather on the slow cable', () => {
    const rooted = applyPatch(ring, {
      devices: {
        'sw-s0': { settings: { spanningTree: { mode: 'on', priority: 4096 } } },
        'sw-x': { settings: on },
        'sw-y': { settings: on, ports: { p2: { speedBps: 10_000_000 } } },
      },
    });
    const { forwarding } = floodGraph(indexNetwork(rooted));
    const out: number[] = [];
    const y = forwarding.places.byDevice.get('sw-y')![0]!;
    forwarding.leave(y, -1, 110, (element) => out.push(element));
    const { bundles } = indexNetwork(rooted);
    expect(out.map((element) => bundles[element]!.cables[0])).toEqual(['cb-xy']);
  });
});

describe('spanning tree across the overlay', () => {
  const customerCable = applyPatch(pairDesign(), {
    devices: Object.fromEntries(
      ['sw-s0', 'sw-s1'].map((id) => [
        id,
        { settings: on, ports: { p9: { number: 9, role: 'lan', mode: 'trunk', nativeVlan: 1 } } },
      ]),
    ),
    links: { 'cb-quay': cable('sw-s0', 'p9', 'sw-s1', 'p9') },
  } as MergePatch);

  it('does not cover a customer cable while gateways drop BPDUs', () => {
    expect(stormsOf(customerCable)).toHaveLength(1);
  });

  it('does not cover it either where gateways pass BPDUs but carry tagged frames alone, for BPDUs are untagged', () => {
    const passing = {
      profiles: { pass: { name: 'Passes', reservedGroups: { '00': 'pass' } } },
      devices: { 'fw-s0': { profile: 'pass' }, 'fw-s1': { profile: 'pass' } },
    } as const;
    expect(stormsOf(applyPatch(customerCable, passing))).toHaveLength(1);
    const whole = { circuits: { access: { vlans: 'all' } } } as const;
    const keep = { innerTags: 'keep' } as const;
    const trunked = applyPatch(applyPatch(customerCable, passing), {
      forwarders: { 'br-s0-a': whole, 'br-s1-a': whole },
      tunnels: { 'tn-s0-s1-a': { a: keep, b: keep } },
    });
    expect(stormsOf(trunked)).toEqual([]);
    expect(stormsOf(applyPatch(trunked, { devices: { 'fw-s1': { profile: null } } }))).toHaveLength(1);
  });

  it('covers a mesh where it is on at every bridge, and none where one has it off', () => {
    const mesh = meshDesign(3);
    const all = Object.fromEntries(Object.keys(mesh.forwarders).map((id) => [id, on]));
    expect(stormsOf(applyPatch(mesh, { forwarders: all }))).toEqual([]);
    expect(
      stormsOf(applyPatch(mesh, { forwarders: { ...all, 'br-s1-a': { spanningTree: { mode: 'off' } } } })),
    ).toHaveLength(1);
    const network = indexNetwork(applyPatch(mesh, { forwarders: all }));
    expect(reach(network, { host: 'h-s0-a' }).deliveries).toMatchObject([
      { host: 'h-s1-a', copies: 1 },
      { host: 'h-s2-a', copies: 1 },
    ]);
  });
});

describe('spanning tree among any switches cabled in any way', () => {
  const cabled = fc.array(fc.tuple(fc.nat(4), fc.nat(4)), { minLength: 1, maxLength: 10 });
  /** Five switches with a host each, and a cable for each pair given. */
  const hall = (pairs: readonly (readonly [number, number])[], isOn: boolean) => {
    const ports = (i: number) => ({
      host: { number: 1, role: 'lan', mode: 'access', vlan: 110 },
      ...Object.fromEntries(
        pairs.flatMap((pair, n) =>
          ([0, 1] as const)
            .filter((side) => pair[side] === i)
            .map((side) => [
              `c${n}-${side}`,
              { number: 2 * n + side + 2, role: 'lan', mode: 'trunk', speedBps: 1_000_000 * (n + 1) },
            ]),
        ),
      ),
    });
    const indices = [0, 1, 2, 3, 4];
    return applyPatch(pairDesign(), {
      devices: Object.fromEntries(
        indices.flatMap((i) => [
          [
            `x${i}`,
            { kind: 'switch', site: 's0', name: `x${i}`, ...(isOn ? { settings: on } : {}), ports: ports(i) },
          ],
          [
            `host${i}`,
            {
              kind: 'host',
              site: 's0',
              name: `host${i}`,
              segment: 'a',
              ports: { p1: { number: 1, role: 'lan' } },
            },
          ],
        ]),
      ),
      links: Object.fromEntries([
        ...indices.map((i) => [`h${i}`, cable(`host${i}`, 'p1', `x${i}`, 'host')]),
        ...pairs.map(([a, b], n) => [`c${n}`, cable(`x${a}`, `c${n}-0`, `x${b}`, `c${n}-1`)]),
      ]),
    } as MergePatch);
  };

  it('leaves no storm and takes one copy to everybody that any cable leads to', () => {
    fc.assert(
      fc.property(cabled, (pairs) => {
        const [open, treed] = [indexNetwork(hall(pairs, false)), indexNetwork(hall(pairs, true))];
        expect(findStorms(floodGraph(treed))).toEqual([]);
        for (const host of ['host0', 'host3']) {
          const before = reach(open, { host }).deliveries.map(({ host: to }) => to);
          const after = reach(treed, { host }).deliveries;
          expect(after.map(({ host: to }) => to)).toEqual(before.filter((to) => to !== host));
          expect(after.every(({ copies }) => copies === 1)).toBe(true);
        }
      }),
      { numRuns: 150 },
    );
  });
});
