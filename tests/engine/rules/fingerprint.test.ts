import { describe, expect, it } from 'vitest';
import { fingerprintOf } from '#engine/rules/fingerprint.ts';

describe('fingerprintOf', () => {
  // Published test vectors of FNV-1a, 64 bits, from memory.
  it.each([
    ['', 'cbf29ce484222325'],
    ['a', 'af63dc4c8601ec8c'],
    ['foobar', '85944171f73967e8'],
  ])('gives the published value for "%s"', (text, expected) => {
    expect(fingerprintOf(text)).toBe(expected);
  });

  it('tells letters beyond one byte apart', () => {
    expect(fingerprintOf('ł')).not.toBe(fingerprintOf('B'));
  });
});
