import { expect, test } from 'vitest';
import { expiryProblem, reasonProblem } from '../../../src/features/findings/waive-problems.ts';

const now = new Date('2026-12-01T14:00:00Z');

test('a reason has to say something, and not a book', () => {
  expect(reasonProblem('  ')).toMatch(/^Reason is empty\. /);
  expect(reasonProblem('x'.repeat(1001))).toBe('Reason has 1001 characters. Shorten it to 1000.');
  expect(reasonProblem(' Agreed with the port ')).toBeUndefined();
});

test('the last day is from today to a year from today', () => {
  expect(expiryProblem('2026-12-01', now)).toBeUndefined();
  expect(expiryProblem('2027-12-01', now)).toBeUndefined();
  expect(expiryProblem('2026-11-30', now)).toBe(
    'Holds until 30 November 2026 is past. Choose a day from 1 December 2026 to 1 December 2027.',
  );
  expect(expiryProblem('2027-12-02', now)).toMatch(/^Holds until 2 December 2027 is more than a year off\. /);
  expect(expiryProblem('', now)).toMatch(/^Holds until is no day\. /);
});
