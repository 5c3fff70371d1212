import { act, renderHook } from '@testing-library/react';
import type { ReactNode } from 'react';
import { expect, test } from 'vitest';
import type { Waiver } from '../../src/contract/waivers.ts';
import { applyPatch } from '../../src/engine/model/merge-patch.ts';
import type { NumberingContext } from '../../src/engine/numbering/numbering-context.ts';
import { runRules } from '../../src/engine/rules/run-rules.ts';
import { ChecksProvider, useChecks, useFixes } from '../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../src/workspace/open-design-context.tsx';
import { openInMemory } from '../canvas/inspector/render-inspector.tsx';
import { pairDesign } from '../support/designs.ts';

const document = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });
const finding = runRules(document).find(({ rule }) => rule === 'tunnel-vni-mismatch')!;
const waiver: Waiver = {
  id: 'w-1',
  findingKey: finding.key,
  fingerprint: finding.fingerprint,
  rule: finding.rule,
  severity: finding.severity,
  sentence: finding.sentence,
  reason: 'The far end translates',
  expiresOn: '2027-03-31',
  madeBy: 'Noor Okafor',
  madeAt: '2026-12-01T14:00:00.000Z',
  withdrawnBy: null,
  withdrawnAt: null,
};

const checksOn = (today: string, numbering?: NumberingContext) => {
  const design = openInMemory(document, true);
  const { result } = renderHook(() => ({ checks: useChecks(), fixes: useFixes(finding) }), {
    wrapper: ({ children }: { readonly children: ReactNode }) => (
      <OpenDesignProvider open={() => design}>
        <ChecksProvider waivers={[waiver]} today={today} numbering={numbering}>
          {children}
        </ChecksProvider>
      </OpenDesignProvider>
    ),
  });
  return { design, result };
};

test('a waived finding keeps its place and number, and no longer counts', () => {
  const { result } = checksOn('2027-03-31');
  const { findings, openFindings, waiverOf } = result.current.checks;
  expect(findings).toEqual(runRules(document));
  expect(openFindings).toEqual(findings.filter(({ key }) => key !== finding.key));
  expect(waiverOf(finding.key)).toBe(waiver);
});

test('it counts again after the last day, and the waiver is told as lapsed', () => {
  const { result } = checksOn('2027-04-01');
  expect(result.current.checks.openFindings).toHaveLength(result.current.checks.findings.length);
  expect(result.current.checks.waived.lapsed).toMatchObject([{ waiver: { id: 'w-1' }, why: 'expired' }]);
});

test('an edit of the values that it was given for lets it lapse, taking it back lets it hold again', () => {
  const { design, result } = checksOn('2027-01-01');
  act(() => void design.commit('VNI', { tunnels: { 'tn-s0-s1-a': { b: { vni: 778 } } } }));
  expect(result.current.checks.waiverOf(finding.key)).toBeUndefined();
  expect(result.current.checks.waived.lapsed).toMatchObject([{ why: 'changed' }]);
  act(() => void design.undo());
  expect(result.current.checks.waiverOf(finding.key)).toBe(waiver);
});

test('fixes take numbers from the workspace’s pools and leave other designs’ numbers alone', () => {
  const numbering = { pools: { vnis: [{ from: 20_000, to: 20_099 }] }, otherDesigns: [{ vnis: [20_000] }] };
  const { result } = checksOn('2027-01-01', numbering);
  const patches = JSON.stringify(result.current.fixes.map(({ patch }) => patch));
  expect(patches).toContain('20001');
  expect(patches).not.toContain('20000');
});
