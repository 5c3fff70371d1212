import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { textWidth } from '#drawing/text-width.ts';
import { anatomyRows } from '../../../src/features/wire/anatomy-rows.ts';
import type { WireTexts } from '../../../src/features/wire/wire-fields.ts';
import { layOutAnatomy } from '../../../src/lib/anatomy-geometry.ts';
import { NAME_SIZE_PX } from '../../../src/lib/bar-geometry.ts';
import type { AnatomyRow } from '../../../src/lib/byte-blocks.ts';
import { figuresFor } from './wire-inputs.ts';

const rowsFor = (changes: Partial<WireTexts> = {}) => anatomyRows(figuresFor(changes));
const written = ({ before, payloadBytes, after }: AnatomyRow): string =>
  [
    ...before.map(({ name, bytes }) => `${name} ${bytes}`),
    payloadBytes,
    ...after.map(({ name, bytes }) => `${name} ${bytes}`),
  ].join(' | ');

describe('the rows', () => {
  it('follow the packet from the host into VXLAN and ESP, and end with the largest that passes', () => {
    const rows = rowsFor();
    expect(rows.map(({ title }) => title)).toEqual([
      'From the host',
      'Into VXLAN',
      'To the transport',
      'With 1396 B',
    ]);
    expect(rows.map(written)).toEqual([
      'Eth 14 | IP 20 | 1480 | FCS 4',
      'IP 20 | UDP 8 | VXLAN 8 | Eth 14 | IP 20 | 1480',
      'Eth 14 | IP 20 | ESP 8 | IV 8 | IP 20 | UDP 8 | VXLAN 8 | Eth 14 | IP 20 | 1480 | end 2 | ICV 16 | FCS 4',
      'Eth 14 | IP 20 | ESP 8 | IV 8 | IP 20 | UDP 8 | VXLAN 8 | Eth 14 | IP 20 | 1376 | end 2 | ICV 16 | FCS 4',
    ]);
    expect(rows.map(({ ipPacketBytes, pipeBytes }) => [ipPacketBytes, pipeBytes])).toEqual([
      [1500, undefined],
      [1550, undefined],
      [1604, 1500],
      [1500, 1500],
    ]);
  });

  it('keep tags with the frame inside, and access overhead outside the packet', () => {
    const rows = rowsFor({ tags: '1', access: 'pppoe' });
    expect(rows[0] && written(rows[0])).toBe('Eth 14 | tag 4 | IP 20 | 1480 | FCS 4');
    expect(rows[2] && written(rows[2])).toMatch(
      /^Eth 14 \| PPPoE 6 \| PPP 2 \| IP 20 \| .* VXLAN 8 \| Eth 14 \| tag 4 \| IP 20/,
    );
    expect(rows[2]?.before.filter(({ inIpPacket }) => !inIpPacket).map(({ name }) => name)).toEqual([
      'Eth',
      'PPPoE',
      'PPP',
    ]);
  });

  it('let ESP part the host’s header from its payload in transport mode without VXLAN', () => {
    const rows = rowsFor({ vxlan: 'none', esp: 'transport' });
    expect(rows[1] && written(rows[1])).toBe(
      'Eth 14 | IP 20 | ESP 8 | IV 8 | 1480 | pad 2 | end 2 | ICV 16 | FCS 4',
    );
  });

  it('are one for a plain packet that passes', () => {
    expect(rowsFor({ vxlan: 'none', esp: 'none' }).map(written)).toEqual(['Eth 14 | IP 20 | 1480 | FCS 4']);
  });
});

describe('the drawing', () => {
  it('has the host’s payload in one column, headers left of it to one scale', () => {
    const { rows } = layOutAnatomy(rowsFor(), 960);
    expect(new Set(rows.map(({ payload }) => payload.x)).size).toBe(1);
    for (const { blocks } of rows) {
      for (const { block, width } of blocks) expect(width).toBeCloseTo(block.bytes * 3.2);
    }
  });

  it('measures the overhang to scale from the end of the outermost packet', () => {
    const pipe = layOutAnatomy(rowsFor(), 960).rows[2]?.pipe;
    expect(pipe?.overBytes).toBe(104);
    expect((pipe?.overEnd ?? 0) - (pipe?.end ?? 0)).toBeCloseTo(104 * 3.2);
    expect(layOutAnatomy(rowsFor(), 960).rows[3]?.pipe).not.toHaveProperty('overEnd');
  });

  it('draws a short packet to scale, without a break', () => {
    const [row] = layOutAnatomy(rowsFor({ packet: '100' }), 960).rows;
    expect(row?.payload).toMatchObject({ width: 80 * 3.2 });
    expect(row?.payload).not.toHaveProperty('breakX');
    expect(layOutAnatomy(rowsFor(), 960).rows[0]?.payload).toHaveProperty('breakX');
  });

  it('keeps everything within its width, and no name on another, at any width', () => {
    const stacks: readonly Partial<WireTexts>[] = [
      {},
      { tags: '2', access: 'pppoe', vxlan: 'ipv6', outer: 'ipv6', nat: 'yes' },
      { transform: 'aes-cbc', integrity: 'hmac-sha2-512-256', packet: '1381', access: '256' },
      { vxlan: 'none', esp: 'none', packet: '20' },
      { mtu: '152', packet: '9000' },
      { mtu: '65535' },
    ];
    fc.assert(
      fc.property(fc.integer({ min: 300, max: 1600 }), fc.constantFrom(...stacks), (widthPx, changes) => {
        const { rows, names, height } = layOutAnatomy(rowsFor(changes), widthPx);
        for (const { blocks, payload, pipe, barY } of rows) {
          const ends = [payload, ...blocks].map(({ x, width }) => x + width);
          expect(Math.min(payload.x, ...blocks.map(({ x }) => x))).toBeGreaterThanOrEqual(0);
          expect(Math.max(...ends, pipe?.end ?? 0, pipe?.overEnd ?? 0)).toBeLessThanOrEqual(widthPx);
          expect(pipe === undefined || pipe.end > pipe.x).toBe(true);
          expect(barY + 24).toBeLessThanOrEqual(height);
        }
        const spans = names.map(({ text, x, y }) => {
          const half = textWidth(text, NAME_SIZE_PX, 500) / 2;
          return { y, from: x - half, to: x + half };
        });
        for (const [at, one] of spans.entries()) {
          expect(one.y).toBeGreaterThan(0);
          const beside = spans.slice(at + 1).filter(({ y }) => y === one.y);
          expect(beside.filter(({ from, to }) => from < one.to && one.from < to)).toEqual([]);
        }
      }),
      { numRuns: 60 },
    );
  });
});
