import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch, diffPatch } from '../../engine/model/merge-patch.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import type { Finding, Fix } from '../../engine/rules/finding.ts';
import { fixesFor } from '../../engine/rules/fixes-for.ts';
import { runRules } from '../../engine/rules/run-rules.ts';

/** A change that cures a finding and brings no other, and which others it cures along. */
export interface SafeFix {
  readonly finding: Finding;
  readonly fix: Fix;
  readonly alsoCures: readonly Finding[];
}
export interface SafeFixes {
  readonly fixes: readonly SafeFix[];
  /** Findings that no safe change cures. */
  readonly left: readonly Finding[];
  /** All of it as one change of the design; {} where there is nothing. */
  readonly patch: MergePatch;
}
export interface SafeFixProgress extends SafeFixes {
  /** Findings looked at so far. */
  readonly tried: number;
}

/**
 * Works out safe changes for findings, one after the other, each on the design as those before have left it; yields after
 * every finding, so that the work can be shown and stopped. Safe: tried, its finding gone, and nothing new found of any
 * severity.
 */
export function* safeFixes(
  design: Design,
  findings: readonly Finding[],
  numbering: NumberingContext,
): Generator<SafeFixProgress, undefined> {
  let current = design;
  let present = runRules(current, numbering);
  const fixes: SafeFix[] = [];
  const left: Finding[] = [];
  for (const [index, finding] of findings.entries()) {
    const keys = new Set(present.map(({ key }) => key));
    // Otherwise an earlier change has cured it along.
    if (keys.has(finding.key)) {
      const safe = firstSafe(current, finding, keys, numbering);
      if (safe === undefined) left.push(finding);
      else {
        const after = new Set(safe.after.map(({ key }) => key));
        const alsoCures = present.filter(({ key }) => key !== finding.key && !after.has(key));
        fixes.push({ finding, fix: safe.fix, alsoCures });
        current = safe.design;
        present = safe.after;
      }
    }
    yield {
      fixes: [...fixes],
      left: [...left],
      patch: diffPatch(design, current),
      tried: index + 1,
    };
  }
}

const firstSafe = (
  design: Design,
  finding: Finding,
  before: ReadonlySet<string>,
  numbering: NumberingContext,
): { readonly fix: Fix; readonly design: Design; readonly after: readonly Finding[] } | undefined => {
  for (const fix of fixesFor(design, finding, numbering)) {
    const patched = applyPatch(design, fix.patch);
    const after = runRules(patched, numbering);
    if (after.every(({ key }) => before.has(key))) return { fix, design: patched, after };
  }
  return undefined;
};
