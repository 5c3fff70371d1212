import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  formatMilliseconds,
  formatSeconds,
  parseMilliseconds,
  parseSeconds,
} from '../../src/lib/duration-text.ts';
import { formatRate, parseRate } from '../../src/lib/rate-text.ts';
import { formatPercent, parsePercent } from '../../src/lib/share-text.ts';
import {
  allowedVlans,
  circuitVlans,
  formatVlans,
  parseVlans,
  vlanTranslation,
} from '../../src/canvas/inspector/vlan-list.ts';
import {
  accessOverhead,
  etherType,
  numberList,
  textList,
  wholeNumber,
  type Reading,
} from '../../src/lib/written-value.ts';

const value = <T>(read: Reading<T>): T | string => (read.ok ? read.value : `refused: ${read.wayOut}`);

describe('lists of VLANs', () => {
  it('are written with ranges and read back the same', () => {
    expect(formatVlans([125, 120, 121, 122, 123, 124, 110])).toBe('110, 120-125');
    expect(formatVlans([7, 8])).toBe('7, 8');
    fc.assert(
      fc.property(fc.uniqueArray(fc.integer({ min: 1, max: 4094 }), { minLength: 1 }), (vlans) => {
        expect(value(parseVlans(formatVlans(vlans)))).toEqual([...vlans].sort((a, b) => a - b));
      }),
    );
  });

  it('may be typed with spaces, dashes of either length, and twice the same', () => {
    expect(value(parseVlans('110 120–122,110'))).toEqual([110, 120, 121, 122]);
    expect(value(parseVlans('120 - 122'))).toEqual([120, 121, 122]);
  });

  it('name what is no VLAN and the way out', () => {
    expect(value(parseVlans('110, 4095'))).toBe(
      'refused: 4095 is not a VLAN: type VLANs from 1 to 4094, such as 110, 120-125',
    );
    expect(value(parseVlans('125-120'))).toBe('refused: 125-120 runs backwards: type 120-125');
    expect(value(parseVlans('ten'))).toContain('refused');
    expect(value(parseVlans(', ,'))).toContain('refused');
  });

  it('take the words that a trunk and a circuit know', () => {
    expect(value(allowedVlans.read('All'))).toBe('all');
    expect(value(circuitVlans.read('untagged'))).toBe('untagged');
    expect(value(allowedVlans.read('untagged'))).toContain('or all');
    expect(circuitVlans.write([110])).toBe('110');
    expect(allowedVlans.write('all')).toBe('all');
  });

  it('may be translated in pairs', () => {
    expect(value(vlanTranslation.read('120>220, 110 > 210'))).toEqual({ 110: 210, 120: 220 });
    expect(vlanTranslation.write({ 120: 220, 110: 210 })).toBe('110 > 210, 120 > 220');
    expect(value(vlanTranslation.read('110'))).toContain('refused');
    expect(value(vlanTranslation.read('110 > 4095'))).toContain('refused');
  });
});

describe('rates', () => {
  it('are written in the largest fitting unit and read back the same', () => {
    expect(formatRate(1_000_000_000)).toBe('1 Gbit/s');
    expect(formatRate(1_500_000)).toBe('1.5 Mbit/s');
    expect(formatRate(999)).toBe('999 bit/s');
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 10_000_000_000_000 }), (rateBps) => {
        expect(value(parseRate(formatRate(rateBps)))).toBe(rateBps);
      }),
    );
  });

  it('may be typed short', () => {
    expect(value(parseRate('100Mbit/s'))).toBe(100_000_000);
    expect(value(parseRate('1,5 G'))).toBe(1_500_000_000);
    expect(value(parseRate('64 kbps'))).toBe(64_000);
    expect(value(parseRate('300 bit/s'))).toBe(300);
  });

  it('need a unit', () => {
    expect(value(parseRate('100'))).toBe('refused: add the unit, such as 100 Mbit/s');
    expect(value(parseRate('fast'))).toBe('refused: type a rate with its unit, such as 100 Mbit/s');
    expect(value(parseRate('0.0001 kbit/s'))).toContain('whole bit/s');
  });
});

describe('durations and shares', () => {
  it('show milliseconds and keep microseconds', () => {
    expect(formatMilliseconds(18_500)).toBe('18.5');
    expect(value(parseMilliseconds('18.5'))).toBe(18_500);
    expect(value(parseMilliseconds('2 s'))).toBe(2_000_000);
    expect(value(parseMilliseconds('0.0001'))).toContain('three decimals');
    expect(value(parseMilliseconds('soon'))).toContain('refused');
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 60_000_000 }), (us) => {
        expect(value(parseMilliseconds(formatMilliseconds(us)))).toBe(us);
      }),
    );
  });

  it('show lifetimes in the unit that comes out whole', () => {
    expect(formatSeconds(14_400)).toBe('4 h');
    expect(formatSeconds(90)).toBe('90 s');
    expect(value(parseSeconds('30 min'))).toBe(1800);
    expect(value(parseSeconds('45'))).toBe(45);
    expect(value(parseSeconds('a while'))).toContain('refused');
  });

  it('show per cent and keep parts per million', () => {
    expect(formatPercent(200)).toBe('0.02');
    expect(value(parsePercent('0,02 %'))).toBe(200);
    expect(value(parsePercent('101'))).toContain('0 to 100');
    expect(value(parsePercent('0.00001'))).toContain('four decimals');
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1_000_000 }), (ppm) => {
        expect(value(parsePercent(formatPercent(ppm)))).toBe(ppm);
      }),
    );
  });
});

describe('other written values', () => {
  it('read what they write and refuse the rest with a way out', () => {
    expect(value(etherType.read(etherType.write(0x88f7)))).toBe(0x88f7);
    expect(value(etherType.read('88'))).toContain('0x88f7');
    expect(value(accessOverhead.read(accessOverhead.write('pppoe')))).toBe('pppoe');
    expect(value(accessOverhead.read(accessOverhead.write(8)))).toBe(8);
    expect(value(accessOverhead.read('some'))).toContain('PPPoE');
    expect(value(textList.read('10.110.0.0/22, 2001:db8::/64'))).toEqual(['10.110.0.0/22', '2001:db8::/64']);
    expect(value(numberList.read('500, 4500'))).toEqual([500, 4500]);
    expect(value(numberList.read('http'))).toContain('refused');
    expect(value(wholeNumber().read('-1'))).toContain('whole number');
  });
});
