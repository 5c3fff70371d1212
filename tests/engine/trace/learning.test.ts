import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, crossed, follow, packetTo, reasonsOf, receivers, verdictsOf } from './follow.ts';

describe('unicast that the bridges have learned', () => {
  it('takes one way, and each hop names where the next one was learned', () => {
    const trace = follow(hubDesign(3), packetTo('h-s2-a', 84));
    expect(trace.steps.map(({ crossing }) => crossing?.id)).toEqual([
      undefined,
      'cb-h-s0-a',
      'cb-s0-up1',
      'tn-s0-s2-a',
      'cb-s2-up1',
      'cb-h-s2-a',
    ]);
    expect(crossed(trace, 'cb-s0-up1').decisions).toContainEqual(
      expect.objectContaining({ code: 'learned', behind: { collection: 'tunnels', id: 'tn-s0-s2-a' } }),
    );
    expect(trace.words).toBe('It reaches h-s2-a');
  });

  it('is flooded while nobody has heard the destination, and ignored by those it isn’t for', () => {
    const trace = follow(hubDesign(2), packetTo('h-s2-a', 84, { learned: false }));
    expect(receivers(trace)).toEqual({ 'h-s2-a': 1 });
    expect(reasonsOf(trace)).toEqual([{ code: 'not-addressed', device: 'h-s1-a' }]);
    expect(crossed(trace, 'cb-s0-up1').decisions).toContainEqual(
      expect.objectContaining({ code: 'flooded', because: 'not-learned' }),
    );
  });

  it('does not storm in a mesh that storms with broadcasts, and says that the entry moves', () => {
    const trace = follow(meshDesign(3), packetTo('h-s1-a', 84));
    expect(trace.storm).toBeUndefined();
    expect(receivers(trace)).toEqual({ 'h-s1-a': 1 });
    expect(crossed(trace, 'cb-s0-up1').decisions).toContainEqual(
      expect.objectContaining({ code: 'learned', moving: true }),
    );
    expect(follow(meshDesign(3), packetTo('h-s1-a', 84, { learned: false })).storm).toBeDefined();
  });

  it('follows stale entries that are stated: to the wrong site, or back where it came from', () => {
    const stale = follow(hubDesign(2), packetTo('h-s1-a', 84), {
      learned: [
        { switch: 'sw-s0', port: 'p1' },
        { forwarder: 'br-s0-a', circuit: 'tn-s0-s2-a' },
        { forwarder: 'br-s2-a', circuit: 'access' },
        { switch: 'sw-s2', port: 'p1' },
      ],
    });
    expect(receivers(stale)).toEqual({});
    expect(reasonsOf(stale)).toEqual([{ code: 'same-port', device: 'sw-s2' }]);
    expect(stale.words).toContain('does not reach h-s1-a');
  });

  it('goes straight through a cross-connect, which looks at no addresses', () => {
    const policy: MergePatch = {
      'br-s0-a': {
        kind: 'cross-connect',
        policy: { all: { rank: 'a0', action: 'permit', direction: 'both', frames: 'any' } },
      },
    };
    const trace = follow(changed(pairDesign(), { forwarders: policy }), packetTo('h-s1-a', 84));
    expect(crossed(trace, 'cb-s0-up1').decisions).toContainEqual(
      expect.objectContaining({ code: 'flooded', because: 'one-to-one' }),
    );
    expect(verdictsOf(trace).map(({ code }) => code)).toEqual(['delivered']);
  });

  it('towards a host of another segment is followed with a word that a router belongs between them', () => {
    const trace = follow(pairDesign({ segments: ['a', 'b'] }), packetTo('h-s1-b', 84));
    expect(trace.steps[0]!.decisions.map(({ code }) => code)).toContain('other-segment');
    expect(receivers(trace)).toEqual({});
    // A switch learns for each VLAN apart: in this one it has never heard the destination.
    expect(crossed(trace, 'cb-h-s0-a').decisions).toContainEqual(
      expect.objectContaining({ code: 'flooded', because: 'not-learned' }),
    );
  });
});
