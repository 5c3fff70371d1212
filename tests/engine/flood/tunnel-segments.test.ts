import { describe, expect, it } from 'vitest';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';

const carried = (design: Design, patch: MergePatch = {}) =>
  Object.fromEntries(tunnelSegments(indexNetwork(applyPatch(design, patch))));

describe('tunnelSegments', () => {
  const two = pairDesign({ segments: ['a', 'b'] });

  it('follows each VLAN through its circuits into its tunnel', () => {
    expect(carried(two)).toEqual({ 'tn-s0-s1-a': ['a'], 'tn-s0-s1-b': ['b'] });
  });

  it('joins what both ends say where the tunnel cannot come up', () => {
    const crossed = { forwarders: { 'br-s1-a': { circuits: { access: { vlans: [120] } } } } };
    expect(
      carried(two, { ...crossed, tunnels: { 'tn-s0-s1-a': { b: { vni: 999 } } } })['tn-s0-s1-a'],
    ).toEqual(['a', 'b']);
  });

  it('names several segments of a trunk in the order of their letters', () => {
    const whole = { circuits: { access: { vlans: 'all' } } } as const;
    const lettered = {
      segments: { a: { letter: 'AA' }, b: { letter: 'Z' } },
      forwarders: { 'br-s0-a': whole },
    };
    expect(carried(two, lettered)['tn-s0-s1-a']).toEqual(['b', 'a']);
  });

  it('follows a hub that only relays, and a policy that drops everything', () => {
    const relay = {
      segments: { a: { sites: { s0: null } } },
      devices: { 'h-s0-a': null },
      links: { 'cb-h-s0-a': null },
    };
    expect(carried(hubDesign(2), relay)).toEqual({ 'tn-s0-s1-a': ['a'], 'tn-s0-s2-a': ['a'] });
    const filtered = {
      forwarders: { 'br-s0-a': { kind: 'cross-connect' }, 'br-s1-a': { kind: 'cross-connect' } },
    };
    expect(carried(two, filtered)['tn-s0-s1-a']).toEqual(['a']);
  });

  it('has nothing to say of a tunnel that no circuit leads into', () => {
    const gone = { circuits: { 'tn-s0-s1-a': null } };
    expect(carried(two, { forwarders: { 'br-s0-a': gone, 'br-s1-a': gone } })['tn-s0-s1-a']).toEqual([]);
  });

  it('takes untagged circuits for the VLAN of their access port', () => {
    const patch = {
      devices: {
        'fw-s0': { ports: { lan2: { mode: 'access', vlan: 110 } } },
        'h-s0-a': null,
        'h-s1-a': null,
      },
      links: { 'cb-h-s0-a': null, 'cb-h-s1-a': null, 'cb-s0-up1': null, 'cb-s1-up1': null },
      forwarders: {
        'br-s0-a': { circuits: { access: { port: 'lan2', vlans: 'untagged' } } },
        'br-s1-a': null,
      },
    } as MergePatch;
    expect(carried(pairDesign(), patch)).toEqual({ 'tn-s0-s1-a': ['a'] });
  });
});
