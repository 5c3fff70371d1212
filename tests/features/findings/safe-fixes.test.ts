import { expect, test } from 'vitest';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import { noNumberingContext } from '../../../src/engine/numbering/numbering-context.ts';
import { fixesFor } from '../../../src/engine/rules/fixes-for.ts';
import { runRules } from '../../../src/engine/rules/run-rules.ts';
import { safeFixes, type SafeFixProgress } from '../../../src/features/findings/safe-fixes.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';
import { meshDesign, pairDesign } from '../../support/designs.ts';

const workedOut = (design = demoDesign('planted-faults'), findings = runRules(design)) => {
  const steps: SafeFixProgress[] = [...safeFixes(design, findings, noNumberingContext)];
  return { design, findings, steps, last: steps.at(-1)! };
};

test('all safe fixes together cure what they say and bring nothing new of any severity', () => {
  const { design, findings, last } = workedOut();
  expect(last.fixes.length).toBeGreaterThan(2);
  const after = new Set(runRules(applyPatch(design, last.patch)).map(({ key }) => key));
  const before = new Set(findings.map(({ key }) => key));
  expect([...after].filter((key) => !before.has(key))).toEqual([]);
  const cured = last.fixes.flatMap(({ finding, alsoCures }) => [finding, ...alsoCures]);
  for (const { key } of cured) expect(after.has(key)).toBe(false);
  expect(cured.length + after.size).toBe(findings.length);
});

test('each finding is looked at once, with a step that tells how far it got', () => {
  const { findings, steps } = workedOut();
  expect(steps.map(({ tried }) => tried)).toEqual(findings.map((_, index) => index + 1));
});

test('a fix that would bring even an advisory is passed over', () => {
  const design = meshDesign(3);
  const [storm] = runRules(design).filter(({ rule }) => rule.startsWith('storm-'));
  const cut = fixesFor(design, storm!).find(({ label }) => label.startsWith('Remove'))!;
  const before = new Set(runRules(design).map(({ key }) => key));
  const bringsNew = (patch: MergePatch): boolean =>
    runRules(applyPatch(design, patch)).some(({ key }) => !before.has(key));
  expect(bringsNew(cut.patch)).toBe(true);
  const { last } = workedOut(design, [storm!]);
  expect(last.fixes.every(({ fix }) => !bringsNew(fix.patch))).toBe(true);
  expect(last.fixes.length + last.left.length).toBe(1);
});

test('a finding that nothing cures is left to a decision', () => {
  const design = applyPatch(pairDesign(), { transports: { coast: { mtu: null } } });
  const unknown = runRules(design).filter((finding) => fixesFor(design, finding).length === 0);
  expect(unknown.length).toBeGreaterThan(0);
  const { last } = workedOut(design, unknown);
  expect(last).toMatchObject({ fixes: [], left: unknown, patch: {} });
});

test('only what is asked for is cured', () => {
  const design = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });
  const asked = runRules(design).filter(({ rule }) => rule === 'tunnel-vni-mismatch');
  const { last } = workedOut(design, asked);
  expect(last.fixes.map(({ finding }) => finding.rule)).toEqual(['tunnel-vni-mismatch']);
  expect(Object.keys(last.patch)).toEqual(['tunnels']);
});

test('no findings need no work', () => {
  expect([...safeFixes(pairDesign(), [], noNumberingContext)]).toEqual([]);
});
