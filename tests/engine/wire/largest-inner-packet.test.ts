import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { IP_HEADER_BYTES } from '#engine/reference/ip.ts';
import {
  ipMtuOf,
  largestInnerPacket,
  underlayMtuFor,
  type WirePath,
} from '#engine/wire/largest-inner-packet.ts';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { bareStack, type Stack } from '#engine/wire/stack.ts';
import largestTable from '../../reference/largest-inner-packet.json' with { type: 'json' };
import neededTable from '../../reference/needed-underlay-mtu.json' with { type: 'json' };
import { arbitraryIpVersion, arbitraryStack } from './arbitrary-stack.ts';
import { measuredRows, measuredStack } from './measured-packets.ts';
import { namedStack } from './named-stacks.ts';

const outerBytes = (innerPacketBytes: number, { innerIpVersion, stack }: WirePath): number => {
  const answer = stackLayers({ innerPacketBytes, innerIpVersion, stack });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer.totals.outerIpPacketBytes;
};

/** The slow obvious way: try every length up to the MTU and keep the last that fits. */
function largestByTrying(path: WirePath): number | undefined {
  const { ipMtuBytes } = ipMtuOf(path.transportMtuBytes, path.stack);
  let largest: number | undefined;
  for (let bytes: number = IP_HEADER_BYTES[path.innerIpVersion]; bytes <= ipMtuBytes; bytes += 1) {
    if (outerBytes(bytes, path) <= ipMtuBytes) largest = bytes;
  }
  return largest;
}

const largestOf = (transportMtuBytes: number, stack: Stack) =>
  largestInnerPacket({ transportMtuBytes, innerIpVersion: 'ipv4', stack });

describe('the largest inner packet', () => {
  const rows = measuredRows('max-inner.csv');

  it('was measured for every stack', () => {
    expect(rows).toHaveLength(84);
  });

  it.each(rows)(
    'is what other software found: $esp_mode $transform nat $nat_t over $esp_outer_ip/$vxlan_ip, tags $inner_tags, MTU $transport_mtu',
    (row) => {
      expect(largestOf(Number(row.transport_mtu), measuredStack(row))).toMatchObject({
        ok: true,
        largestInnerPacketBytes: Number(row.max_inner_ip_packet),
        outerAtLargestBytes: Number(row.outer_len_at_max),
        outerAtNextBytes: Number(row.outer_len_at_max_plus_1),
      });
    },
  );

  const cells = largestTable.rows.flatMap(({ transportMtuBytes, ...byStack }) =>
    Object.entries(byStack).map(([name, expected]) => ({ transportMtuBytes, name, expected })),
  );
  it.each(cells)(
    'is $expected over $transportMtuBytes with $name',
    ({ transportMtuBytes, name, expected }) => {
      expect(largestOf(transportMtuBytes, namedStack(name))).toMatchObject({
        largestInnerPacketBytes: expected,
      });
    },
  );

  it('is the same for both combined-mode transforms with 16 bytes of ICV', () => {
    const stack = namedStack('gcm-tunnel');
    if (stack.esp.mode === 'none') throw new Error('expected ESP');
    const other: Stack = { ...stack, esp: { ...stack.esp, transform: 'chacha20-poly1305' } };
    expect(largestOf(1500, other)).toEqual(largestOf(1500, stack));
  });

  it('is what trying every length finds, on any stack', () => {
    const path = fc.record({
      transportMtuBytes: fc.integer({ min: 68, max: 700 }),
      innerIpVersion: arbitraryIpVersion,
      stack: arbitraryStack,
    });
    fc.assert(
      fc.property(path, (anyPath) => {
        const answer = largestInnerPacket(anyPath);
        expect(answer.ok ? answer.largestInnerPacketBytes : undefined).toBe(largestByTrying(anyPath));
      }),
      { numRuns: 200 },
    );
  });

  it('fits, and one byte more does not', () => {
    const path = fc.record({
      transportMtuBytes: fc.integer({ min: 700, max: 65_535 }),
      innerIpVersion: arbitraryIpVersion,
      stack: arbitraryStack,
    });
    fc.assert(
      fc.property(path, (anyPath) => {
        const answer = largestInnerPacket(anyPath);
        if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
        const { largestInnerPacketBytes, outerAtLargestBytes, outerAtNextBytes, ipMtuBytes } = answer;
        expect(outerBytes(largestInnerPacketBytes, anyPath)).toBe(outerAtLargestBytes);
        expect(outerAtLargestBytes).toBeLessThanOrEqual(ipMtuBytes);
        expect(outerAtNextBytes).toBeGreaterThan(ipMtuBytes);
        expect(answer.unusedBytes).toBe(ipMtuBytes - outerAtLargestBytes);
      }),
    );
  });

  it('is shortened by access overhead even where the transport claims a full MTU', () => {
    const stack: Stack = { ...namedStack('gcm-tunnel'), accessOverhead: 'pppoe' };
    expect(largestOf(1500, stack)).toMatchObject({
      largestInnerPacketBytes: 1388,
      ipMtuBytes: 1492,
      limitedBy: 'access',
    });
    expect(largestOf(1480, stack)).toMatchObject({ ipMtuBytes: 1480, limitedBy: 'transport' });
    expect(largestOf(1500, { ...stack, accessPayloadBytes: 1508 })).toMatchObject({
      largestInnerPacketBytes: 1396,
      limitedBy: 'transport',
    });
  });

  it('is refused with the MTU that would do where nothing fits', () => {
    const stack = namedStack('gcm-tunnel');
    const answer = largestOf(100, stack);
    expect(answer).toEqual({
      ok: false,
      problems: [
        {
          field: 'transportMtuBytes',
          value: 100,
          expected: 'at least 152: the smallest packet grows to that',
        },
      ],
    });
    expect(largestOf(151, stack).ok).toBe(false);
    expect(largestOf(152, stack)).toMatchObject({ largestInnerPacketBytes: 48, outerAtLargestBytes: 152 });
  });

  it('finds room on the narrowest access link for the smallest packet of any stack', () => {
    fc.assert(
      fc.property(arbitraryStack, arbitraryIpVersion, (stack, innerIpVersion) => {
        const narrow: Stack = { ...stack, accessOverhead: 256, accessPayloadBytes: 576 };
        const answer = largestInnerPacket({ transportMtuBytes: 65_535, innerIpVersion, stack: narrow });
        expect(answer).toMatchObject({ ok: true, ipMtuBytes: 320, limitedBy: 'access' });
      }),
    );
  });

  it.each([67, 65_536, 1500.5])('is refused for a transport MTU of %s', (mtu) => {
    expect(largestOf(mtu, bareStack)).toEqual({
      ok: false,
      problems: [{ field: 'transportMtuBytes', value: mtu, expected: 'a whole number from 68 to 65535' }],
    });
  });
});

describe('the underlay MTU for a packet', () => {
  it.each(neededTable.needed as [string, number][])('is, with %s, %i bytes', (name, expected) => {
    expect(underlayMtuFor(neededTable.innerPacketBytes, namedStack(name))).toMatchObject({
      ok: true,
      transportMtuBytes: expected,
    });
  });

  it('carries the packet whole, and is the least that does', () => {
    fc.assert(
      fc.property(fc.integer({ min: 46, max: 9216 }), arbitraryStack, (bytes, stack) => {
        const roomy: Stack = { ...stack, accessPayloadBytes: 65_535 };
        const needed = underlayMtuFor(bytes, roomy);
        if (!needed.ok) throw new Error(JSON.stringify(needed.problems));
        const exact = largestOf(Math.max(68, needed.transportMtuBytes), roomy);
        expect(exact).toMatchObject({ ok: true });
        if (exact.ok) expect(exact.largestInnerPacketBytes).toBeGreaterThanOrEqual(bytes);
        const less = largestOf(Math.max(68, needed.transportMtuBytes - 1), roomy);
        if (less.ok && needed.transportMtuBytes > 68)
          expect(less.largestInnerPacketBytes).toBeLessThan(bytes);
      }),
    );
  });

  it('counts access overhead for the access link only', () => {
    const stack: Stack = { ...namedStack('gcm-tunnel'), accessOverhead: 'pppoe' };
    expect(underlayMtuFor(1500, stack)).toEqual({
      ok: true,
      transportMtuBytes: 1604,
      accessPayloadBytes: 1612,
    });
  });
});
