import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { simpleImix } from '#engine/reference/frame-mixes.ts';
import type { WireRate } from '#engine/wire/wire-rate-of.ts';
import { wireRateOf } from '#engine/wire/wire-rate-of.ts';
import { bareStack } from '#engine/wire/stack.ts';
import share from '../../reference/overhead-share.json' with { type: 'json' };
import { arbitraryStack } from './arbitrary-stack.ts';
import { namedStack } from './named-stacks.ts';

type Asked = Parameters<typeof wireRateOf>;
function rateOf(...asked: Asked): WireRate {
  const answer = wireRateOf(...asked);
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
}

const full = [{ ipBytes: 1500, weight: 1 }];

describe('the rate on the wire', () => {
  it('of the simple mix follows from its mean frame', () => {
    const rate = rateOf({ packetsPerSecond: 12_000, mix: simpleImix }, namedStack('gcm-tunnel'));
    expect(rate.wireRateBps).toBe(share.simpleImix.meanWireBytes * 12_000 * 8);
    // 7 x 40 + 4 x 576 + 1500 = 4084 bytes in twelve packets.
    expect(rate.innerRateBps).toBe(4084 * 1000 * 8);
    // 12 x 487 / 4084 = 1.430950…, rounded up.
    expect(rate.growthPerMillion).toBe(1_430_951);
  });

  it('is given at every depth of the stack, from the inside out', () => {
    const rate = rateOf(
      { packetsPerSecond: 1000, mix: full },
      { ...namedStack('gcm-tunnel'), accessOverhead: 'pppoe' },
    );
    expect(rate.layers.map(({ layer, rateBps }) => [layer, rateBps / 8000])).toEqual([
      ['innerPacketBytes', 1500],
      ['innerFrameBytes', 1514],
      ['vxlanPacketBytes', 1550],
      ['outerIpPacketBytes', 1604],
      ['accessPacketBytes', 1612],
      ['frameBytes', 1630],
      ['wireBytes', 1650],
    ]);
  });

  it('leaves out depths that the stack does not have', () => {
    const rate = rateOf({ packetsPerSecond: 1, mix: full }, bareStack);
    expect(rate.layers.map(({ layer }) => layer)).not.toContain('vxlanPacketBytes');
  });

  it('counts every piece of a packet that is cut', () => {
    const carriage = { fragmentMtuBytes: 1500 };
    const rate = rateOf({ packetsPerSecond: 1000, mix: full }, namedStack('gcm-tunnel'), carriage);
    expect(rate.packetsPerSecond).toBe(1000);
    expect(rate.framesPerSecond).toBe(2000);
    expect(rate.wireRateBps).toBe((1538 + 162) * 8 * 1000);
    expect(rate.layers.map(({ packetsPerSecond }) => packetsPerSecond)).toEqual([
      1000, 1000, 1000, 2000, 2000, 2000, 2000,
    ]);
  });

  it('does not cut what fits', () => {
    const stack = namedStack('gcm-tunnel');
    const mix = [{ ipBytes: 1396, weight: 1 }];
    const traffic = { packetsPerSecond: 1000, mix };
    expect(rateOf(traffic, stack, { fragmentMtuBytes: 1500 })).toEqual(rateOf(traffic, stack));
  });

  it('is rounded up once, from the exact value', () => {
    // 10 bit/s of 1500-byte packets are 1/1200 packet a second, and 10 x 1538/1500 = 10.25 bit/s on the cable.
    expect(rateOf({ innerRateBps: 10, mix: full }, bareStack)).toMatchObject({
      packetsPerSecond: 1,
      innerRateBps: 10,
      wireRateBps: 11,
    });
  });

  it('of no traffic is nothing', () => {
    const rate = rateOf({ innerRateBps: 0, mix: full }, bareStack);
    expect(rate).toMatchObject({ packetsPerSecond: 0, framesPerSecond: 0, wireRateBps: 0 });
  });

  it('keeps the bit rate it was given, and does not depend on how weights are scaled', () => {
    const mixes = fc.array(
      fc.record({ ipBytes: fc.integer({ min: 20, max: 9000 }), weight: fc.integer({ min: 1, max: 1000 }) }),
      { minLength: 1, maxLength: 6 },
    );
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 10_000_000_000_000 }),
        mixes,
        arbitraryStack,
        (innerRateBps, mix, stack) => {
          const rate = rateOf({ innerRateBps, mix }, stack);
          expect(rate.innerRateBps).toBe(innerRateBps);
          expect(rate.wireRateBps).toBeGreaterThanOrEqual(innerRateBps);
          const scaled = mix.map((entry) => ({ ...entry, weight: entry.weight * 7 }));
          expect(rateOf({ innerRateBps, mix: scaled }, stack)).toEqual(rate);
          const outermost = rate.layers.at(-1);
          expect(outermost).toMatchObject({ layer: 'wireBytes', rateBps: rate.wireRateBps });
          const byDepth = rate.layers.map(({ rateBps }) => rateBps);
          expect(byDepth).toEqual([...byDepth].sort((one, other) => one - other));
        },
      ),
    );
  });
});

describe('a refusal', () => {
  it('names an impossible rate', () => {
    expect(wireRateOf({ innerRateBps: -1, mix: full }, bareStack)).toEqual({
      ok: false,
      problems: [{ field: 'innerRateBps', value: -1, expected: 'a whole number from 0 to 10000000000000' }],
    });
    expect(wireRateOf({ packetsPerSecond: 0.5, mix: full }, bareStack)).toMatchObject({
      problems: [{ field: 'packetsPerSecond', value: 0.5 }],
    });
  });

  it('names the entry of the mix that is wrong', () => {
    const mix = [...full, { ipBytes: 19, weight: 0 }];
    expect(wireRateOf({ packetsPerSecond: 1, mix }, bareStack)).toMatchObject({
      problems: [
        { field: 'mix.1.ipBytes', value: 19 },
        { field: 'mix.1.weight', value: 0 },
      ],
    });
    expect(wireRateOf({ packetsPerSecond: 1, mix: [] }, bareStack)).toMatchObject({
      problems: [{ field: 'mix', value: 0, expected: '1 to 64 packet sizes' }],
    });
  });

  it('names the packet that grows too long', () => {
    const mix = [...full, { ipBytes: 65_535, weight: 1 }];
    expect(wireRateOf({ packetsPerSecond: 1, mix }, namedStack('vxlan-v4'))).toMatchObject({
      problems: [{ field: 'mix.1.ipBytes', value: 65_535 }],
    });
  });

  it('names an MTU at which nothing can be cut', () => {
    const asked = wireRateOf({ packetsPerSecond: 1, mix: full }, namedStack('vxlan-v6'), {
      fragmentMtuBytes: 1200,
    });
    expect(asked).toMatchObject({ problems: [{ field: 'fragmentMtuBytes', value: 1200 }] });
  });
});
