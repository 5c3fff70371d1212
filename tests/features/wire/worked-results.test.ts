import { describe, expect, it, test } from 'vitest';
import { stackPresets, textsOfPreset } from '../../../src/features/wire/stack-presets.ts';
import type { WireTexts } from '../../../src/features/wire/wire-fields.ts';
import { workedResults, type WorkedResult } from '../../../src/features/wire/worked-results.ts';
import { answerFor, figuresFor } from './wire-inputs.ts';

const resultsFor = (changes: Partial<WireTexts> = {}): Readonly<Record<string, WorkedResult>> =>
  Object.fromEntries(
    workedResults(figuresFor(changes))
      .flatMap(({ results }) => results)
      .map((result) => [result.label, result]),
  );
const valuesFor = (changes: Partial<WireTexts> = {}) =>
  Object.fromEntries(Object.entries(resultsFor(changes)).map(([label, { value }]) => [label, value]));

describe('1500 B in VXLAN, AES-GCM tunnel mode, MTU 1500', () => {
  const results = resultsFor();

  it('is 1604 B outside and 1642 B on the wire', () => {
    expect(results['Outer packet']).toMatchObject({
      value: '1604 B',
      working:
        'IP 20 + ESP 8 + IV 8 + IP 20 + UDP 8 + VXLAN 8 + Eth 14 + packet 1500 + pad 0 + end 2 + ICV 16 = 1604',
      source: 'RFC 7348 section 5; RFC 4303 section 2',
    });
    expect(results['Added bytes']).toMatchObject({ value: '104 B' });
    expect(results['Added bytes']?.working).toBe('1604 − 1500 = 104, 6.93 % of the packet');
    expect(results['Frame on the wire']).toMatchObject({
      value: '1622 B',
      working: 'Eth 14 + FCS 4 + packet 1604 = 1622; with preamble 8 and gap 12: 1642',
    });
    expect(results['In the transport']).toMatchObject({
      value: '104 B over',
      working: '1604 − 1500 = 104; cut, it would be 1500 + 124',
      mark: {
        severity: 'blocking',
        sentence: 'Hosts may send 1396 B at most, or the transport has to carry 1604 B.',
      },
    });
  });

  it('passes 1396 B whole, with what to set', () => {
    expect(results['Largest inner packet']).toMatchObject({
      value: '1396 B',
      working: '1396 becomes 1500 ≤ 1500; 1397 becomes 1504',
    });
    expect(results['Host and gateway MTU']?.value).toBe('1396 B');
    expect(results['TCP MSS, IPv4 and IPv6']).toMatchObject({
      value: '1356 B, 1336 B',
      working: 'IPv4 1396 − 20 − 20; IPv6 1396 − 40 − 20',
      source: 'RFC 9293 section 3.7.1',
    });
    expect(results['Ping to test with DF, IPv4 and IPv6']?.value).toBe('1368 B, 1348 B');
    expect(results['Transport MTU for 1500']?.value).toBe('1604 B');
    expect(results['Transport MTU for 9000']?.value).toBe('9104 B');
  });

  it('counts frames, goodput and one flow at what passes', () => {
    expect(results['Frames']).toMatchObject({
      value: '81,274 per s',
      working: '1,000,000,000 / (8 × 1538 B); sizes over 1396 sent at that',
    });
    // 1344 B of data in a segment of 1396 with timestamps, 1538 B on the wire.
    expect(results['TCP goodput']).toMatchObject({ value: '873.8 Mbit/s' });
    expect(results['TCP goodput']?.working).toMatch(/^1,000,000,000 × 1344 \/ 1538:/);
    expect(results['One TCP flow']).toMatchObject({
      value: '26.21 Mbit/s',
      working: '65,535 B × 8 / 20 ms = 26.21 Mbit/s; held by the window',
    });
  });
});

// Worked out by hand from RFC 4303 section 2, RFC 7348 section 5, RFC 3948 section 2.1 and RFC 2516 section 7.
test.each([
  ['internet', '1396 B', '1604 B'],
  ['internet-nat', '1388 B', '1612 B'],
  ['internet-pppoe', '1388 B', '1604 B'],
  ['trunk', '1392 B', '1608 B'],
  ['transport-mode', '1416 B', '1584 B'],
  ['cbc', '1388 B', '1612 B'],
  ['all-ipv6', '1356 B', '1644 B'],
  ['fibre', '1450 B', '1550 B'],
  ['jumbo', '8896 B', '1604 B'],
])('the preset %s passes %s and needs %s for 1500', (id, largest, needed) => {
  const preset = stackPresets.find((each) => each.id === id);
  expect(preset).toBeDefined();
  expect(valuesFor(preset && textsOfPreset(preset))).toMatchObject({
    'Largest inner packet': largest,
    'Transport MTU for 1500': needed,
  });
});

test('every preset is among those worked out', () => {
  expect(stackPresets).toHaveLength(9);
});

test('a packet that passes says how much is to spare', () => {
  expect(resultsFor({ packet: '1390' })['In the transport']).toEqual({
    label: 'In the transport',
    value: 'whole',
    working: '1500 − 1496 = 4 to spare',
    source: 'the transport’s MTU',
  });
});

test('access overhead is named as what limits, and counted in the payload that the access link needs', () => {
  const results = resultsFor({ access: 'pppoe' });
  expect(results['In the transport']?.source).toMatch(/^access link payload less its overhead/);
  expect(results['Transport MTU for 1500']?.working).toMatch(/access link payload 1604 \+ 8 = 1612$/);
  expect(results['Frame on the wire']?.working).toMatch(
    /^Eth 14 \+ PPPoE 6 \+ PPP 2 \+ FCS 4 \+ packet 1604 = 1630/,
  );
});

test('a host MTU under 1280 is said to be too small for IPv6', () => {
  const results = resultsFor({ mtu: '1280', packet: '1000' });
  expect(results['Host and gateway MTU']?.mark?.sentence).toMatch(/^IPv6 needs 1280 B on every link/);
  expect(resultsFor()['Host and gateway MTU']).not.toHaveProperty('mark');
});

test('a mix is counted by its packets, and its source is told', () => {
  const imix = resultsFor({ mix: 'imix' })['Frames'];
  // 7 × 40, 4 × 576 and, in place of 1500, 1396: 7 × 190 (frames padded) + 4 × 718 + 1538 B on the wire.
  expect(imix?.working).toBe('1,000,000,000 / (8 × 5740 B of 12 packets) × 12; sizes over 1396 sent at that');
  expect(imix?.source).toMatch(/common practice, no source$/);
  const letters = resultsFor({ mix: 'letters', letters: 'zz' })['Frames'];
  expect(letters?.working).toBe('1,000,000,000 / (8 × 3076 B of 2 packets) × 2');
  expect(letters?.source).toBe('RFC 2544 appendix B; RFC 6985 section 4');
});

test('a flow is held by what holds it most', () => {
  expect(resultsFor({ loss: '0.1' })['One TCP flow']?.working).toMatch(
    /0\.93 × 1356 B × 8 .*held by the loss$/,
  );
  const wide = resultsFor({ window: '1073725440', rtt: '1' })['One TCP flow'];
  expect(wide).toMatchObject({ value: '873.8 Mbit/s' });
  expect(wide?.working).toMatch(/held by the link$/);
});

test('without room for data there is no goodput to tell', () => {
  const results = resultsFor({ mtu: '152', packet: '20' });
  expect(results['Largest inner packet']?.value).toBe('48 B');
  expect(results).not.toHaveProperty('TCP goodput');
});

describe('choices that do not go together', () => {
  it.each<[Partial<WireTexts>, object]>([
    [
      { vxlan: 'none', tags: '1' },
      {
        tags: 'Inner tags 1: without VXLAN there is no inner frame to tag. Choose 0, or VXLAN over IPv4 or IPv6.',
      },
    ],
    [
      { integrity: 'hmac-sha1-96' },
      {
        integrity:
          'Integrity HMAC-SHA1-96: AES-GCM, 16-byte ICV protects integrity itself. Choose none, or another transform.',
      },
    ],
    [
      { transform: 'aes-cbc' },
      {
        integrity:
          'Integrity none: AES-CBC needs an algorithm beside it, RFC 8221 section 4. Choose one, such as HMAC-SHA2-256-128.',
      },
    ],
    [
      { mtu: '100' },
      { mtu: 'Transport MTU 100: needed is at least 152: the smallest packet grows to that.' },
    ],
    [{ packet: '39', ip: 'ipv6' }, { packet: 'Inner packet 39: needed is a whole number from 40 to 65575.' }],
    [
      { packet: '65500' },
      {
        packet:
          'Inner packet 65500: needed is a shorter packet: the VXLAN packet would have 65550 bytes, IPv4 allows 65535.',
      },
    ],
    [
      { outer: 'ipv6', mtu: '1200' },
      { mtu: 'Transport MTU 1200: needed is a whole number from 1280 to 65575.' },
    ],
  ])('%o are refused where they were chosen', (changes, problems) => {
    expect(answerFor(changes)).toEqual({ ok: false, problems });
  });
});
