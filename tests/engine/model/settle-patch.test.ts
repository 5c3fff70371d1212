import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { changedProblems } from '#engine/model/parse-design.ts';
import { settlePatch } from '#engine/model/settle-patch.ts';
import { pairDesign } from '../../support/designs.ts';

const before = pairDesign();
const settle = (mine: MergePatch, theirs: MergePatch) =>
  settlePatch(applyPatch(before, theirs), mine, [theirs]);

describe('an edit that meets a deletion', () => {
  it('lapses where it changes a part of what is gone', () => {
    const mine = { tunnels: { 'tn-s0-s1-a': { a: { vni: 7 } } }, transports: { coast: { mtu: 1492 } } };
    expect(settle(mine, { tunnels: { 'tn-s0-s1-a': null } })).toEqual({
      transports: { coast: { mtu: 1492 } },
    });
  });

  it('lapses inside an entry as well: a port that is gone', () => {
    const mine = { devices: { 'sw-s0': { name: 'sw-0', ports: { p2: { vlan: 120 } } } } };
    expect(settle(mine, { devices: { 'sw-s0': { ports: { p2: null } } } })).toEqual({
      devices: { 'sw-s0': { name: 'sw-0' } },
    });
  });

  it('stands where it makes the whole thing anew', () => {
    const mine = { sites: { s1: { name: 'Gullhaven again' } } };
    expect(settle(mine, { sites: { s1: null } })).toEqual(mine);
  });

  it('is left alone where nobody deleted anything, even when it is wrong', () => {
    const mine = { transports: { coast: { mtu: 1 } } };
    expect(settle(mine, { sites: { s1: { name: 'G' } } })).toEqual(mine);
    expect(changedProblems(before, applyPatch(before, mine))).toHaveLength(1);
  });

  it('lapses inside an entry whose id holds a dot', () => {
    const site = { ...before.sites['s1']!, name: 'Quay 1.2' };
    const dotted = applyPatch(before, { sites: { 'quay-1.2': site } });
    const theirs = { sites: { 'quay-1.2': null } };
    const mine = { sites: { 'quay-1.2': { notes: 'Ask for the key' }, s1: { notes: 'Ring first' } } };
    expect(settlePatch(applyPatch(dotted, theirs), mine, [theirs])).toEqual({
      sites: { s1: { notes: 'Ring first' } },
    });
  });

  it('lapses where it sets what the thing no longer has, since it became another kind', () => {
    const access = (change: MergePatch): MergePatch => ({
      forwarders: { 'br-s0-a': { circuits: { access: change } } },
    });
    const theirs = access({ kind: 'tunnel', tunnel: 'tn-s0-s1-a', port: null, vlans: null });
    expect(settle(access({ vlans: [120] }), theirs)).toEqual({});
    expect(settle(access({ vlans: [120], isolation: 'far' }), theirs)).toEqual(access({ isolation: 'far' }));
  });
});
