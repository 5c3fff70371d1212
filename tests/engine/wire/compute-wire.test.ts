import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { simpleImix } from '#engine/reference/frame-mixes.ts';
import { computeWire, type WireResult } from '#engine/wire/compute-wire.ts';
import { MOST_PACKETS_PER_SECOND } from '#engine/wire/wire-rate-of.ts';
import { parseWireRequest, wireRequestSchema, type WireRequestInput } from '#engine/wire/wire-request.ts';
import { arbitraryIpVersion, arbitraryStack } from './arbitrary-stack.ts';

const gcmTunnel = {
  vxlanOver: 'ipv4',
  esp: { mode: 'tunnel', transform: 'aes-gcm-16', outerIp: 'ipv4' },
} as const;

function resultOf(input: WireRequestInput): WireResult {
  const answer = computeWire(wireRequestSchema.parse(input));
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
}

describe('a calculation', () => {
  it('from the inner packet outwards gives layers, totals and the underlay needed', () => {
    const { outward, inward } = resultOf({ stack: gcmTunnel, innerPacketBytes: 1500 });
    expect(inward).toBeUndefined();
    expect(outward).toMatchObject({
      outerIpVersion: 'ipv4',
      totals: { innerFrameBytes: 1514, vxlanPacketBytes: 1550, outerIpPacketBytes: 1604, wireBytes: 1642 },
      neededUnderlay: { transportMtuBytes: 1604, accessPayloadBytes: 1604 },
    });
    expect(outward?.layers.map((layer) => layer.id)).toContain('esp-padding');
    expect(outward).not.toHaveProperty('fits');
    expect(outward).not.toHaveProperty('ok');
  });

  it('from the transport inwards gives the largest packet and what to set', () => {
    const { inward, outward } = resultOf({ stack: gcmTunnel, transportMtuBytes: 1500 });
    expect(outward).toBeUndefined();
    expect(inward).toMatchObject({
      largestInnerPacketBytes: 1396,
      totals: { innerPacketBytes: 1396, outerIpPacketBytes: 1500 },
      settings: { hostMtuBytes: 1396, tcpMssBytes: { ipv4: 1356, ipv6: 1336 } },
    });
  });

  it('both ways says whether the packet fits, and the pieces if it were cut', () => {
    const request = { stack: gcmTunnel, innerPacketBytes: 1500, transportMtuBytes: 1500 };
    const { outward } = resultOf(request);
    expect(outward?.fits).toBe(false);
    expect(outward?.fragments?.pieces.map((piece) => piece.packetBytes)).toEqual([1500, 124]);
    expect(resultOf({ ...request, innerPacketBytes: 1396 }).outward).toMatchObject({ fits: true });
  });

  it('takes what access overhead leaves of the transport as the limit', () => {
    const stack = { ...gcmTunnel, accessOverhead: 'pppoe' as const };
    const { outward, inward } = resultOf({ stack, innerPacketBytes: 1396, transportMtuBytes: 1500 });
    expect(outward?.fits).toBe(false);
    expect(inward).toMatchObject({ limitedBy: 'access', largestInnerPacketBytes: 1388 });
  });

  it('of rates gives needs, what a cable holds, goodput and the limit of one flow', () => {
    const result = resultOf({
      stack: gcmTunnel,
      transportMtuBytes: 1500,
      traffic: { packetsPerSecond: 12_000, mix: simpleImix.map((entry) => ({ ...entry })) },
      linkBps: 1_000_000_000,
      tcp: { flow: { windowBytes: 65_535, rttUs: 20_000 } },
    });
    expect(result.rates).toMatchObject({ packetsPerSecond: 12_000, wireRateBps: 46_752_000 });
    expect(result.capacity).toMatchObject({ packetsPerSecond: 256_673 });
    expect(result.goodput).toMatchObject({ segmentBytes: 1344, goodputBps: 873_862_158 });
    expect(result.singleFlow).toMatchObject({ limitedBy: 'window', limitBps: 26_214_000 });
  });

  it('takes goodput from full packets that pass, unless longer ones are cut', () => {
    const request = {
      stack: gcmTunnel,
      innerPacketBytes: 1500,
      transportMtuBytes: 1500,
      linkBps: 1_000_000_000,
      tcp: {},
    };
    expect(resultOf(request).goodput).toMatchObject({ segmentBytes: 1344, framesPerSegment: 1 });
    expect(resultOf({ ...request, fragmentOuter: true }).goodput).toMatchObject({
      segmentBytes: 1448,
      framesPerSegment: 2,
    });
  });

  it('leaves out parts that the request gives no ground for', () => {
    expect(Object.keys(resultOf({ stack: gcmTunnel, innerPacketBytes: 1500 })).sort()).toEqual([
      'ok',
      'outward',
    ]);
  });

  it('survives JSON', () => {
    const answer = resultOf({ stack: gcmTunnel, innerPacketBytes: 1500, transportMtuBytes: 1500 });
    expect(JSON.parse(JSON.stringify(answer))).toEqual(answer);
  });
});

describe('a calculation that cannot be made', () => {
  const problemsOf = (input: WireRequestInput) => {
    const answer = computeWire(wireRequestSchema.parse(input));
    return answer.ok ? [] : answer.problems;
  };

  it('names the transport over which nothing fits', () => {
    expect(problemsOf({ stack: gcmTunnel, transportMtuBytes: 100 })).toEqual([
      { field: 'transportMtuBytes', value: 100, expected: 'at least 152: the smallest packet grows to that' },
    ]);
  });

  it('names an inner packet that grows too long', () => {
    expect(problemsOf({ stack: gcmTunnel, innerPacketBytes: 65_535 })).toMatchObject([
      { field: 'innerPacketBytes', value: 65_535 },
    ]);
  });

  it('names the transport that is no IPv6 link', () => {
    const stack = { vxlanOver: 'ipv6' } as const;
    expect(problemsOf({ stack, innerPacketBytes: 1500, transportMtuBytes: 1200 })).toMatchObject([
      { field: 'transportMtuBytes', value: 1200 },
    ]);
  });

  it('names the entry of a mix in the words of the request', () => {
    const traffic = { packetsPerSecond: 1, mix: [{ ipBytes: 65_535, weight: 1 }] };
    expect(problemsOf({ stack: gcmTunnel, traffic })).toMatchObject([{ field: 'traffic.mix.0.ipBytes' }]);
  });

  it('names the packet that leaves no room for TCP', () => {
    expect(problemsOf({ stack: gcmTunnel, innerPacketBytes: 45, linkBps: 1000, tcp: {} })).toMatchObject([
      { field: 'innerPacketBytes', value: 45 },
    ]);
  });
});

describe('a request from outside', () => {
  const problemsOf = (input: unknown) => {
    const answer = parseWireRequest(input);
    return answer.ok ? [] : answer.problems;
  };

  it('is completed with what adds nothing', () => {
    expect(parseWireRequest({ stack: {}, innerPacketBytes: 1500 })).toEqual({
      ok: true,
      request: {
        stack: {
          innerTags: 0,
          vxlanOver: 'none',
          innerFrames: 'padded',
          esp: { mode: 'none' },
          accessOverhead: 'none',
          accessPayloadBytes: 1500,
          outerTags: 0,
        },
        innerIpVersion: 'ipv4',
        innerPacketBytes: 1500,
        fragmentOuter: false,
      },
    });
  });

  it.each([
    ['no object', 'hello', 'request', 'hello', 'an object'],
    ['no stack', { innerPacketBytes: 1 }, 'stack', undefined, 'an object'],
    [
      'a text for a number',
      { stack: {}, innerPacketBytes: '1500' },
      'innerPacketBytes',
      '1500',
      'a whole number from 1 to 65575',
    ],
    ['three tags', { stack: { outerTags: 3 }, innerPacketBytes: 1500 }, 'stack.outerTags', 3, '0, 1 or 2'],
    [
      'an unknown transform',
      { stack: { esp: { mode: 'transport', transform: 'rot13' } }, innerPacketBytes: 1500 },
      'stack.esp.transform',
      'rot13',
      'one of aes-gcm-16, aes-gcm-12, aes-gcm-8, chacha20-poly1305, aes-cbc, aes-ctr, null, 3des-cbc, des-cbc',
    ],
    [
      'an unknown mode',
      { stack: { esp: { mode: 'both' } }, innerPacketBytes: 1500 },
      'stack.esp.mode',
      'both',
      'mode none, tunnel or transport',
    ],
    [
      'an unknown field',
      { stack: { vxlan: true }, innerPacketBytes: 1500 },
      'stack.vxlan',
      true,
      'no field of this name; leave it out or correct its spelling',
    ],
    [
      'a misspelt overhead',
      { stack: { accessOverhead: 'ppp' }, innerPacketBytes: 1500 },
      'stack.accessOverhead',
      'ppp',
      'none, pppoe, or a whole number from 0 to 256',
    ],
    [
      'nothing to compute',
      { stack: {} },
      'innerPacketBytes',
      undefined,
      'an inner packet length, or transportMtuBytes, or traffic: one of them at least',
    ],
    [
      'cutting without an MTU',
      { stack: {}, innerPacketBytes: 1500, fragmentOuter: true },
      'transportMtuBytes',
      undefined,
      'the MTU at which outermost packets are cut; leave out fragmentOuter to send them whole',
    ],
    [
      'two rates',
      { stack: {}, traffic: { innerRateBps: 1, packetsPerSecond: 1, mix: [{ ipBytes: 40, weight: 1 }] } },
      'traffic.innerRateBps',
      1,
      'either innerRateBps or packetsPerSecond',
    ],
    [
      'an empty mix',
      { stack: {}, traffic: { innerRateBps: 1, mix: [] } },
      'traffic.mix',
      [],
      '1 to 64 packet sizes',
    ],
    [
      'a packet shorter than its header',
      { stack: {}, innerIpVersion: 'ipv6', traffic: { innerRateBps: 1, mix: [{ ipBytes: 39, weight: 1 }] } },
      'traffic.mix.0.ipBytes',
      39,
      'a whole number from 40 to 65575',
    ],
  ])('with %s is refused by field, value and what was expected', (_, input, field, value, expected) => {
    expect(problemsOf(input)).toEqual([{ field, value, expected }]);
  });

  it('with a number out of range is refused once, beside its other faults', () => {
    const stack = { accessPayloadBytes: 1, innerTags: 1 };
    expect(problemsOf({ stack, innerPacketBytes: 1500 }).map((problem) => problem.field)).toEqual([
      'stack.accessPayloadBytes',
      'stack.innerTags',
    ]);
  });

  it('with TCP but no packet length is refused', () => {
    const traffic = { innerRateBps: 1, mix: [{ ipBytes: 40, weight: 1 }] };
    expect(problemsOf({ stack: {}, traffic, tcp: {} })).toMatchObject([{ field: 'tcp' }]);
  });

  it('with a contradictory stack is refused in one go with its other faults', () => {
    const stack = {
      innerTags: 1,
      esp: { mode: 'tunnel', transform: 'aes-gcm-8', integrity: 'hmac-sha1-96', outerIp: 'ipv4' },
    };
    expect(problemsOf({ stack }).map((problem) => problem.field)).toEqual([
      'stack.innerTags',
      'stack.esp.integrity',
      'innerPacketBytes',
    ]);
  });
});

describe('no request', () => {
  const optional = <T>(arbitrary: fc.Arbitrary<T>) => fc.option(arbitrary, { nil: undefined });

  it('that is valid makes the calculation throw', () => {
    const requests = fc.record({
      stack: arbitraryStack,
      innerIpVersion: arbitraryIpVersion,
      innerPacketBytes: optional(fc.integer({ min: 1, max: 65_575 })),
      transportMtuBytes: optional(fc.integer({ min: 68, max: 65_535 })),
      fragmentOuter: fc.boolean(),
      traffic: optional(
        fc.record({
          innerRateBps: optional(fc.integer({ min: 0, max: 10_000_000_000_000 })),
          packetsPerSecond: optional(fc.integer({ min: 0, max: MOST_PACKETS_PER_SECOND })),
          mix: fc.array(
            fc.record({
              ipBytes: fc.integer({ min: 1, max: 65_575 }),
              weight: fc.integer({ min: 1, max: 1_000_000 }),
            }),
            { minLength: 1, maxLength: 5 },
          ),
        }),
      ),
      linkBps: optional(fc.integer({ min: 1, max: 10_000_000_000_000 })),
      tcp: optional(
        fc.record({
          timestamps: fc.boolean(),
          flow: optional(
            fc.record({
              windowBytes: fc.integer({ min: 1, max: 1_073_725_440 }),
              rttUs: fc.integer({ min: 1, max: 60_000_000 }),
              lossPerMillion: fc.integer({ min: 0, max: 1_000_000 }),
            }),
          ),
        }),
      ),
    });
    let computed = 0;
    fc.assert(
      fc.property(requests, (input) => {
        const parsed = parseWireRequest(input);
        if (!parsed.ok) {
          expect(parsed.problems.length).toBeGreaterThan(0);
          return;
        }
        const answer = computeWire(parsed.request);
        if (answer.ok) computed += 1;
        else
          expect(answer.problems.every(({ field, expected }) => field !== '' && expected !== '')).toBe(true);
        const numbers = JSON.stringify(answer).match(/[:,[]-?\d[\d.e+]*/g) ?? [];
        for (const number of numbers) expect(Number.isSafeInteger(Number(number.slice(1)))).toBe(true);
      }),
      { numRuns: 500 },
    );
    expect(computed).toBeGreaterThan(50);
  });

  it('has room for a rate that the answer could not hold as whole numbers', () => {
    const longest = {
      stack: { vxlanOver: 'none' },
      transportMtuBytes: 68,
      fragmentOuter: true,
      traffic: { packetsPerSecond: MOST_PACKETS_PER_SECOND, mix: [{ ipBytes: 65_535, weight: 1 }] },
    };
    expect(JSON.stringify(resultOf(longest as WireRequestInput))).not.toMatch(/\de\+\d/);
    const { traffic } = longest;
    const more = { ...longest, traffic: { ...traffic, packetsPerSecond: MOST_PACKETS_PER_SECOND + 1 } };
    expect(parseWireRequest(more)).toMatchObject({
      ok: false,
      problems: [{ field: 'traffic.packetsPerSecond' }],
    });
  });

  it('of any shape makes reading it throw', () => {
    fc.assert(
      fc.property(fc.anything(), (input) => {
        expect(parseWireRequest(input).ok).toBe(false);
      }),
    );
  });
});
