import { expect, test } from 'vitest';
import { shareProblems } from '../../../src/features/sharing/share-problems.ts';

const now = new Date('2027-03-01T09:00:00Z');
const right = { label: 'Saltmarsh Ferries', expiresOn: '2027-03-31', passphrase: '' };

test('takes a day within a year, somebody it is for, and a passphrase or none', () => {
  expect(shareProblems(right, now)).toEqual({});
  expect(shareProblems({ ...right, expiresOn: '2027-03-01', passphrase: 'low water' }, now)).toEqual({});
});

test.each([
  [{ label: ' ' }, 'label', 'For is empty'],
  [{ label: 'x'.repeat(81) }, 'label', 'For has 81 characters'],
  [{ expiresOn: '' }, 'expiresOn', 'is empty'],
  [{ expiresOn: '2027-02-28' }, 'expiresOn', '2027-02-28'],
  [{ expiresOn: '2028-03-01' }, 'expiresOn', '2028-02-29'],
  [{ passphrase: 'short' }, 'passphrase', 'Passphrase has 5 characters'],
] as const)('says what is wrong with %j', (wrong, field, words) => {
  expect(shareProblems({ ...right, ...wrong }, now)[field]).toContain(words);
});
