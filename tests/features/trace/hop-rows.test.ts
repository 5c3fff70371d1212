import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { barText } from '../../../src/features/trace/hops-table.tsx';
import type { BranchRow, StripRow } from '../../../src/features/trace/hop-rows.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { resultOf, titled, toFirstSpoke } from './answers.ts';

const branches = (rows: readonly StripRow[]): readonly BranchRow[] =>
  rows.filter((row) => row.kind === 'branch');

describe('the rows of one way', () => {
  it('go from the sender to the host, with the packet inside its gateway before it is encrypted', () => {
    const { hops } = resultOf(pairDesign(), toFirstSpoke({ bytes: 1396 }));
    expect(hops.map(({ number, title, note, measure }) => [number, title, note, measure])).toEqual([
      [1, 'h-s0-a to sw-s0', 'access port, VLAN 110', '1396 B in a 1500 B pipe'],
      [2, 'sw-s0 to fw-s0', 'tag 110 added', '1396 B in a 1500 B pipe'],
      [3, 'inside fw-s0', 'br-110 sends it into VNI 10000, tag stripped', '1446 B, no pipe yet'],
      [4, 'fw-s0 to fw-s1', 'ESP added, over Coastal access', '1500 B in a 1500 B pipe'],
      [5, 'fw-s1 to sw-s1', 'tag 110 added', '1396 B in a 1500 B pipe'],
      [6, 'sw-s1 to h-s1-a', 'tag 110 taken off', '1396 B in a 1500 B pipe'],
    ]);
    expect(hops.at(-1)?.leaf).toEqual({ tone: 'arrives', words: 'h-s1-a receives it' });
  });

  it('have the bytes that other software measured on finished packets', () => {
    // One row for each inner length: AES-GCM-16 in tunnel mode over IPv4, without NAT, VXLAN over IPv4, untagged.
    const csv = readFileSync(join(import.meta.dirname, '../../reference/esp-vxlan-sizes.csv'), 'utf8');
    const measured = csv
      .split('\n')
      .filter((line) => line.startsWith('tunnel,AES-GCM-16-128,0,IPv4,IPv4,none,'))
      .map((line) => line.split(','))
      // Longer ones the host itself refuses.
      .filter((row) => Number(row[6]) <= 1500);
    expect(measured.length).toBeGreaterThan(3);
    for (const row of measured) {
      const [innerBytes, vxlanBytes, outerBytes] = [row[6], row[8], row[10]].map(Number);
      const { hops } = resultOf(pairDesign(), toFirstSpoke({ bytes: innerBytes! }));
      const inside = hops.find(({ kind }) => kind === 'inside');
      const outside = hops.find(({ bar }) => bar?.before.some(({ id }) => id === 'esp-header'));
      expect([inside?.bar?.ipPacketBytes, outside?.bar?.ipPacketBytes]).toEqual([vxlanBytes, outerBytes]);
    }
  });

  it('end where the packet is too long, numbered in red at the gateway’s WAN port', () => {
    const { hops } = resultOf(pairDesign(), toFirstSpoke({ bytes: 1500 }));
    const last = hops.at(-1)!;
    expect(last).toMatchObject({
      number: 4,
      title: 'fw-s0 to Coastal access',
      note: 'ESP added, outer DF set',
      measure: '1604 B in a 1500 B pipe',
      isFailing: true,
      isCut: false,
      at: { collection: 'devices', id: 'fw-s0' },
    });
    expect(last.bar).toMatchObject({ ipPacketBytes: 1604, pipeBytes: 1500 });
    expect(last.sentences).toContain('104 over');
    expect(barText(last)).toBe(
      'Eth 14 + IP 20 + ESP 8 + IV 8 + IP 20 + UDP 8 + VXLAN 8 + Eth 14 + IP 20 + 1480 + end 2 + ICV 16 + FCS 4',
    );
    expect(last.lit.map(({ id }) => id)).not.toContain('fw-s1');
  });

  it('say where a packet is cut and in which pieces it goes on', () => {
    const clear = applyPatch(pairDesign(), {
      associations: { 'as-s0-s1': { a: { outerDf: 'clear' } } },
    });
    const { hops } = resultOf(clear, toFirstSpoke({ bytes: 1500 }));
    const cut = titled({ hops } as never, 'fw-s0 to fw-s1');
    // RFC 791 section 3.2: pieces of eight bytes each but the last; 1604 in 1500 is 1500 and 124.
    expect(cut).toMatchObject({ isCut: true, isFailing: false });
    expect(cut.note).toContain('cut into 1500 + 124 B');
    expect(hops.at(-1)?.leaf?.tone).toBe('pieces');
  });

  it('begin at a port with what it makes of the frame', () => {
    const { hops } = resultOf(pairDesign(), toFirstSpoke({ from: { device: 'sw-s0', port: 'p2' } }));
    expect(hops[0]).toMatchObject({ title: 'into sw-s0 2', note: 'access port, VLAN 110', measure: '' });
    expect(hops[0]).not.toHaveProperty('bar');
  });

  it('have no header of the host in frames without IP', () => {
    const { hops } = resultOf(pairDesign(), { send: 'arp', from: { host: 'h-s0-a' } });
    expect(barText(hops[0]!)).toBe('Eth 14 + 46 + FCS 4');
  });
});

describe('the rows of several ways', () => {
  it('stand in branches after one another, each with how its copies end', () => {
    const { rows } = resultOf(hubDesign(3), { send: 'ospf', from: { host: 'h-s0-a' } });
    const heads = branches(rows);
    expect(heads.map(({ title }) => title)).toEqual([
      'To Gullhaven through tn-s0-s1-a',
      'To Orrin Point through tn-s0-s2-a',
      'To Skerry through tn-s0-s3-a',
    ]);
    for (const { counts, hops } of heads) {
      expect(counts).toEqual({ arrives: 1, lost: 0, meant: 0, endless: 0 });
      expect(hops).toBe(3);
    }
    for (const head of heads) {
      const inside = rows.filter(({ under }) => under.includes(head.key));
      expect(inside).toHaveLength(4);
      expect(inside.every(({ depth }) => depth === head.depth)).toBe(true);
      expect(rows.indexOf(inside[0]!)).toBe(rows.indexOf(head) + 1);
    }
  });

  it('are numbered from the top without a gap', () => {
    const { hops } = resultOf(hubDesign(4), { send: 'arp', from: { host: 'h-s0-a' } });
    expect(hops.map(({ number }) => number)).toEqual(hops.map((_, at) => at + 1));
  });

  it('name in a storm the hop that a copy comes round to, by its number in the strip', () => {
    const { hops, trace, rows } = resultOf(meshDesign(3), { send: 'arp', from: { host: 'h-s0-a' } });
    expect(trace.storm).toBeDefined();
    const round = hops.filter(({ isFailing }) => isFailing);
    expect(round.length).toBeGreaterThan(0);
    for (const { leaf, step } of round) {
      const { verdict } = trace.steps[step]!;
      if (verdict?.code !== 'circulating') throw new Error('a storm ends in circles alone');
      const same = hops.find((hop) => hop.step === verdict.sameAs && hop.kind === 'hop')!;
      expect(leaf?.words).toBe(`Comes round to where it was on hop ${same.number}, and so for ever`);
    }
    expect(branches(rows).some(({ counts }) => counts.endless > 0)).toBe(true);
  });

  it('are made of a way of hundreds of hops as well', () => {
    const { hops } = resultOf(
      chainDesign(120),
      {
        send: 'ping',
        from: { host: 'h-s0-a' },
        to: 'h-s119-a',
      },
      [],
    );
    expect(hops.length).toBeGreaterThan(240);
    expect(hops.at(-1)?.leaf?.tone).toBe('arrives');
  });
});
