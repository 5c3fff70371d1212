import { describe, expect, it } from 'vitest';
import { simpleImix } from '#engine/reference/frame-mixes.ts';
import { frameRate, linkCapacityOf } from '#engine/wire/frame-rate.ts';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { bareStack } from '#engine/wire/stack.ts';
import rates from '../../reference/frame-rates.json' with { type: 'json' };
import share from '../../reference/overhead-share.json' with { type: 'json' };
import { namedStack } from './named-stacks.ts';

describe('the frame rate of a cable', () => {
  const cells = [
    ...rates.rows.flatMap(({ frameBytes, framesPerSecond }) =>
      rates.linkBps.map((linkBps, place) => ({ linkBps, frameBytes, expected: framesPerSecond[place] })),
    ),
    ...rates.alsoAt10M.map(({ frameBytes, framesPerSecond }) => ({
      linkBps: 10_000_000,
      frameBytes,
      expected: framesPerSecond,
    })),
  ];
  it.each(cells)(
    'of $linkBps bit/s with $frameBytes-byte frames is $expected',
    ({ linkBps, frameBytes, expected }) => {
      expect(frameRate(linkBps, frameBytes)).toEqual({ ok: true, framesPerSecond: expected });
    },
  );

  it('is refused for a frame below the minimum and a cable without a rate', () => {
    expect(frameRate(0, 63)).toMatchObject({
      ok: false,
      problems: [
        { field: 'linkBps', value: 0 },
        { field: 'frameBytes', value: 63, expected: 'a whole number from 64 to 65575' },
      ],
    });
  });
});

describe('the share of a cable that is left inside VXLAN and ESP', () => {
  const stack = namedStack('gcm-tunnel');

  it.each(share.rows)('for inner frames of $innerFrameBytes bytes is $innerFrameMbps Mbit/s', (row) => {
    const ipBytes = row.innerFrameBytes - 18;
    const layers = stackLayers({ innerPacketBytes: ipBytes, innerIpVersion: 'ipv4', stack });
    expect(layers).toMatchObject({
      totals: { outerIpPacketBytes: row.outerIpPacketBytes, frameBytes: row.outerFrameBytes },
    });
    const answer = linkCapacityOf(share.linkBps, [{ ipBytes, weight: 1 }], stack);
    if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
    expect(answer.packetsPerSecond).toBe(row.framesPerSecond);
    expect(answer.hostFrameRateBps / 1_000_000).toBeCloseTo(row.innerFrameMbps, 1);
    expect(answer.innerRateBps).toBe(Math.floor((share.linkBps * ipBytes) / (row.outerFrameBytes + 20)));
  });

  it('for the simple mix is that of its mean frame', () => {
    const answer = linkCapacityOf(share.linkBps, simpleImix, stack);
    if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
    expect(answer.packetsPerSecond).toBe(share.simpleImix.packetsPerSecond);
    expect(answer.barePacketsPerSecond).toBe(Math.floor(share.simpleImix.barePacketsPerSecond));
    expect(Math.round(answer.sharePerMillion / 10_000)).toBe(share.simpleImix.sharePercent);
  });

  it('is all of it without a stack', () => {
    const answer = linkCapacityOf(share.linkBps, simpleImix, bareStack);
    expect(answer).toMatchObject({ ok: true, sharePerMillion: 1_000_000 });
  });

  it('shrinks when outermost packets are cut', () => {
    const mix = [{ ipBytes: 1500, weight: 1 }];
    // 1604 bytes whole are 1642 on the cable; cut into 1500 and 124 they are 1538 and 162.
    expect(linkCapacityOf(1_000_000_000, mix, stack)).toMatchObject({ packetsPerSecond: 76_126 });
    expect(linkCapacityOf(1_000_000_000, mix, stack, { fragmentMtuBytes: 1500 })).toMatchObject({
      packetsPerSecond: 73_529,
    });
  });

  it('is refused for a cable without a rate', () => {
    expect(linkCapacityOf(0, simpleImix, stack)).toMatchObject({
      ok: false,
      problems: [{ field: 'linkBps' }],
    });
  });
});
