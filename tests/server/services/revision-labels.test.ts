import { expect, test } from 'vitest';
import { nextLabel } from '../../../server/services/revision-labels.ts';

test.each([
  [[], undefined, 'A'],
  [[], 'C', 'C'],
  [[], 'c ', 'C'],
  [[], 'Draft 2', 'A'],
  [[], '3', '3'],
  [['A'], 'A', 'B'],
  [['A'], 'D', 'D'],
  [['D', 'A'], 'B', 'E'],
  [['H'], undefined, 'J'],
  [['N'], undefined, 'P'],
  [['Z'], undefined, 'AA'],
  [['AZ'], undefined, 'BA'],
  [['9'], undefined, '10'],
  [['9'], 'B', '10'],
  [['B'], '9', 'C'],
])('after %j, with %j in the title block, comes %j', (used, written, expected) => {
  expect(nextLabel(used, written)).toBe(expected);
});
