import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  espIntegrityIds,
  espTransformIds,
  type EspIntegrityId,
  type EspTransformId,
} from '#engine/reference/esp.ts';
import { bareStack, type Stack } from '#engine/wire/stack.ts';
import { bytesOf, type Layer } from '#engine/wire/layer.ts';
import { stackLayers, type StackLayers } from '#engine/wire/stack-layers.ts';
import transforms from '../../reference/esp-transform-sizes.json' with { type: 'json' };
import vectors from '../../reference/published-esp-vectors.json' with { type: 'json' };
import { arbitraryIpVersion, arbitraryStack } from './arbitrary-stack.ts';
import { measuredRows, measuredStack } from './measured-packets.ts';
import { namedStack } from './named-stacks.ts';

function layersOf(innerPacketBytes: number, stack: Stack): StackLayers {
  const answer = stackLayers({ innerPacketBytes, innerIpVersion: 'ipv4', stack });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
}

const between = (layers: readonly Layer[], first: string, last: string): readonly Layer[] => {
  const start = layers.findIndex((layer) => layer.id === first);
  const end = layers.findIndex((layer) => layer.id === last);
  if (start < 0 || end < start) throw new Error(`no layers from ${first} to ${last}`);
  return layers.slice(start, end + 1);
};

describe('packets really built and encrypted by other software', () => {
  const rows = measuredRows('esp-vxlan-sizes.csv');

  it('are all there', () => {
    expect(rows).toHaveLength(168);
  });

  it.each(rows)(
    'have the lengths that we compute: $esp_mode $transform nat $nat_t over $esp_outer_ip/$vxlan_ip, tags $inner_tags, inner $inner_ip_len',
    (row) => {
      const { totals, layers } = layersOf(Number(row.inner_ip_len), measuredStack(row));
      expect(totals.innerFrameBytes).toBe(Number(row.inner_frame_len_no_fcs));
      expect(totals.vxlanPacketBytes).toBe(Number(row.vxlan_ip_packet_len));
      expect(totals.outerIpPacketBytes).toBe(Number(row.outer_ip_packet_len));
      expect(totals.wireBytes).toBe(Number(row.eth_wire_with_preamble_ifg));
      const padding = layers.find((layer) => layer.id === 'esp-padding');
      expect(padding?.bytes).toBe(row.esp_pad_len === '' ? undefined : Number(row.esp_pad_len));
    },
  );
});

describe('published test vectors', () => {
  it.each(vectors.vectors)(
    '$name has the printed length',
    ({ mode, transform, innerPacketBytes, outerIpPacketBytes }) => {
      const suite = { transform: transform as 'aes-cbc' | 'chacha20-poly1305', natTraversal: false };
      const esp =
        mode === 'tunnel'
          ? ({ mode: 'tunnel', ...suite, outerIp: 'ipv4' } as const)
          : ({ mode: 'transport', ...suite } as const);
      expect(layersOf(innerPacketBytes, { ...bareStack, esp }).totals.outerIpPacketBytes).toBe(
        outerIpPacketBytes,
      );
    },
  );
});

describe('every ESP transform and integrity algorithm', () => {
  it.each(transforms.rows)('$transform with $integrity has the size worked out by hand', (row) => {
    const suite = {
      transform: row.transform as EspTransformId,
      integrity: row.integrity as EspIntegrityId | undefined,
    };
    const esp = { mode: 'tunnel', ...suite, natTraversal: false, outerIp: 'ipv4' } as const;
    const { totals } = layersOf(transforms.innerPacketBytes, { ...bareStack, esp });
    expect(totals.outerIpPacketBytes).toBe(row.outerIpPacketBytes);
  });

  it('is among them', () => {
    expect(new Set(transforms.rows.map(({ transform }) => transform))).toEqual(new Set(espTransformIds));
    const integrities = transforms.rows.flatMap(({ integrity }) =>
      integrity === undefined ? [] : [integrity],
    );
    expect(new Set(integrities)).toEqual(new Set(espIntegrityIds));
  });
});

describe('layers', () => {
  it('stand in the order of the wire, outside in and back out', () => {
    const { layers } = layersOf(1388, {
      ...namedStack('gcm-tunnel-nat'),
      innerTags: 1,
      accessOverhead: 'pppoe',
      outerTags: 2,
    });
    expect(layers.map((layer) => `${layer.id} ${layer.bytes}`)).toEqual([
      'preamble 8',
      'outer-ethernet 14',
      'outer-tag-1 4',
      'outer-tag-2 4',
      'pppoe 6',
      'ppp 2',
      'outer-ip 20',
      'nat-traversal-udp 8',
      'esp-header 8',
      'esp-iv 8',
      'vxlan-ip 20',
      'vxlan-udp 8',
      'vxlan 8',
      'inner-ethernet 14',
      'inner-tag-1 4',
      'inner-packet 1388',
      'esp-padding 0',
      'esp-trailer 2',
      'esp-icv 16',
      'fcs 4',
      'gap 12',
    ]);
  });

  it('put ESP transport mode between the IP header of VXLAN and its UDP header', () => {
    const { layers } = layersOf(1416, namedStack('gcm-transport'));
    expect(layers.map((layer) => layer.id).slice(2, 7)).toEqual([
      'vxlan-ip',
      'esp-header',
      'esp-iv',
      'vxlan-udp',
      'vxlan',
    ]);
  });

  it('add up to every total', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 40, max: 9216 }),
        arbitraryIpVersion,
        arbitraryStack,
        (bytes, version, stack) => {
          const answer = stackLayers({ innerPacketBytes: bytes, innerIpVersion: version, stack });
          if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
          const { layers, totals } = answer;
          expect(bytesOf(layers)).toBe(totals.wireBytes);
          expect(bytesOf(between(layers, 'outer-ethernet', 'fcs'))).toBe(totals.frameBytes);
          const notPacket = /^(preamble|outer-ethernet|outer-tag-.|frame-padding|fcs|gap)$/;
          const access = layers.filter((layer) => !notPacket.test(layer.id));
          expect(bytesOf(access)).toBe(totals.accessPacketBytes);
          const outer = access.filter((layer) => !/^(pppoe|ppp|access)$/.test(layer.id));
          expect(bytesOf(outer)).toBe(totals.outerIpPacketBytes);
          const vxlan = outer.filter((layer) => !/^(outer-ip|nat-traversal-udp|esp-.*)$/.test(layer.id));
          if (stack.vxlanOver === 'none') {
            expect(totals.vxlanPacketBytes).toBeUndefined();
            expect(totals.innerFrameBytes).toBeUndefined();
            expect(bytesOf(vxlan)).toBe(totals.innerPacketBytes);
          } else {
            expect(bytesOf(vxlan)).toBe(totals.vxlanPacketBytes);
            const frame = vxlan.filter((layer) => layer.id.startsWith('inner-'));
            expect(bytesOf(frame)).toBe(totals.innerFrameBytes);
          }
          expect(layers.every((layer) => Number.isInteger(layer.bytes) && layer.bytes >= 0)).toBe(true);
          expect(new Set(layers.map((layer) => layer.id)).size).toBe(layers.length);
        },
      ),
    );
  });

  it('have headers before the payload and trailers after it', () => {
    fc.assert(
      fc.property(fc.integer({ min: 40, max: 9216 }), arbitraryStack, (bytes, stack) => {
        const kinds = layersOf(bytes, stack).layers.map((layer) => layer.kind[0]);
        expect(kinds.join('')).toMatch(/^h+pt+$/);
      }),
    );
  });

  it('say where nothing protects integrity', () => {
    const { layers } = layersOf(100, {
      ...bareStack,
      esp: { mode: 'tunnel', transform: 'aes-cbc', natTraversal: false, outerIp: 'ipv4' },
    });
    expect(layers.find((layer) => layer.id === 'esp-header')?.note).toContain('nothing protects integrity');
  });
});

describe('sizes', () => {
  it('never decrease as the packet grows', () => {
    fc.assert(
      fc.property(fc.integer({ min: 40, max: 9216 }), arbitraryStack, (bytes, stack) => {
        const { totals } = layersOf(bytes, stack);
        const longer = layersOf(bytes + 1, stack).totals;
        for (const name of Object.keys(totals) as (keyof typeof totals)[]) {
          expect(longer[name]).toBeGreaterThanOrEqual(totals[name] ?? 0);
        }
      }),
    );
  });

  it('are never shorter outside than inside', () => {
    fc.assert(
      fc.property(fc.integer({ min: 40, max: 9216 }), arbitraryStack, (bytes, stack) => {
        const { totals } = layersOf(bytes, stack);
        expect(totals.outerIpPacketBytes).toBeGreaterThanOrEqual(bytes);
        expect(totals.wireBytes).toBeGreaterThanOrEqual(84);
      }),
    );
  });
});

describe('short frames', () => {
  it('are padded by the host, and the padding is carried', () => {
    const { totals, layers } = layersOf(28, namedStack('gcm-tunnel'));
    expect(totals.innerFrameBytes).toBe(60);
    expect(totals.wireBytes).toBe(190);
    expect(layers.find((layer) => layer.id === 'inner-padding')?.bytes).toBe(18);
  });

  it('stay short where a virtual port sends them so', () => {
    const { totals } = layersOf(28, { ...namedStack('vxlan-v4'), innerFrames: 'as-sent' });
    expect(totals.innerFrameBytes).toBe(42);
    expect(totals.outerIpPacketBytes).toBe(78);
  });

  it('fill the minimum frame on the cable', () => {
    const { totals } = layersOf(28, bareStack);
    expect(totals.frameBytes).toBe(64);
    expect(totals.wireBytes).toBe(84);
  });
});

describe('a refusal', () => {
  const problemsFor = (innerPacketBytes: number, stack: Stack) => {
    const answer = stackLayers({ innerPacketBytes, innerIpVersion: 'ipv4', stack });
    return answer.ok ? [] : answer.problems;
  };

  it.each([19, 65_536, 100.5, Number.NaN])('names a packet of %s bytes as no IPv4 packet', (bytes) => {
    expect(problemsFor(bytes, bareStack)).toEqual([
      { field: 'innerPacketBytes', value: bytes, expected: 'a whole number from 20 to 65535' },
    ]);
  });

  it('names inner tags without VXLAN', () => {
    const [problem] = problemsFor(1500, { ...bareStack, innerTags: 1 });
    expect(problem).toMatchObject({ field: 'stack.innerTags', value: 1 });
    expect(problem?.expected).toContain('outerTags');
  });

  it('names an integrity algorithm beside a transform that needs none', () => {
    const [problem] = problemsFor(1500, {
      ...bareStack,
      esp: {
        mode: 'tunnel',
        transform: 'aes-gcm-16',
        integrity: 'hmac-sha2-256-128',
        natTraversal: false,
        outerIp: 'ipv4',
      },
    });
    expect(problem).toMatchObject({ field: 'stack.esp.integrity', value: 'hmac-sha2-256-128' });
  });

  it('says that an outermost packet is too long for its length field', () => {
    const stack = namedStack('gcm-tunnel');
    // The padding staircase: 65,428 bytes inside make 65,532 outside, one byte more makes 65,536.
    expect(problemsFor(65_428, stack)).toEqual([]);
    expect(problemsFor(65_429, stack)).toEqual([
      {
        field: 'innerPacketBytes',
        value: 65_429,
        expected: 'a shorter packet: the outermost packet would have 65536 bytes, IPv4 allows 65535',
      },
    ]);
  });

  it('names access overhead and payload out of bounds', () => {
    const fields = problemsFor(1500, { ...bareStack, accessOverhead: 257, accessPayloadBytes: 100 });
    expect(fields.map((problem) => problem.field)).toEqual([
      'stack.accessOverhead',
      'stack.accessPayloadBytes',
    ]);
  });
});
