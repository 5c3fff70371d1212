import { describe, expect, it } from 'vitest';
import { singleFlowLimitBps, tcpGoodputBps } from '#engine/wire/tcp-goodput.ts';
import { bareStack } from '#engine/wire/stack.ts';
import goodput from '../../reference/tcp-goodput.json' with { type: 'json' };
import singleFlow from '../../reference/single-flow.json' with { type: 'json' };
import { namedStack } from './named-stacks.ts';

describe('TCP goodput', () => {
  it.each(goodput.rows)(
    'on 1 Gbit/s with $stack, MTU $mtuBytes, $ipVersion, timestamps $timestamps, cut at $fragmentMtuBytes is $goodputMbps Mbit/s',
    ({ stack, mtuBytes, ipVersion, timestamps, fragmentMtuBytes, goodputMbps }) => {
      const answer = tcpGoodputBps({
        linkBps: goodput.linkBps,
        mtuBytes,
        ipVersion: ipVersion as 'ipv4' | 'ipv6',
        timestamps,
        stack: namedStack(stack),
        fragmentMtuBytes,
      });
      if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
      expect(Math.round(answer.goodputBps / 100_000) / 10).toBe(goodputMbps);
    },
  );

  it('shows its working', () => {
    const transfer = {
      linkBps: 1_000_000_000,
      mtuBytes: 1500,
      ipVersion: 'ipv4',
      timestamps: true,
      stack: namedStack('gcm-tunnel'),
      fragmentMtuBytes: 1500,
    } as const;
    expect(tcpGoodputBps(transfer)).toMatchObject({
      segmentBytes: 1448,
      wireBytes: 1700,
      framesPerSegment: 2,
    });
  });

  it('is refused for an MTU that leaves no room for data', () => {
    const transfer = {
      linkBps: 1,
      mtuBytes: 72,
      ipVersion: 'ipv6',
      timestamps: true,
      stack: bareStack,
    } as const;
    expect(tcpGoodputBps(transfer)).toEqual({
      ok: false,
      problems: [{ field: 'mtuBytes', value: 72, expected: 'a whole number from 73 to 65535' }],
    });
  });

  it('is refused for a packet that the stack makes too long', () => {
    const stack = namedStack('gcm-tunnel');
    const transfer = { linkBps: 1, mtuBytes: 65_535, ipVersion: 'ipv4', timestamps: false, stack } as const;
    expect(tcpGoodputBps(transfer)).toMatchObject({
      ok: false,
      problems: [{ field: 'mtuBytes', value: 65_535 }],
    });
  });
});

describe('the limit of a single flow', () => {
  // The reference values are printed with one decimal below 200 Mbit/s and none above.
  const digits = (mbps: number): number => (Number.isInteger(mbps) ? 0 : 1);

  it.each(singleFlow.window.rows as [number, number][])(
    'by its window at %i µs is %f Mbit/s',
    (rttUs, mbps) => {
      const { windowBytes } = singleFlow.window;
      const answer = singleFlowLimitBps({ windowBytes, rttUs, mssBytes: 1460, lossPerMillion: 0 });
      if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
      expect(answer.limitedBy).toBe('window');
      expect(answer.lossLimitBps).toBeUndefined();
      expect(Number((answer.limitBps / 1_000_000).toFixed(digits(mbps)))).toBe(mbps);
    },
  );

  it.each(singleFlow.loss.rows as [number, number][])(
    'by %i lost of a million is %f Mbit/s',
    (lossPerMillion, mbps) => {
      const { mssBytes, rttUs } = singleFlow.loss;
      const answer = singleFlowLimitBps({ windowBytes: 100_000_000, rttUs, mssBytes, lossPerMillion });
      if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
      expect(answer.limitedBy).toBe('loss');
      expect(Number((answer.limitBps / 1_000_000).toFixed(digits(mbps)))).toBe(mbps);
    },
  );

  it('is the lower of the two', () => {
    const flow = { windowBytes: 65_535, rttUs: 20_000, mssBytes: 1460, lossPerMillion: 1 };
    expect(singleFlowLimitBps(flow)).toMatchObject({ limitedBy: 'window', limitBps: 26_214_000 });
  });

  it('is refused without a round trip, and for more losses than packets', () => {
    const flow = { windowBytes: 65_535, rttUs: 0, mssBytes: 1460, lossPerMillion: 1_000_001 };
    expect(singleFlowLimitBps(flow)).toMatchObject({
      ok: false,
      problems: [{ field: 'rttUs' }, { field: 'lossPerMillion' }],
    });
  });
});
