import type { Design } from '../model/design.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Answer, Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import { noContext, type CheckContext } from './check-context.ts';
import type { Rule } from './define-rule.ts';
import { factIdentities } from './facts.ts';
import { compareFindings, type Finding, type Severity } from './finding.ts';
import { rules } from './index.ts';

interface Remembered {
  readonly inputs: readonly object[];
  readonly context: CheckContext;
  readonly findings: readonly Finding[];
}
type Memory = Map<Rule, Remembered>;

const memoryOf = perNetwork((_network, earlier?: Answer<Memory>): Memory => new Map(earlier?.value));

const findingsOf = (rule: Rule, network: Network, context: CheckContext): readonly Finding[] => {
  const identities = factIdentities(network);
  const inputs = rule.facts.map((fact) => identities[fact]);
  const memory = memoryOf(network);
  const before = memory.get(rule);
  if (before?.context === context && before.inputs.every((input, i) => input === inputs[i]))
    return before.findings;
  const findings = rule.check(network, context);
  memory.set(rule, { inputs, context, findings });
  return findings;
};

/** What the given rules find in a design; the same design and context give the same findings in the same order. */
export const runTheseRules = (
  these: readonly Rule[],
  design: Design,
  context: CheckContext = noContext,
): readonly Finding[] => {
  const network = indexNetwork(design);
  return these.flatMap((rule) => findingsOf(rule, network, context)).sort(compareFindings);
};

/**
 * Everything the checks find in a design, most severe first, then by rule and key. Rules answer from memory while
 * nothing of what they look at was touched.
 */
export const runRules = (design: Design, context: CheckContext = noContext): readonly Finding[] =>
  runTheseRules(rules, design, context);

/** How many findings there are of each severity. */
export const countBySeverity = (findings: readonly Finding[]): { readonly [S in Severity]: number } => {
  const counts = { blocking: 0, degrading: 0, advisory: 0 };
  for (const finding of findings) counts[finding.severity] += 1;
  return counts;
};
