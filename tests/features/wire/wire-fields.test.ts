import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { espIntegrityIds, espTransformIds } from '#engine/reference/esp.ts';
import {
  readTexts,
  searchValuesOf,
  textProblem,
  textsFrom,
  textsOf,
  wireFields,
  type FieldName,
  type WireInputs,
} from '../../../src/features/wire/wire-fields.ts';
import { presetOf, stackPresets, textsOfPreset } from '../../../src/features/wire/stack-presets.ts';

const arbitraryIp = fc.constantFrom('ipv4' as const, 'ipv6' as const);
const arbitraryInputs: fc.Arbitrary<WireInputs> = fc.record({
  packet: fc.integer({ min: 20, max: 65_575 }),
  ip: arbitraryIp,
  tags: fc.constantFrom(0 as const, 1 as const, 2 as const),
  vxlan: fc.constantFrom('ipv4' as const, 'ipv6' as const, 'none' as const),
  esp: fc.constantFrom('none' as const, 'tunnel' as const, 'transport' as const),
  transform: fc.constantFrom(...espTransformIds),
  integrity: fc.constantFrom('none' as const, ...espIntegrityIds),
  nat: fc.boolean(),
  outer: arbitraryIp,
  access: fc.oneof(fc.constantFrom('none' as const, 'pppoe' as const), fc.integer({ min: 0, max: 256 })),
  payload: fc.integer({ min: 576, max: 65_535 }),
  mtu: fc.integer({ min: 68, max: 65_535 }),
  link: fc.integer({ min: 1, max: 10_000_000_000_000 }),
  mix: fc.constantFrom('one' as const, 'imix' as const, 'letters' as const),
  letters: fc.stringMatching(/^[a-jz]{1,64}$/),
  timestamps: fc.boolean(),
  window: fc.integer({ min: 1, max: 1_073_725_440 }),
  rtt: fc.integer({ min: 1, max: 60_000_000 }),
  loss: fc.integer({ min: 0, max: 1_000_000 }),
});

/** What an address says, as a browser reads it again. */
const addressOf = (texts: Parameters<typeof searchValuesOf>[0]): URLSearchParams => {
  const told = Object.entries(searchValuesOf(texts)).filter(([, text]) => text !== '');
  return new URLSearchParams(new URLSearchParams(told).toString());
};
const readBack = (address: URLSearchParams) => readTexts(textsFrom((name) => address.get(name) ?? ''));

describe('the address', () => {
  it('holds every input', () => {
    fc.assert(
      fc.property(arbitraryInputs, (inputs) => {
        expect(readBack(addressOf(textsOf(inputs)))).toEqual({ ok: true, inputs });
      }),
    );
  });

  it('says nothing of what is as it starts', () => {
    expect(addressOf(textsFrom(() => '')).toString()).toBe('');
    expect(addressOf({ ...textsFrom(() => ''), mtu: '9000' }).toString()).toBe('mtu=9000');
  });

  it('is read with the initial values of what it leaves out', () => {
    const read = readBack(new URLSearchParams('packet=1396&link=100+Mbit/s'));
    expect(read).toMatchObject({
      ok: true,
      inputs: { packet: 1396, link: 100_000_000, mtu: 1500, transform: 'aes-gcm-16', rtt: 20_000 },
    });
  });
});

describe('a text that a field cannot take', () => {
  it.each<[FieldName, string, string]>([
    ['mtu', '67', 'Transport MTU 67: type a whole number from 68 to 65535.'],
    ['mtu', '1500.5', 'Transport MTU 1500.5: type a whole number from 68 to 65535.'],
    ['packet', '', 'Inner packet is empty: type a whole number from 20 to 65575.'],
    ['tags', '3', 'Inner tags 3: choose 0, 1 or 2.'],
    ['esp', 'both', 'ESP both: choose one of none, tunnel, transport.'],
    ['nat', 'maybe', 'NAT traversal maybe: choose yes or no.'],
    ['access', '257', 'Access overhead 257: type none, pppoe, or a whole number from 0 to 256.'],
    ['link', '100', 'Link rate 100: add the unit, such as 100 Mbit/s.'],
    ['link', '11 Tbit/s', 'Link rate 11 Tbit/s: type 1 bit/s to 10 Tbit/s.'],
    ['rtt', '61000', 'Round trip 61000: type 0.001 ms to 60000 ms.'],
    ['loss', '101', 'Loss 101: type 0 to 100 per cent.'],
    [
      'letters',
      'abk',
      'Mix letters abk: type 1 to 64 letters from a to j, or z for the host MTU, such as aaaaaaaddddg.',
    ],
  ])('%s: %j is refused with field, value and way out', (name, text, sentence) => {
    expect(textProblem(name, text)).toBe(sentence);
    // An empty place in an address means the initial value.
    if (text !== '') {
      expect(readBack(new URLSearchParams({ [name]: text }))).toEqual({
        ok: false,
        problems: { [name]: sentence },
      });
    }
  });

  it('leaves all fields that are wrong named at once', () => {
    const read = readBack(new URLSearchParams('mtu=1&packet=x'));
    expect(read.ok ? [] : Object.keys(read.problems)).toEqual(['packet', 'mtu']);
  });
});

describe('a preset', () => {
  it.each(stackPresets.map((preset) => [preset.label, preset] as const))(
    '“%s” is recognised by what it sets, from any stack before',
    (_label, preset) => {
      const before = { ...textsFrom(() => ''), tags: '2', mtu: '1400', access: '8', packet: '200' };
      const texts = { ...before, ...textsOfPreset(preset) };
      expect(presetOf(texts)).toBe(preset);
      expect(texts.packet).toBe('200');
      expect(readTexts(texts).ok).toBe(true);
    },
  );

  it('is none once anything of the stack differs', () => {
    expect(presetOf({ ...textsFrom(() => ''), mtu: '1492' })).toBeUndefined();
    expect(presetOf(textsFrom(() => ''))).toBe(stackPresets[0]);
    expect(wireFields.packet.initial).toBe('1500');
  });
});
