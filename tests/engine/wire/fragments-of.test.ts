import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fragmentsOf } from '#engine/wire/fragments-of.ts';

const lengths = (packetBytes: number, version: 'ipv4' | 'ipv6', mtuBytes: number): readonly number[] => {
  const answer = fragmentsOf(packetBytes, version, mtuBytes);
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer.pieces.map((piece) => piece.packetBytes);
};

describe('IPv4 fragments', () => {
  it('of 1604 bytes over 1500 are 1500 and 124', () => {
    expect(fragmentsOf(1604, 'ipv4', 1500)).toEqual({
      ok: true,
      fragmented: true,
      pieces: [
        { offsetBytes: 0, dataBytes: 1480, packetBytes: 1500, moreFollow: true },
        { offsetBytes: 1480, dataBytes: 104, packetBytes: 124, moreFollow: false },
      ],
      totalPacketBytes: 1624,
    });
  });

  it('end on 8 bytes, so that an MTU between two units is not filled', () => {
    expect(lengths(1604, 'ipv4', 1492)).toEqual([1492, 132]);
    expect(lengths(1604, 'ipv4', 1499)).toEqual([1492, 132]);
  });

  it('let the last piece use the whole MTU', () => {
    // 20 + 1472 + 1479 bytes of data: the rest of 1479 fills 1499 although it is no multiple of 8.
    expect(lengths(20 + 1472 + 1479, 'ipv4', 1499)).toEqual([1492, 1499]);
  });

  it('of a packet that fits are the packet itself', () => {
    expect(fragmentsOf(1500, 'ipv4', 1500)).toEqual({
      ok: true,
      fragmented: false,
      pieces: [{ offsetBytes: 0, dataBytes: 1480, packetBytes: 1500, moreFollow: false }],
      totalPacketBytes: 1500,
    });
  });
});

describe('IPv6 fragments', () => {
  it('carry 8 bytes of Fragment header each', () => {
    // 40 + 8 + 1448 = 1496 is the longest multiple of 8 of data that fits into 1500.
    expect(lengths(1644, 'ipv6', 1500)).toEqual([1496, 204]);
  });

  it('have no Fragment header when the packet fits', () => {
    expect(lengths(1500, 'ipv6', 1500)).toEqual([1500]);
  });

  it('are refused below the least MTU of an IPv6 link', () => {
    expect(fragmentsOf(1500, 'ipv6', 1279)).toEqual({
      ok: false,
      problems: [{ field: 'mtuBytes', value: 1279, expected: 'a whole number from 1280 to 65575' }],
    });
  });
});

describe('fragments', () => {
  const versions = fc.constantFrom('ipv4' as const, 'ipv6' as const);

  it('carry every byte once, in order, within the MTU, on units of 8', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 40, max: 65_535 }),
        versions,
        fc.integer({ min: 1280, max: 9216 }),
        (bytes, version, mtu) => {
          const answer = fragmentsOf(bytes, version, mtu);
          if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
          const headerBytes = version === 'ipv4' ? 20 : 40;
          const extraBytes = version === 'ipv6' && answer.fragmented ? 8 : 0;
          let next = 0;
          for (const [place, piece] of answer.pieces.entries()) {
            const last = place === answer.pieces.length - 1;
            expect(piece.offsetBytes).toBe(next);
            expect(piece.offsetBytes % 8).toBe(0);
            expect(piece.moreFollow).toBe(!last);
            expect(piece.packetBytes).toBe(piece.dataBytes + headerBytes + extraBytes);
            expect(piece.packetBytes).toBeLessThanOrEqual(mtu);
            if (!last) expect(piece.packetBytes).toBeGreaterThan(mtu - 8);
            next += piece.dataBytes;
          }
          expect(next).toBe(bytes - headerBytes);
          expect(answer.fragmented).toBe(bytes > mtu);
        },
      ),
    );
  });

  it('are refused for lengths that no IP packet has', () => {
    expect(fragmentsOf(19, 'ipv4', 67)).toMatchObject({
      ok: false,
      problems: [{ field: 'packetBytes' }, { field: 'mtuBytes' }],
    });
  });
});
