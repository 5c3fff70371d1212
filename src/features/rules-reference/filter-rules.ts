import { severities, type Severity } from '../../components/severity-mark.tsx';
import { sourceText, type RuleReference } from '../../engine/rules/rule-reference.ts';

export const isSeverity = (value: string): value is Severity =>
  severities.some((severity) => severity === value);

/** The checks of one severity, or of any, that speak of all these words. */
export function filterRules(
  rules: readonly RuleReference[],
  { severity, words }: { readonly severity: Severity | null; readonly words: string },
): readonly RuleReference[] {
  const wanted = words.toLowerCase().split(/\s+/).filter(Boolean);
  return rules.filter((rule) => {
    if (severity !== null && rule.severity !== severity) return false;
    const text = [rule.id, rule.title, rule.why, rule.seen, ...rule.sources.map(sourceText)]
      .join(' ')
      .toLowerCase();
    return wanted.every((word) => text.includes(word));
  });
}
