import { expect, test } from 'vitest';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { bareStack } from '#engine/wire/stack.ts';
import { placeBar, scaleFor } from '../../src/lib/bar-geometry.ts';
import { blocksOf, measureOf, sentBytesOf, type ByteBar } from '../../src/lib/byte-blocks.ts';

const bar = (innerPacketBytes: number, ipHeaderBytes: number, pipeBytes?: number): ByteBar => {
  const answer = stackLayers({ innerPacketBytes, innerIpVersion: 'ipv4', stack: bareStack });
  if (!answer.ok) throw new Error('a bare frame cannot be refused');
  return {
    ...blocksOf(answer.layers, ipHeaderBytes),
    ipPacketBytes: answer.totals.outerIpPacketBytes,
    ...(pipeBytes === undefined ? {} : { pipeBytes }),
  };
};
const names = ({ before }: ByteBar): readonly string[] => before.map(({ name }) => name);

test('a frame without IP has no header of the host, and all of it counts as sent', () => {
  expect(names(bar(46, 0))).not.toContain('IP');
  expect(sentBytesOf(bar(46, 0))).toBe(46);
  expect(names(bar(84, 20))).toContain('IP');
  expect(sentBytesOf(bar(84, 20))).toBe(84);
});

test('the words tell the packet, and its pipe where it is in one', () => {
  expect(measureOf(bar(84, 20))).toBe('84 B');
  expect(measureOf(bar(84, 20, 1500))).toBe('84 B in a 1500 B pipe');
});

test('bars of one scale have the payload in one column, each block as long as its bytes', () => {
  const bars = [bar(84, 20, 1500), bar(1500, 20), bar(46, 0)];
  const scale = scaleFor(bars, 700);
  const placed = bars.map((one) => placeBar(one, scale));
  expect(new Set(placed.map(({ payload }) => payload.x)).size).toBe(1);
  for (const { blocks } of placed)
    for (const { block, width } of blocks) expect(width).toBeCloseTo(block.bytes * scale.bytePx);
});

test('the pipe of a frame without IP begins where its payload does', () => {
  const [only] = [bar(46, 0, 1500)];
  const { pipe, payload } = placeBar(only!, scaleFor([only!], 700));
  expect(pipe?.x).toBe(payload.x);
});
