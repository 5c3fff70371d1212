import { describe, expect, it } from 'vitest';
import { elementIndex, reach } from '#engine/flood/reach.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';

const from = (design: Design, host: string, patch: MergePatch = {}) => {
  const { deliveries, storm } = reach(indexNetwork(applyPatch(design, patch)), { host });
  return { storm, copies: Object.fromEntries(deliveries.map(({ host: to, copies }) => [to, copies])) };
};

describe('reach', () => {
  it('takes a broadcast to the far host once, by a way that can be followed', () => {
    expect(reach(indexNetwork(pairDesign({ segments: ['a', 'b'] })), { host: 'h-s0-b' })).toEqual({
      deliveries: [
        {
          host: 'h-s1-b',
          copies: 1,
          path: [
            { collection: 'links', id: 'cb-h-s0-b', direction: 'a-to-b' },
            { collection: 'links', id: 'cb-s0-up1', direction: 'a-to-b', vlan: 120 },
            { collection: 'tunnels', id: 'tn-s0-s1-b', direction: 'a-to-b' },
            { collection: 'links', id: 'cb-s1-up1', direction: 'b-to-a', vlan: 120 },
            { collection: 'links', id: 'cb-h-s1-b', direction: 'b-to-a' },
          ],
        },
      ],
      tunnels: ['tn-s0-s1-b'],
      storm: false,
    });
  });

  it('stays at home when VNIs differ, though the frame crosses the transport', () => {
    const network = indexNetwork(
      applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } }),
    );
    expect(reach(network, { host: 'h-s0-a' })).toEqual({
      deliveries: [],
      tunnels: ['tn-s0-s1-a'],
      storm: false,
    });
  });

  it('takes one copy to each host of an isolated mesh and of a hub that relays', () => {
    const mesh = meshDesign(3, { join: { isolation: 'mesh' } });
    expect(from(mesh, 'h-s0-a').copies).toEqual({ 'h-s1-a': 1, 'h-s2-a': 1 });
    expect(from(hubDesign(2), 'h-s1-a').copies).toEqual({ 'h-s0-a': 1, 'h-s2-a': 1 });
    expect(from(hubDesign(2, { join: { isolation: 'spokes' } }), 'h-s1-a').copies).toEqual({ 'h-s0-a': 1 });
  });

  it('finds duplicates and the echo of the own frame where a mesh of three is isolated at one site only', () => {
    const isolated = { 'tn-s0-s1-a': { isolation: 'one' }, 'tn-s0-s2-a': { isolation: 'one' } };
    const patch = { forwarders: { 'br-s0-a': { circuits: isolated } } };
    expect(from(meshDesign(3), 'h-s0-a', patch)).toEqual({
      storm: false,
      copies: { 'h-s0-a': 2, 'h-s1-a': 2, 'h-s2-a': 2 },
    });
  });

  it('delivers without end in a storm', () => {
    expect(from(meshDesign(3), 'h-s0-a')).toEqual({
      storm: true,
      copies: { 'h-s0-a': 'endless', 'h-s1-a': 'endless', 'h-s2-a': 'endless' },
    });
  });

  it('crosses the active member of a pair alone', () => {
    const design = pairDesign({ hub: 'ha-pair' });
    const path = (patch: MergePatch) =>
      reach(indexNetwork(applyPatch(design, patch)), { host: 'h-s0-a' }).deliveries[0]!.path[1];
    expect(path({})).toMatchObject({ id: 'cb-s0-up1' });
    expect(path({ devices: { 'fw-s0': { active: 2 } } })).toMatchObject({ id: 'cb-s0-up2' });
  });

  it('merges two VLANs that one forwarder leads into each other', () => {
    const leak = {
      forwarders: {
        'br-s1-a': { circuits: { leak: { kind: 'port', rank: 'z', port: 'lan1', vlans: [120] } } },
      },
    } as const;
    expect(from(pairDesign({ segments: ['a', 'b'] }), 'h-s0-a', leak).copies).toMatchObject({
      'h-s1-a': 1,
      'h-s1-b': 1,
    });
  });

  it('starts at a port, untagged or in a VLAN', () => {
    const network = indexNetwork(pairDesign());
    const hosts = (source: Parameters<typeof reach>[1]) =>
      reach(network, source).deliveries.map(({ host }) => host);
    expect(hosts({ device: 'sw-s0', port: 'p2' })).toEqual(['h-s1-a']);
    expect(hosts({ device: 'fw-s0', port: 'lan1', vlan: 110 })).toEqual(['h-s1-a']);
    expect(hosts({ device: 'fw-s0', port: 'lan1' })).toEqual([]);
  });

  it('leaves elements out that are out of service', () => {
    const network = indexNetwork(hubDesign(2));
    const without = new Set([elementIndex(network, { collection: 'tunnels', id: 'tn-s0-s2-a' })!]);
    expect(reach(network, { host: 'h-s1-a' }, { without }).deliveries.map(({ host }) => host)).toEqual([
      'h-s0-a',
    ]);
    const uplink = new Set([elementIndex(network, { collection: 'links', id: 'cb-s0-up1' })!]);
    expect(
      reach(network, { host: 'h-s1-a' }, { without: uplink }).deliveries.map(({ host }) => host),
    ).toEqual(['h-s2-a']);
  });

  it('asks filters about the frame that is sent', () => {
    const policy = { arp: { rank: 'a0', action: 'permit', direction: 'both', frames: 'arp' } } as const;
    const network = indexNetwork(
      applyPatch(pairDesign(), { forwarders: { 'br-s0-a': { kind: 'cross-connect', policy } } }),
    );
    expect(reach(network, { host: 'h-s0-a' }).deliveries).toHaveLength(1);
    expect(reach(network, { host: 'h-s0-a' }, { frame: 'ipv4' }).deliveries).toEqual([]);
  });
});

describe('tags', () => {
  const trunked = (patch: MergePatch = {}) => {
    const whole = { circuits: { access: { vlans: 'all' } } } as const;
    return applyPatch(
      applyPatch(pairDesign({ segments: ['a', 'b'] }), {
        forwarders: { 'br-s0-a': whole, 'br-s1-a': whole, 'br-s0-b': null, 'br-s1-b': null },
      }),
      patch,
    );
  };
  const mode = (a: string, b: string): MergePatch => ({
    tunnels: { 'tn-s0-s1-a': { a: { innerTags: a }, b: { innerTags: b } } },
  });

  it('stay on frames of a trunk where both ends of the tunnel keep them', () => {
    const design = trunked(mode('keep', 'keep'));
    expect(from(design, 'h-s0-a').copies).toEqual({ 'h-s1-a': 1 });
    expect(from(design, 'h-s0-b').copies).toEqual({ 'h-s1-b': 1 });
  });

  it('are lost with the frame where the receiver takes none, and taken off where the sender keeps none', () => {
    expect(from(trunked(mode('keep', 'strip')), 'h-s0-a').copies).toEqual({});
    expect(from(trunked(mode('strip', 'keep')), 'h-s0-a').copies).toEqual({});
  });

  it('are translated where sites use different VLANs', () => {
    const renumbered = trunked({
      ...mode('keep', 'keep'),
      forwarders: { 'br-s1-a': { circuits: { access: { translate: { '310': 110 } } } } },
      devices: {
        'sw-s1': { ports: { p1: { allowedVlans: 'all' }, p2: { vlan: 310 } } },
        'fw-s1': { ports: { lan1: { allowedVlans: 'all' } } },
      },
    });
    expect(from(renumbered, 'h-s0-a').copies).toEqual({ 'h-s1-a': 1 });
    expect(from(renumbered, 'h-s1-a').copies).toEqual({ 'h-s0-a': 1 });
  });
});
