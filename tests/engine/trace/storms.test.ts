import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { mostRepeatedSteps } from '#engine/trace/trace-tree.ts';
import { meshDesign } from '../../support/designs.ts';
import { arpFrom, changed, follow, groupFrom, packetTo, receivers, verdictsOf } from './follow.ts';

describe('a storm', () => {
  it('of three sites circulates: two copies for ever, one each way round', () => {
    const trace = follow(meshDesign(3), arpFrom('h-s0-a'));
    expect(trace.storm).toMatchObject({
      growth: 'circulates',
      hopsPerRound: 3,
      copiesByRound: [2, 2, 2, 2, 2, 2],
    });
    expect(trace.storm!.cycle.map(({ id }) => id).sort()).toEqual(['tn-s0-s1-a', 'tn-s0-s2-a', 'tn-s1-s2-a']);
    const closing = verdictsOf(trace).filter(
      (verdict) => verdict.code === 'circulating' && verdict.cycle !== undefined,
    );
    expect(closing).toMatchObject([{ cycle: [{}, {}, {}] }, { cycle: [{}, {}, {}] }]);
  });

  it('of four sites doubles at every hop: three copies become 24 in a round of three', () => {
    const { storm, words } = follow(meshDesign(4), arpFrom('h-s0-a'));
    expect(storm).toMatchObject({ growth: 'multiplies', hopsPerRound: 3 });
    expect(storm!.copiesByRound).toEqual([3, 24, 192, 1536, 12_288, 98_304]);
    expect(words).toContain('multiply');
  });

  it('of eight sites stays bounded, and every host is still seen to receive', () => {
    const trace = follow(meshDesign(8), arpFrom('h-s0-a'));
    // 56 directed tunnels and two cables a site each way: every way is opened once, its repetitions are leaves.
    expect(trace.steps.length).toBeLessThan(500);
    expect(Object.values(receivers(trace))).toEqual(Array.from({ length: 8 }, () => 'endless'));
    for (const { steps } of trace.deliveries) expect(steps.length).toBeGreaterThan(0);
  });

  it('that lowers the hop limit burns out: nothing circulates, and copies are counted, not listed', () => {
    const lowered: MergePatch = {
      profiles: { make: { name: 'Make', multicastTtl: 'lowered' } },
      devices: Object.fromEntries([0, 1, 2, 3].map((i) => [`fw-s${i}`, { profile: 'make' }])),
    };
    const probe = groupFrom('h-s0-a', '239.1.1.1', { hopLimit: 30 });
    const trace = follow(changed(meshDesign(4), lowered), probe);
    expect(trace.storm).toBeUndefined();
    const repeats = verdictsOf(trace).filter(({ code }) => code === 'repeats');
    expect(repeats.length).toBeGreaterThan(0);
    expect(trace.steps.length).toBeLessThan(4 * mostRepeatedSteps);
    for (const { copies } of trace.deliveries) expect(copies).toBeGreaterThan(1_000_000);
  });

  it('lets a packet that is too large die at the first tunnel', () => {
    const large = { ...packetTo('h-s1-a', 1500, { learned: false }) };
    const trace = follow(meshDesign(3), large);
    expect(trace.storm).toBeUndefined();
    expect(receivers(trace)).toEqual({});
  });
});
