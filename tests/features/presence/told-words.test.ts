import { expect, test } from 'vitest';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { toldWords } from '../../../src/features/presence/told-words.ts';
import { pairDesign } from '../../support/designs.ts';

const before = pairDesign();
const { a } = before.tunnels['tn-s0-s1-a']!;
const after = applyPatch(before, { tunnels: { 'tn-s0-s1-a': { a: { vni: 10_777 } } } });
const by = 'Noor Okafor';

test('names who changed the same later, and what it was before and is now', () => {
  const words = toldWords({ kind: 'settled', stands: 'theirs', by, before, after });
  expect(words).toMatch(/^Noor Okafor changed the same after you\. VNI of tunnel /);
  expect(words).toContain(`${a.vni} → 10777`);
});

test('says that one’s own edit stands where it came last', () => {
  expect(toldWords({ kind: 'settled', stands: 'mine', by, before, after })).toMatch(
    /^Noor Okafor changed the same just before you; yours stands\. VNI of tunnel /,
  );
});

test('says nothing where both did the same', () => {
  expect(toldWords({ kind: 'settled', stands: 'theirs', by, before, after: before })).toBeUndefined();
});

test('says why a step is not taken back', () => {
  expect(toldWords({ kind: 'taken-over', label: 'Set VNI', by })).toBe(
    "Nothing taken back: Noor Okafor has since changed what 'Set VNI' did.",
  );
});
