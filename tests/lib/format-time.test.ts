import { expect, test } from 'vitest';
import { dateAndTime, relativeTime } from '../../src/lib/format-time.ts';

const now = new Date(2026, 2, 18, 14, 36);
const before = (ms: number): Date => new Date(now.getTime() - ms);
const minuteMs = 60_000;

test.each([
  [before(59_000), 'just now'],
  [before(-5 * minuteMs), 'just now'],
  [before(minuteMs), '1 min ago'],
  [before(59 * minuteMs), '59 min ago'],
  [before(60 * minuteMs), '1 h ago'],
  [new Date(2026, 2, 18, 0, 1), '14 h ago'],
  [new Date(2026, 2, 17, 23, 59), 'yesterday'],
  [new Date(2026, 2, 17, 9, 0), 'yesterday'],
  [new Date(2026, 2, 16, 23, 59), '16 March'],
  [new Date(2025, 11, 31, 12, 0), '31 December 2025'],
])('%s reads as it would be said: %s', (time, words) => {
  expect(relativeTime(time, now)).toBe(words);
});

test('shortly after midnight, minutes are still counted', () => {
  expect(relativeTime(new Date(2026, 2, 17, 23, 50), new Date(2026, 2, 18, 0, 10))).toBe('20 min ago');
});

test('a date with its time is written out', () => {
  expect(dateAndTime(now)).toBe('18 March 2026, 14:36');
});
