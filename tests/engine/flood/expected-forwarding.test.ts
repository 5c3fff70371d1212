import { describe, expect, it } from 'vitest';
import { expectedForwarding } from '#engine/flood/expected-forwarding.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';

const at = (forwarder: string, design: Design, patch: MergePatch = {}) =>
  expectedForwarding(indexNetwork(applyPatch(design, patch)), forwarder);

describe('expectedForwarding', () => {
  it('has both hosts at either side: the own one on the access port, the far one on the tunnel', () => {
    expect(at('br-s0-a', pairDesign())).toEqual([
      { circuit: 'access', hosts: ['h-s0-a'], moving: [] },
      { circuit: 'tn-s0-s1-a', hosts: ['h-s1-a'], moving: [] },
    ]);
  });

  it('has the own host alone when VNIs differ', () => {
    const table = at('br-s0-a', pairDesign(), { tunnels: { 'tn-s0-s1-a': { a: { vni: 77 } } } });
    expect(table.map(({ hosts }) => hosts)).toEqual([['h-s0-a'], []]);
  });

  it('has everybody beyond a hub on the one tunnel to it', () => {
    expect(at('br-s1-a', hubDesign(3))).toContainEqual({
      circuit: 'tn-s0-s1-a',
      hosts: ['h-s0-a', 'h-s2-a', 'h-s3-a'],
      moving: [],
    });
  });

  it('names hosts whose entries move between circuits, as in a storm', () => {
    expect(at('br-s0-a', meshDesign(3))).toContainEqual({
      circuit: 'access',
      hosts: ['h-s0-a'],
      moving: ['h-s0-a'],
    });
  });
});
