import fc from 'fast-check';
import { expect, test } from 'vitest';
import { largestInnerPacket } from '#engine/wire/largest-inner-packet.ts';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { bareStack, type Stack } from '#engine/wire/stack.ts';
import { paddingStaircase } from '../../../src/features/wire/padding-staircase.ts';
import { arbitraryStack } from '../../engine/wire/arbitrary-stack.ts';

const cbc: Stack = {
  ...bareStack,
  vxlanOver: 'ipv4',
  esp: {
    mode: 'tunnel',
    transform: 'aes-cbc',
    integrity: 'hmac-sha2-256-128',
    natTraversal: false,
    outerIp: 'ipv4',
  },
};

// RFC 4303 section 2.4 with blocks of 16: 20 + 8 + 16 + (n + 50 + 2 up to a multiple of 16) + 16.
test('blocks of 16 make treads of 16, and the limit ends the third', () => {
  expect(paddingStaircase(1388, cbc, 'ipv4')).toEqual([
    { fromBytes: 1341, toBytes: 1356, outerBytes: 1468 },
    { fromBytes: 1357, toBytes: 1372, outerBytes: 1484 },
    { fromBytes: 1373, toBytes: 1388, outerBytes: 1500 },
    { fromBytes: 1389, toBytes: 1404, outerBytes: 1516 },
    { fromBytes: 1405, toBytes: 1420, outerBytes: 1532 },
    { fromBytes: 1421, toBytes: 1436, outerBytes: 1548 },
  ]);
});

test('without ESP every byte is a tread', () => {
  expect(paddingStaircase(1450, { ...bareStack, vxlanOver: 'ipv4' }, 'ipv4')[2]).toEqual({
    fromBytes: 1450,
    toBytes: 1450,
    outerBytes: 1500,
  });
});

test('at the smallest packet the staircase begins there', () => {
  expect(paddingStaircase(20, bareStack, 'ipv4').map(({ fromBytes }) => fromBytes)).toEqual([20, 21, 22, 23]);
});

test('treads follow each other without a hole, and each is as the layers are', () => {
  fc.assert(
    fc.property(arbitraryStack, fc.integer({ min: 600, max: 9000 }), (stack, transportMtuBytes) => {
      const innerIpVersion = 'ipv4';
      const largest = largestInnerPacket({ transportMtuBytes, innerIpVersion, stack });
      if (!largest.ok) throw new Error('600 bytes hold every stack');
      const treads = paddingStaircase(largest.largestInnerPacketBytes, stack, innerIpVersion);
      for (const [at, tread] of treads.entries()) {
        const next = treads[at + 1];
        if (next !== undefined) {
          expect(next.fromBytes).toBe(tread.toBytes + 1);
          expect(next.outerBytes).toBeGreaterThan(tread.outerBytes);
        }
        for (const innerPacketBytes of [tread.fromBytes, tread.toBytes]) {
          expect(stackLayers({ innerPacketBytes, innerIpVersion, stack })).toMatchObject({
            totals: { outerIpPacketBytes: tread.outerBytes },
          });
        }
      }
      const holding = treads.find(({ outerBytes }) => outerBytes === largest.outerAtLargestBytes);
      expect(holding?.toBytes).toBe(largest.largestInnerPacketBytes);
    }),
    { numRuns: 60 },
  );
});
