import { describe, expect, it } from 'vitest';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import { hubDesign } from '../../support/designs.ts';
import { arpFrom, packetTo } from './follow.ts';

// 200 sites, each with a gateway, a switch and three hosts.
const design = hubDesign(199, { hostsPerSite: 3 });

describe('a trace through 1,000 devices', () => {
  it('follows a learned unicast along its one way, however large the design', () => {
    expect(Object.keys(design.devices)).toHaveLength(1000);
    const answer = traceFrame(design, packetTo('h-s199-a', 1396, { dontFragment: true }));
    expect(answer).toMatchObject({ ok: true, deliveries: { length: 1 } });
    expect(answer.ok && answer.steps.length).toBeLessThan(12);
  });

  it('lists every hop of a broadcast that gets to each of 600 hosts, once', () => {
    const answer = traceFrame(design, arpFrom('h-s0-a'));
    expect(answer).toMatchObject({ ok: true, deliveries: { length: 599 }, steps: { length: 1000 } });
  });
});
