import { describe, expect, it, test } from 'vitest';
import { elementKey } from '#drawing/decorations.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';
import { partOfWays, partWords } from '../../../src/features/trace/part-of-ways.ts';
import { traceToDecorations } from '../../../src/features/trace/trace-decorations.ts';
import { traceStarts } from '../../../src/features/trace/trace-starts.ts';
import { traceText } from '../../../src/features/trace/trace-words.ts';
import { waysOut } from '../../../src/features/trace/ways-out.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { resultOf, toFirstSpoke } from './answers.ts';

const verdictOf = (design: Design, change: Parameters<typeof toFirstSpoke>[0] = {}) =>
  resultOf(design, toFirstSpoke(change)).verdict;
const pairWith = (patch: MergePatch): Design => applyPatch(pairDesign(), patch);

describe('the verdict', () => {
  it('is that it arrives, with the hop that has the least room', () => {
    expect(verdictOf(pairDesign(), { bytes: 1390 })).toEqual({
      tone: 'arrives',
      what: 'Reaches h-s1-a.',
      why: '6 hops. Least room on hop 4, fw-s0 to fw-s1: 1496 B in a 1500 B pipe, 4 B to spare.',
    });
  });

  it('is where it is dropped and that nobody says so, and how long it may be instead', () => {
    const { tone, what, why, insteadBytes, hop } = verdictOf(pairDesign(), { bytes: 1500 });
    expect({ tone, what, insteadBytes, hop }).toEqual({
      tone: 'lost',
      what: 'Dropped at fw-s0 without a word.',
      insteadBytes: 1396,
      hop: 4,
    });
    expect(why).toContain('1604 bytes');
  });

  it('is louder where the gateway answers the sender', () => {
    const icmp = pairWith({
      profiles: { make: { name: 'Make', oversizeDf: 'icmp' } },
      devices: { 'fw-s0': { profile: 'make' } },
    });
    expect(verdictOf(icmp, { bytes: 1500 }).what).toBe('Dropped at fw-s0.');
  });

  it('points at the finding that would have told', () => {
    const apart = pairWith({ tunnels: { 'tn-s0-s1-a': { a: { vni: 99 } } } });
    const { what, findingKey } = verdictOf(apart, { bytes: 84 });
    expect(what).toBe('Dropped at fw-s1 without a word.');
    expect(findingKey).toMatch(/^tunnel-vni-mismatch /);
  });

  it('is milder for what arrives in pieces', () => {
    const clear = pairWith({ associations: { 'as-s0-s1': { a: { outerDf: 'clear' } } } });
    expect(verdictOf(clear, { bytes: 1500 })).toMatchObject({
      tone: 'milder',
      what: 'Reaches h-s1-a in pieces.',
      insteadBytes: 1396,
    });
  });

  it('is the sender’s own where it refuses the packet itself', () => {
    const small = pairWith({ devices: { 'h-s0-a': { ports: { p1: { mtu: 1280 } } } } });
    expect(verdictOf(small, { bytes: 1400 })).toMatchObject({
      tone: 'lost',
      what: 'Dropped at h-s0-a.',
      insteadBytes: 1280,
    });
  });

  it('counts who is reached by a frame to many, and says where copies were lost', () => {
    const hub = hubDesign(3);
    const ask = { send: 'ospf', from: { host: 'h-s0-a' } } as const;
    expect(resultOf(hub, ask).verdict).toMatchObject({ tone: 'arrives', what: 'Reaches 3 devices.' });
    const apart = applyPatch(hub, { tunnels: { 'tn-s0-s2-a': { a: { vni: 99 } } } });
    expect(resultOf(apart, ask).verdict).toMatchObject({
      tone: 'lost',
      what: 'Reaches 2 devices; a copy was dropped, first at fw-s2.',
    });
    expect(resultOf(apart, ask).missed).toEqual([{ collection: 'devices', id: 'h-s2-a' }]);
  });

  it('is a storm where copies never end, and names the finding', () => {
    const { verdict } = resultOf(meshDesign(4), { send: 'arp', from: { host: 'h-s0-a' } });
    expect(verdict.what).toBe('A storm: copies multiply.');
    expect(verdict.findingKey).toMatch(/^storm-any-to-any-mesh /);
  });
});

describe('ways out', () => {
  it('are for a packet that is too long what hosts, transport and TCP would need', () => {
    const { trace, fits } = resultOf(pairDesign(), toFirstSpoke({ bytes: 1500 }));
    expect(waysOut(pairDesign(), trace, fits)).toEqual([
      'Hosts at MTU 1396, by DHCP option 26',
      'Coastal access and its WAN ports at 1604 or more',
      'MSS 1356 on the hosts themselves, TCP only',
    ]);
  });

  it('are none for what arrives, or ends as it should', () => {
    for (const design of [pairDesign(), pairDesign({ hub: 'ha-pair' })]) {
      const { trace, fits } = resultOf(design, { send: 'arp', from: { host: 'h-s0-a' } });
      expect(waysOut(design, trace, fits)).toEqual([]);
    }
  });
});

describe('on the sheet', () => {
  const design = pairDesign({ hub: 'ha-pair' });
  const { trace, hops } = resultOf(design, toFirstSpoke({ bytes: 1500 }));
  const tonesAfter = (count: number) =>
    traceToDecorations(design, trace, hops.slice(0, count), count >= hops.length).tones!;
  const device = (id: string, member?: 1 | 2): string =>
    elementKey({ collection: 'devices', id, ...(member === undefined ? {} : { member }) });

  it('the way so far is lit and the rest dimmed, of a pair the member that has the frame', () => {
    const sent = tonesAfter(0);
    expect(sent[device('h-s0-a')]).toEqual(['lit']);
    expect(sent[device('sw-s0')]).toEqual(['dimmed']);
    const all = tonesAfter(hops.length);
    expect(all[device('sw-s0')]).toEqual(['lit']);
    expect(all[device('fw-s0', 1)]).toEqual(['lit']);
    expect(all[device('fw-s0')]).toEqual([]);
    expect(all[device('fw-s1')]).toEqual(['dimmed']);
    expect(all['tunnels/tn-s0-s1-a']).toEqual(['dimmed']);
  });

  it('the numbers of the strip stand at their hops, the failing one marked, with its pipe', () => {
    const { hops: marks, overhangs } = traceToDecorations(design, trace, hops, true);
    expect(marks?.map(({ number, failing }) => [number, failing])).toEqual([
      [1, false],
      [2, false],
      [3, false],
      [4, true],
    ]);
    expect(overhangs).toEqual([{ tunnel: 'tn-s0-s1-a', end: 'a', packetBytes: 1604, mtuBytes: 1500 }]);
    expect(traceToDecorations(design, trace, hops.slice(0, 2), false).overhangs).toEqual([]);
  });

  it('a storm’s cycle turns once the frame is through', () => {
    const mesh = meshDesign(3);
    const storm = resultOf(mesh, { send: 'arp', from: { host: 'h-s0-a' } });
    expect(traceToDecorations(mesh, storm.trace, storm.hops, true).loops).toEqual([
      { steps: storm.trace.storm!.cycle },
    ]);
    expect(traceToDecorations(mesh, storm.trace, [], false).loops).toEqual([]);
  });
});

describe('two probes', () => {
  it('part at the hop where one is dropped and the other goes on', () => {
    const long = resultOf(pairDesign(), toFirstSpoke({ bytes: 1500 }));
    const short = resultOf(pairDesign(), toFirstSpoke({ bytes: 1396 }));
    const part = partOfWays(long, short);
    expect(part).toMatchObject({ together: 3, first: { number: 4 }, second: { number: 4 } });
    expect(partWords(part)).toBe(
      'They share 3 hops and part at hop 4, fw-s0 to Coastal access: first is dropped, second goes on.',
    );
  });

  it('don’t part where only their lengths differ and both arrive', () => {
    const one = resultOf(pairDesign(), toFirstSpoke({ bytes: 100 }));
    const other = resultOf(pairDesign(), toFirstSpoke({ bytes: 1396 }));
    expect(partOfWays(one, other)).toBeUndefined();
    expect(partWords(undefined)).toBe('Both take the same way to the same end.');
  });

  it('part at once where they start at different places', () => {
    const one = resultOf(pairDesign(), toFirstSpoke({ bytes: 100 }));
    const back = resultOf(pairDesign(), {
      send: 'ping',
      from: { host: 'h-s1-a' },
      to: 'h-s0-a',
    });
    expect(partOfWays(one, back)?.together).toBe(0);
    expect(partWords(partOfWays(one, back))).toMatch(/^They part at once at hop 1/);
  });
});

describe('questions to begin with', () => {
  const demo = demoDesign('fault-free');

  it('are about this design, and can all be answered', () => {
    const starts = traceStarts(demo);
    expect(starts.map(({ label }) => label)).toEqual([
      'A ping from gate-ske to ticket-1',
      '1500 B from beside gate-ske to ticket-1',
      'An OSPF hello from vms-1',
      'A broadcast from gate-ske',
    ]);
    const [ping, large] = starts.map(({ question }) => resultOf(demo, question).verdict);
    expect(ping?.tone).toBe('arrives');
    expect(large).toMatchObject({ what: 'Dropped at fw-ske without a word.', insteadBytes: 1396 });
  });

  it('are none where no two sites share a segment', () => {
    expect(traceStarts(hubDesign(0))).toEqual([]);
  });
});

test('a trace can be told as text, a line a hop', () => {
  const result = resultOf(pairDesign(), toFirstSpoke({ bytes: 1500 }));
  const lines = traceText('h-s0-a to h-s1-a', result).split('\n');
  expect(lines).toHaveLength(6);
  expect(lines[4]).toMatch(/^4\. fw-s0 to Coastal access through tn-s0-s1-a, .*104 over/);
  expect(lines[5]).toMatch(/^Dropped at fw-s0/);
});
