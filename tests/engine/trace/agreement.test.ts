import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { FrameClass } from '#engine/flood/frame-classes.ts';
import { reach } from '#engine/flood/reach.ts';
import type { Design } from '#engine/model/design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { ProbeInput } from '#engine/trace/probe.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { tunnelStack } from '#engine/wire/tunnel-stack.ts';
import type { TagCount } from '#engine/wire/stack.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { meshDesign } from '../../support/designs.ts';
import { arpFrom, follow, groupFrom, packetTo } from './follow.ts';

const hostsOf = (design: Design): readonly string[] =>
  Object.keys(design.devices).filter((id) => design.devices[id]!.kind === 'host');
const runs = { numRuns: 120 };

const floods: { readonly [frame in FrameClass]: (host: string) => ProbeInput } = {
  arp: arpFrom,
  ipv4: (host) => ({
    source: { host },
    destination: { kind: 'broadcast' },
    packet: { kind: 'ip', version: 'ipv4', packetBytes: 100, protocol: 17 },
  }),
  ipv6: (host) => groupFrom(host, 'ff02::1', { protocol: 58, hopLimit: 255 }),
  other: (host) => ({
    source: { host },
    destination: { kind: 'broadcast' },
    packet: { kind: 'non-ip', frameBytes: 64, etherType: 0x88b5 },
  }),
};

describe('a trace and the flood graph', () => {
  it('agree on who receives a broadcast of any class, in how many copies, and whether it storms', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const network = indexNetwork(design);
        for (const host of hostsOf(design))
          for (const frame of Object.keys(floods) as FrameClass[]) {
            const found = reach(network, { host }, { frame });
            const trace = follow(design, floods[frame](host));
            const copies = found.deliveries.map(({ host: device, copies: count }) => [device, count]);
            expect(trace.deliveries.map(({ device, copies: count }) => [device, count])).toEqual(copies);
            expect(trace.storm !== undefined).toBe(found.storm);
            for (const { steps, copies: count } of trace.deliveries)
              if (count !== 'endless') expect(steps).toHaveLength(count);
              else expect(steps.length).toBeGreaterThan(0);
          }
      }),
      runs,
    );
  }, 60_000);

  it('agree that unlearned unicast gets where a flood of its kind gets, in designs that filter nothing', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        if (Object.values(design.forwarders).some(({ kind }) => kind === 'cross-connect')) return;
        const network = indexNetwork(design);
        const [source, ...others] = hostsOf(design);
        const heard = new Set(reach(network, { host: source! }).deliveries.map(({ host }) => host));
        for (const host of others) {
          const probe = { ...packetTo(host, 84, { learned: false }), source: { host: source! } };
          expect(follow(design, probe).deliveries.map(({ device }) => device)).toEqual(
            heard.has(host) ? [host] : [],
          );
        }
      }),
      runs,
    );
  }, 60_000);
});

describe('every trace', () => {
  it('is JSON, the same each time, a tree whose leaves alone have verdicts, with the bytes that wire computes', () => {
    fc.assert(
      fc.property(generatedDesign, fc.nat(4), fc.boolean(), (design, pick, learned) => {
        const hosts = hostsOf(design);
        const host = hosts.at(-1)!;
        const probes: readonly ProbeInput[] = [
          arpFrom(hosts[0]!),
          { ...packetTo(host, 1396, { learned }), source: { host: hosts[0]! } },
          { ...packetTo(host, 1480, { learned, dontFragment: true }), source: { host: hosts[0]! } },
          groupFrom(hosts[0]!, '224.0.0.5', { hopLimit: 1 }),
          { ...arpFrom(hosts[0]!), source: { device: 'sw-s0', port: 'p1' }, tags: [110] },
        ];
        const probe = probes[pick]!;
        if (probe.destination.kind === 'host' && hosts.length < 2) return;
        const answer = traceFrame(design, probe);
        expect(answer.ok).toBe(true);
        if (!answer.ok) return;
        expect(JSON.parse(JSON.stringify(answer))).toStrictEqual(answer);
        expect(traceFrame(design, probe)).toStrictEqual(answer);
        const parents = new Set(answer.steps.map(({ parent }) => parent));
        const network = indexNetwork(design);
        answer.steps.forEach((step, i) => {
          expect(step.index).toBe(i);
          expect(step.parent === undefined).toBe(i === 0);
          if (step.parent !== undefined) expect(step.parent).toBeLessThan(i);
          expect(step.verdict === undefined).toBe(parents.has(i));
          if (step.crossing?.collection !== 'tunnels' || step.wire === undefined) return;
          const { id, direction } = step.crossing;
          const end = direction === 'a-to-b' ? 'a' : 'b';
          const { stack } = tunnelStack(network, id, end, step.tags.length as TagCount)!;
          const payload = step.wire.layers.find((layer) => layer.id === 'inner-packet')!;
          const bytes = stackLayers({
            innerPacketBytes: payload.bytes,
            innerIpVersion: 'ipv4',
            stack: stack!,
          });
          expect(bytes).toMatchObject({
            ok: true,
            totals: { outerIpPacketBytes: step.wire.outerIpPacketBytes, frameBytes: step.wire.frameBytes },
          });
        });
      }),
      { numRuns: 400 },
    );
  }, 60_000);

  it('says something on every hop, in names and never in placeholders', () => {
    for (const probe of [arpFrom('h-s0-a'), packetTo('h-s1-a', 1500)])
      for (const { decisions, verdict, index } of follow(meshDesign(4), probe).steps) {
        expect([...decisions.map(({ words }) => words), verdict?.words ?? ''].join('')).not.toBe('');
        for (const { words } of decisions) expect(words).not.toMatch(/undefined|\[object/);
        expect(`${index} ${verdict?.words}`).not.toMatch(/\[object/);
      }
  });
});
