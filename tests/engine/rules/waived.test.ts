import { describe, expect, test } from 'vitest';
import type { Finding } from '#engine/rules/finding.ts';
import type { WaiverTerms } from '#engine/rules/waived.ts';
import { applyWaivers } from '#engine/rules/waived.ts';

const finding = (key: string, fingerprint = 'f1'): Finding => ({
  key,
  rule: 'a-rule',
  severity: 'degrading',
  sentence: key,
  words: key,
  why: '',
  seen: '',
  sources: [],
  elements: [],
  properties: [],
  values: {},
  fingerprint,
});
const waiver = (findingKey: string, changes: Partial<WaiverTerms> = {}): WaiverTerms => ({
  findingKey,
  fingerprint: 'f1',
  expiresOn: '2026-12-31',
  withdrawnAt: null,
  ...changes,
});
const findings = [finding('a'), finding('b'), finding('c')];
const keysOf = (found: readonly Finding[]) => found.map(({ key }) => key);

describe('a waiver', () => {
  test('covers its finding and leaves the others open, in their order', () => {
    const b = waiver('b');
    const { open, covered, lapsed } = applyWaivers(findings, [b], '2026-12-01');
    expect(keysOf(open)).toEqual(['a', 'c']);
    expect(covered).toEqual([{ finding: findings[1], waiver: b }]);
    expect(lapsed).toEqual([]);
  });

  test('holds on its last day and not on the next', () => {
    expect(applyWaivers(findings, [waiver('a')], '2026-12-31').covered).toHaveLength(1);
    const { open, lapsed } = applyWaivers(findings, [waiver('a')], '2027-01-01');
    expect(keysOf(open)).toEqual(['a', 'b', 'c']);
    expect(lapsed).toEqual([{ waiver: waiver('a'), why: 'expired', finding: findings[0] }]);
  });

  test('lapses when the values of its finding change, whatever its day', () => {
    const other = waiver('a', { fingerprint: 'f2', expiresOn: '2020-01-01' });
    const { open, lapsed } = applyWaivers(findings, [other], '2026-12-01');
    expect(keysOf(open)).toEqual(['a', 'b', 'c']);
    expect(lapsed).toEqual([{ waiver: other, why: 'changed', finding: findings[0] }]);
  });

  test('has nothing to cover once its finding is gone, and covers it again should it come back', () => {
    const gone = waiver('z');
    expect(applyWaivers(findings, [gone], '2026-12-01').lapsed).toEqual([{ waiver: gone, why: 'gone' }]);
    expect(applyWaivers([finding('z')], [gone], '2026-12-01').open).toEqual([]);
  });

  test('that was withdrawn says nothing, neither of its finding nor as lapsed', () => {
    const withdrawn = waiver('a', { withdrawnAt: '2026-11-01T10:00:00Z', expiresOn: '2020-01-01' });
    expect(applyWaivers(findings, [withdrawn], '2026-12-01')).toEqual({
      open: findings,
      covered: [],
      lapsed: [],
    });
  });
});

test('of two waivers for one finding the first that holds counts, and the other is not told as lapsed', () => {
  const old = waiver('a', { fingerprint: 'f0' });
  const first = waiver('a');
  const second = waiver('a', { expiresOn: '2027-06-01' });
  const { covered, lapsed } = applyWaivers(findings, [old, first, second], '2026-12-01');
  expect(covered).toEqual([{ finding: findings[0], waiver: first }]);
  expect(lapsed).toEqual([]);
});

test('without any waiver the findings are the same list, so that nothing is drawn anew', () => {
  expect(applyWaivers(findings, [], '2026-12-01').open).toBe(findings);
});
