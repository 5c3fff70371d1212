import type { Design } from '../model/design.ts';
import { indexNetwork } from '../network/index-network.ts';
import { noContext, type CheckContext } from './check-context.ts';
import type { Rule } from './define-rule.ts';
import { compareFindings, type Finding, type Severity } from './finding.ts';
import { rules } from './index.ts';

interface Remembered {
  readonly inputs: readonly object[];
  readonly context: CheckContext;
  readonly findings: readonly Finding[];
}

// By rule, then by the identity of the first collection it looks at: forgotten together with the design.
const memory = new Map<Rule, WeakMap<object, Remembered>>();

const findingsOf = (rule: Rule, design: Design, context: CheckContext): readonly Finding[] => {
  const inputs = rule.looksAt.map((collection) => design[collection]);
  const byFirst = memory.get(rule) ?? new WeakMap<object, Remembered>();
  memory.set(rule, byFirst);
  const before = byFirst.get(inputs[0]!);
  if (before?.context === context && before.inputs.every((input, i) => input === inputs[i]))
    return before.findings;
  const findings = rule.check(indexNetwork(design), context);
  byFirst.set(inputs[0]!, { inputs, context, findings });
  return findings;
};

/** What the given rules find in a design; the same design and context give the same findings in the same order. */
export const runTheseRules = (
  these: readonly Rule[],
  design: Design,
  context: CheckContext = noContext,
): readonly Finding[] => these.flatMap((rule) => findingsOf(rule, design, context)).sort(compareFindings);

/**
 * Everything the checks find in a design, most severe first, then by rule and key. Rules whose collections kept their
 * identity since their last run answer from memory.
 */
export const runRules = (design: Design, context: CheckContext = noContext): readonly Finding[] =>
  runTheseRules(rules, design, context);

/** How many findings there are of each severity. */
export const countBySeverity = (findings: readonly Finding[]): { readonly [S in Severity]: number } => {
  const counts = { blocking: 0, degrading: 0, advisory: 0 };
  for (const finding of findings) counts[finding.severity] += 1;
  return counts;
};
