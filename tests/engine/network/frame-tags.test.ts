import { describe, expect, it } from 'vitest';
import {
  circuitIn,
  circuitOut,
  gatewayPortCarries,
  popTag,
  pushTag,
  switchIn,
  switchOut,
  tagList,
} from '#engine/network/frame-tags.ts';
import type { Port, PortCircuit } from '#engine/network/network.ts';

const port = (settings: Partial<Port>): Port => ({ number: 1, role: 'lan', ...settings });
const circuit = (settings: Partial<PortCircuit>): PortCircuit => ({
  kind: 'port',
  rank: 'a0',
  port: 'lan1',
  vlans: 'all',
  ...settings,
});
const doubled = pushTag(20, 110)!;

describe('tags of a frame', () => {
  it('are a stack of two at most', () => {
    expect(tagList(0)).toEqual([]);
    expect(tagList(doubled)).toEqual([110, 20]);
    expect(popTag(doubled)).toBe(20);
    expect(pushTag(doubled, 7)).toBeUndefined();
  });
});

describe('a port of a switch', () => {
  it('in access mode takes untagged frames alone, into its VLAN or VLAN 1', () => {
    const access = port({ mode: 'access', vlan: 110 });
    expect([switchIn(access, 0), switchIn(access, 110)]).toEqual([110, undefined]);
    expect([switchOut(access, 110), switchOut(access, 120)]).toEqual([0, undefined]);
    expect(switchIn(port({}), 0)).toBe(1);
  });

  it('in trunk mode takes what is allowed, and untagged frames where it has a native VLAN', () => {
    const trunk = port({ mode: 'trunk', allowedVlans: [110], nativeVlan: 5 });
    expect([110, 120, 0].map((tags) => switchIn(trunk, tags))).toEqual([110, undefined, 5]);
    expect([110, 120, 5].map((tags) => switchOut(trunk, tags))).toEqual([110, undefined, 0]);
    expect(switchIn(port({ mode: 'trunk' }), 0)).toBeUndefined();
    expect(switchIn(port({ mode: 'trunk' }), doubled)).toBe(doubled);
  });
});

describe('a port of a gateway', () => {
  it('restricts what circuits may take where it says so', () => {
    expect(gatewayPortCarries(port({}), 110)).toBe(true);
    expect(gatewayPortCarries(port({ mode: 'access', vlan: 110 }), 110)).toBe(false);
    expect(gatewayPortCarries(port({ mode: 'trunk', allowedVlans: [120] }), 110)).toBe(false);
    expect(gatewayPortCarries(port({ mode: 'trunk', nativeVlan: 110 }), 110)).toBe(false);
    expect(gatewayPortCarries(port({ mode: 'access', vlan: 110 }), 0)).toBe(true);
  });
});

describe('a circuit', () => {
  it('of a single VLAN takes its tag off and puts it back', () => {
    const one = circuit({ vlans: [110] });
    expect([circuitIn(one, 110), circuitIn(one, 120), circuitIn(one, 0)]).toEqual([0, undefined, undefined]);
    expect(circuitOut(one, 0)).toEqual([110]);
    expect(circuitOut(one, 20)).toEqual([doubled]);
    expect(circuitOut(one, doubled)).toEqual([]);
  });

  it('of several keeps tags, and merges them only where told to', () => {
    const several = circuit({ vlans: [110, 120] });
    expect([circuitIn(several, 120), circuitOut(several, 120), circuitOut(several, 0)]).toEqual([
      120,
      [120],
      [],
    ]);
    const merging = circuit({ vlans: [110, 120], tag: 'removed' });
    expect([circuitIn(merging, 120), circuitOut(merging, 0)]).toEqual([0, [110, 120]]);
  });

  it('translates both ways', () => {
    const one = circuit({ vlans: [310], translate: { '310': 110 } });
    expect([circuitIn(one, 310), circuitOut(one, 110), circuitOut(one, 310)]).toEqual([110, [310], []]);
  });

  it('of untagged frames carries no others', () => {
    const bare = circuit({ vlans: 'untagged' });
    expect([circuitIn(bare, 0), circuitIn(bare, 110)]).toEqual([0, undefined]);
    expect([circuitOut(bare, 0), circuitOut(bare, 110)]).toEqual([[0], []]);
  });
});
