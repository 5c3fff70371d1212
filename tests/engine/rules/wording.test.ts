import { describe, expect, it } from 'vitest';
import { counted, countWord, listed, namedOrCounted, sentenceCase } from '#engine/rules/wording.ts';

describe('wording', () => {
  it('says small counts in words and large ones in digits', () => {
    expect([0, 1, 12, 13].map(countWord)).toEqual(['no', 'one', 'twelve', '13']);
    expect(counted(1, 'port', 'ports')).toBe('one port');
    expect(counted(0, 'port', 'ports')).toBe('no ports');
  });

  it('lists as one would read aloud', () => {
    expect([[], ['x'], ['x', 'y'], ['x', 'y', 'z']].map(listed)).toEqual(['', 'x', 'x and y', 'x, y and z']);
  });

  it('names up to three and counts more', () => {
    expect(namedOrCounted(['x', 'y', 'z'], 'tunnels')).toBe('x, y and z');
    expect(namedOrCounted(['x', 'y', 'z', 'w'], 'tunnels')).toBe('four tunnels');
  });

  it('starts a sentence with a capital', () => {
    expect(sentenceCase('six ports')).toBe('Six ports');
  });
});
