import { elementKey } from '../../drawing/decorations.ts';
import { severityWords } from '../../components/severity-mark.tsx';
import type { Design } from '../../engine/model/design.ts';
import type { Finding } from '../../engine/rules/finding.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';

export const groupings = ['severity', 'element', 'rule'] as const;
export type Grouping = (typeof groupings)[number];

export interface FindingGroup {
  readonly key: string;
  readonly title: string;
  /** Beside the title, such as the kind of an element. */
  readonly detail?: string;
  readonly findings: readonly Finding[];
}

/**
 * Findings in groups, in the order in which the first of each stands: so the most severe come first whatever the grouping.
 * An element's are those that point at it; of several elements a finding names, that is the first.
 */
export const groupFindings = (
  findings: readonly Finding[],
  by: Grouping,
  design: Design,
  titleOfRule: (rule: string) => string,
): readonly FindingGroup[] => {
  const headOf = (finding: Finding): Omit<FindingGroup, 'findings'> => {
    if (by === 'severity') return { key: finding.severity, title: severityWords[finding.severity] };
    if (by === 'rule') return { key: finding.rule, title: titleOfRule(finding.rule), detail: finding.rule };
    const [at] = finding.elements;
    return at === undefined
      ? { key: 'design', title: 'The design as a whole' }
      : { key: elementKey(at), title: nameOf(design, at), detail: kindOf(design, at) };
  };
  const groups = new Map<string, Omit<FindingGroup, 'findings'> & { readonly findings: Finding[] }>();
  for (const finding of findings) {
    const head = headOf(finding);
    const group = groups.get(head.key);
    if (group === undefined) groups.set(head.key, { ...head, findings: [finding] });
    else group.findings.push(finding);
  }
  return [...groups.values()];
};
