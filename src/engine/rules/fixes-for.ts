import type { Design } from '../model/design.ts';
import { applyPatch } from '../model/merge-patch.ts';
import { changedProblems, referenceProblems } from '../model/parse-design.ts';
import { indexNetwork } from '../network/index-network.ts';
import { noContext, type CheckContext } from './check-context.ts';
import type { Finding, Fix } from './finding.ts';
import { rules } from './index.ts';
import { runRules } from './run-rules.ts';

const blockingKeys = (findings: readonly Finding[]): ReadonlySet<string> =>
  new Set(findings.filter((finding) => finding.severity === 'blocking').map((finding) => finding.key));

/**
 * The changes that cure a finding, best first. Each was tried on the design: the result is valid, the finding is gone
 * and no blocking finding is new. Empty when nothing can be offered, or when the design no longer has the finding.
 */
export const fixesFor = (
  design: Design,
  finding: Pick<Finding, 'rule' | 'key'>,
  context: CheckContext = noContext,
): readonly Fix[] => {
  const rule = rules.find((candidate) => candidate.id === finding.rule);
  const proposals = rule?.proposals(indexNetwork(design), context, finding.key) ?? [];
  if (proposals.length === 0) return [];
  const blockedBefore = blockingKeys(runRules(design, context));
  return proposals.filter(({ patch }) => {
    const patched = applyPatch(design, patch);
    if (patched === design) return false;
    if (changedProblems(design, patched).length > 0 || referenceProblems(patched).length > 0) return false;
    const after = runRules(patched, context);
    if (after.some((other) => other.key === finding.key)) return false;
    return [...blockingKeys(after)].every((key) => blockedBefore.has(key));
  });
};
