import { describe, expect, it } from 'vitest';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { ProbeInput } from '#engine/trace/probe.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import { hubDesign } from '../../support/designs.ts';
import { arpFrom, packetTo } from './follow.ts';

// 200 sites, each with a gateway, a switch and three hosts.
const design = hubDesign(199, { hostsPerSite: 3 });

/** The quickest of many runs: what the work itself takes, whatever else the machine is at. */
const leastMs = (probe: ProbeInput): number => {
  floodGraph(indexNetwork(design));
  const times = Array.from({ length: 60 }, () => {
    const start = performance.now();
    traceFrame(design, probe);
    return performance.now() - start;
  });
  return Math.min(...times);
};

describe('a trace through 1,000 devices', () => {
  it('takes less than 5 ms to the farthest host', () => {
    expect(Object.keys(design.devices)).toHaveLength(1000);
    expect(leastMs(packetTo('h-s199-a', 1500, { dontFragment: true }))).toBeLessThan(5);
  });

  it('takes not much longer when a broadcast gets to each of 600 hosts, and lists every hop', () => {
    const answer = traceFrame(design, arpFrom('h-s0-a'));
    expect(answer).toMatchObject({ ok: true, deliveries: { length: 599 }, steps: { length: 1000 } });
    // About 4 ms where nothing else runs; the bound leaves room for a busy machine.
    expect(leastMs(arpFrom('h-s0-a'))).toBeLessThan(20);
  });
});
