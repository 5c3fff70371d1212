import { expect, test } from 'vitest';
import { ruleReference } from '#engine/rules/rule-reference.ts';
import { filterRules } from '../../src/features/rules-reference/filter-rules.ts';

const rules = ruleReference();

test('without a filter every check of the engine is there', () => {
  expect(filterRules(rules, { severity: null, words: '' })).toEqual(rules);
});

test('a severity keeps its checks', () => {
  const shown = filterRules(rules, { severity: 'degrading', words: '' });
  expect(shown.length).toBeGreaterThan(0);
  expect(shown.every(({ severity }) => severity === 'degrading')).toBe(true);
});

test('all words have to be spoken of, in name, reasons or sources', () => {
  expect(filterRules(rules, { severity: null, words: 'vni rfc 7348' }).map(({ id }) => id)).toContain(
    'tunnel-vni-mismatch',
  );
  expect(filterRules(rules, { severity: null, words: 'vni toaster' })).toEqual([]);
});
