import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { fixesFor } from '#engine/rules/fixes-for.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { pairDesign } from '../../support/designs.ts';
import { faults } from '../../support/faults.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { changed } from '../../support/rule-tester.ts';

const mismatch = changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });

describe('fixesFor', () => {
  it('offers what cures the finding', () => {
    const [finding] = runRules(mismatch);
    expect(fixesFor(mismatch, finding!).map((fix) => fix.label)).toEqual([
      'Set Gullhaven to 10000',
      'Set Head office to 777',
    ]);
  });

  it('offers nothing for a finding that the design no longer has', () => {
    const [finding] = runRules(mismatch);
    expect(fixesFor(pairDesign(), finding!)).toEqual([]);
  });

  it('offers nothing for a rule that it does not know', () => {
    expect(fixesFor(mismatch, { rule: 'no-such-rule', key: 'no-such-rule x' })).toEqual([]);
  });

  it('offers, for every finding of generated designs, only valid changes that cure it, block nothing new and can be undone', () => {
    fc.assert(
      fc.property(
        generatedDesign,
        fc.uniqueArray(fc.nat(faults.length - 1), { maxLength: 3 }),
        (base, picks) => {
          const design = picks.reduce<Design>((at, pick) => {
            const next = applyPatch(at, faults[pick]!);
            return parseDesign(next).ok ? next : at;
          }, base);
          const findings = runRules(design);
          expect(runRules(structuredClone(design))).toEqual(findings);
          const blocking = new Set(findings.filter((f) => f.severity === 'blocking').map((f) => f.key));
          for (const finding of findings.slice(0, 4))
            for (const fix of fixesFor(design, finding)) {
              const patched = applyPatch(design, fix.patch);
              expect(parseDesign(patched)).toMatchObject({ ok: true });
              const after = runRules(structuredClone(patched));
              expect(after.map((f) => f.key)).not.toContain(finding.key);
              for (const other of after)
                if (other.severity === 'blocking') expect(blocking).toContain(other.key);
              expect(applyPatch(patched, inversePatch(design, fix.patch))).toEqual(design);
            }
        },
      ),
      { numRuns: 40 },
    );
  }, 120_000);
});
