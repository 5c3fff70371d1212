import { expect, test } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { patchDrift } from '#engine/model/patch-drift.ts';
import { driftWords, patchWords, suggestionWords } from '../../../src/features/review/suggestion-words.ts';
import { pairDesign } from '../../support/designs.ts';

const design = pairDesign();
const tunnel = 'tn-s0-s1-a';
const { name } = design.tunnels[tunnel]!;
const was = design.tunnels[tunnel]!.b.vni!;
const patch: MergePatch = { tunnels: { [tunnel]: { b: { vni: 777 } } } };
const suggestion = { patch, before: inversePatch(design, patch) };
const told = (now: Design) => {
  const drift = patchDrift(now, suggestion.patch, suggestion.before);
  return {
    does: suggestionWords(now, suggestion, drift),
    drift: drift.length === 0 ? [] : driftWords(now, suggestion, drift),
  };
};

test('a suggestion says what it changes, from what to what', () => {
  const [line, ...others] = patchWords(design, patch);
  expect(others).toEqual([]);
  expect(line).toContain(name);
  expect(line).toContain(`${was} → 777`);
  expect(told(design)).toEqual({ does: [line], drift: [] });
});

test('one that was applied says the same afterwards', () => {
  expect(suggestionWords(applyPatch(design, patch), suggestion, [])).toEqual(patchWords(design, patch));
});

test('one whose place has moved on says so, and still what it was meant to change', () => {
  const { does, drift } = told(applyPatch(design, { tunnels: { [tunnel]: { b: { vni: 778 } } } }));
  expect(does).toEqual(patchWords(design, patch));
  expect(drift).toHaveLength(1);
  expect(drift[0]).toContain(`${was} → 778`);
});

test('one whose element is gone says that', () => {
  const { does, drift } = told(applyPatch(design, { tunnels: { [tunnel]: null } }));
  expect(does).toEqual(['Changes what is no longer in the design']);
  expect(drift).toEqual(['A tunnel that it changes is gone']);
});
