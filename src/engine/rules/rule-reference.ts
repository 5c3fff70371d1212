import type { MessageWords, Rule } from './define-rule.ts';
import type { Severity, Source } from './finding.ts';
import { rules } from './index.ts';

/** What a reader of the reference page learns of a check. */
export interface RuleReference {
  readonly id: string;
  readonly title: string;
  readonly severity: Severity;
  readonly why: string;
  readonly seen: string;
  readonly sources: readonly Source[];
  readonly messages: readonly MessageWords[];
  /** The parts of a design that it reads. */
  readonly looksAt: Rule['looksAt'];
  readonly canFix: boolean;
}

/** Every check of the catalogue, by id. */
export const ruleReference = (): readonly RuleReference[] =>
  rules
    .map(({ id, title, severity, why, seen, sources, messages, looksAt, canFix }) => ({
      id,
      title,
      severity,
      why,
      seen,
      sources,
      messages,
      looksAt,
      canFix,
    }))
    .sort((a, b) => (a.id < b.id ? -1 : 1));

/** A source as a reader sees it. */
export const sourceText = (source: Source): string =>
  typeof source === 'string'
    ? source
    : source.clause === undefined
      ? source.document
      : `${source.document}, ${source.clause}`;
