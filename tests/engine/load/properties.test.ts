import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { loadOf } from '#engine/load/load-of.ts';
import type { LoadReport } from '#engine/load/load-of.ts';
import { reach } from '#engine/flood/reach.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { generatedDesign } from '../../support/generated-designs.ts';

const rate = fc.integer({ min: 1, max: 2_000_000_000 });
const mix = fc.array(
  fc.record({ packetBytes: fc.integer({ min: 68, max: 1600 }), weight: fc.integer({ min: 1, max: 9 }) }),
  { minLength: 1, maxLength: 3 },
);

/** Demands between any hosts, some of them without what others have. */
const loaded: fc.Arbitrary<Design> = fc
  .tuple(
    generatedDesign,
    fc.array(
      fc.record({
        from: fc.nat(99),
        to: fc.nat(99),
        forwardBps: rate,
        reverseBps: fc.option(rate, { nil: undefined }),
        mix: fc.option(mix, { nil: undefined, freq: 8 }),
        flows: fc.option(fc.integer({ min: 1, max: 9 }), { nil: undefined }),
      }),
      { minLength: 1, maxLength: 4 },
    ),
  )
  .map(([design, demands]) => {
    const hosts = Object.keys(design.devices).filter((id) => design.devices[id]!.kind === 'host');
    const entries = demands.map(({ from, to, ...rest }, i) => {
      const known = Object.fromEntries(Object.entries(rest).filter(([, value]) => value !== undefined));
      const host = (n: number) => ({ host: hosts[n % hosts.length]! });
      return [`d${i}`, { segment: 'a', from: host(from), to: host(to), ...known }] as const;
    });
    return applyPatch(design, { demands: Object.fromEntries(entries) } as MergePatch);
  });

const report = (design: Design): LoadReport => {
  const answer = loadOf(design);
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
};
const runs = { numRuns: 150 };

describe('the load of any design', () => {
  it('goes on from hop to hop undiminished, and adds up to what demands offer', () => {
    fc.assert(
      fc.property(loaded, (design) => {
        const { demands, elements } = report(design);
        const sums = new Map<string, number>();
        for (const { demand, ...ways } of demands)
          for (const way of ['forward', 'reverse'] as const) {
            const { direction } = ways[way];
            if (direction.state !== 'carried') continue;
            const offered = design.demands[demand]![way === 'forward' ? 'forwardBps' : 'reverseBps'];
            const packets = new Set(direction.hops.map(({ load }) => load?.packetsPerSecond));
            expect(packets.size).toBeLessThanOrEqual(1);
            for (const { crossing, load } of direction.hops) {
              if (load === undefined) continue;
              expect(load.innerRateBps).toBe(offered);
              expect(load.outerRateBps).toBeGreaterThanOrEqual(load.innerRateBps);
              // Rounded up to whole bits, the smallest rates look alike.
              expect(load.wireRateBps).toBeGreaterThanOrEqual(load.outerRateBps);
              expect(load.framesPerSecond).toBeGreaterThanOrEqual(load.packetsPerSecond);
              const key = `${crossing.collection} ${crossing.id} ${crossing.from}`;
              sums.set(key, (sums.get(key) ?? 0) + load.wireRateBps);
            }
          }
        for (const { element, direction, load } of elements) {
          if (direction !== 'a-to-b' && direction !== 'b-to-a') continue;
          const key = `${element.collection} ${element.id} ${direction === 'a-to-b' ? 'a' : 'b'}`;
          expect(load.wireRateBps).toBe(sums.get(key) ?? 0);
        }
      }),
      runs,
    );
  });

  it('is carried exactly where a broadcast gets', () => {
    fc.assert(
      fc.property(loaded, (design) => {
        const network = indexNetwork(design);
        for (const { demand, forward } of report(design).demands) {
          const { from, to } = design.demands[demand]!;
          if (!('host' in from) || !('host' in to) || from.host === to.host) continue;
          const delivery = reach(network, { host: from.host }).deliveries.find(
            ({ host }) => host === to.host,
          );
          expect(forward.direction.state).toBe(delivery === undefined ? 'parted' : 'carried');
          if (forward.direction.state !== 'carried') continue;
          expect(forward.direction.hops).toHaveLength(delivery!.path.length);
        }
      }),
      runs,
    );
  });

  it('never falls with a demand more', () => {
    fc.assert(
      fc.property(loaded, (design) => {
        const [last] = Object.keys(design.demands).sort().reverse();
        const fewer = report(applyPatch(design, { demands: { [last!]: null } }));
        const more = report(design);
        const keyOf = ({ element, direction, cipher }: LoadReport['elements'][number]) =>
          `${element.collection} ${element.id} ${direction} ${cipher}`;
        const loads = new Map(more.elements.map((one) => [keyOf(one), one.load]));
        for (const one of fewer.elements)
          for (const [name, value] of Object.entries(one.load))
            expect(loads.get(keyOf(one))![name as keyof typeof one.load]).toBeGreaterThanOrEqual(value);
        const used = new Map(more.limits.map((one) => [one.limit.key, one.used]));
        for (const one of fewer.limits) expect(used.get(one.limit.key)).toBeGreaterThanOrEqual(one.used);
      }),
      runs,
    );
  });
});
