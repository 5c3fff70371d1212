import { expect, test } from 'vitest';
import { siteCodes, slugOf } from '#engine/stretch/site-codes.ts';

const codesOf = (...names: string[]): readonly string[] => siteCodes(names.map((name) => ({ name })));

test('a site is called by the first letters of its one word, or by its initials', () => {
  expect(codesOf('Head office', 'Gullhaven', 'Orrin Point', 'Skerry')).toEqual(['ho', 'gul', 'op', 'ske']);
  expect(codesOf('Stage 7', 'Stage 12')).toEqual(['s7', 's12']);
});

test('codes differ, whatever the names', () => {
  expect(codesOf('Gullhaven', 'Gulland', 'Gull')).toEqual(['gul', 'gull', 'gul2']);
  expect(new Set(codesOf(...Array.from({ length: 40 }, () => 'Pier')))).toHaveProperty('size', 40);
  expect(siteCodes([{ name: 'Gullhaven' }], new Set(['gul']))).toEqual(['gull']);
});

test('a code that was given stays, and nobody else gets it', () => {
  expect(siteCodes([{ name: 'Gullhaven' }, { name: 'Marl', code: 'gul' }])).toEqual(['gull', 'gul']);
});

test('names in other scripts and signs still make ids', () => {
  expect(slugOf('Größe & Höhe')).toBe('grosse-hohe');
  expect(codesOf('港', '—')).toEqual(['x', 'x2']);
});
