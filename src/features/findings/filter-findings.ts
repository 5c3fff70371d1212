import { severities, type Severity } from '../../components/severity-mark.tsx';
import type { Design } from '../../engine/model/design.ts';
import type { Finding } from '../../engine/rules/finding.ts';
import { sourceText } from '../../engine/rules/rule-reference.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { findingPlaces } from './finding-places.ts';

export const waiverChoices = ['all', 'open', 'waived'] as const;
export type WaiverChoice = (typeof waiverChoices)[number];

/** What is asked of a list of findings; '' asks for nothing. */
export interface FindingFilter {
  readonly severity: Severity | '';
  /** Id of a check. */
  readonly rule: string;
  /** Ids of the design. */
  readonly site: string;
  readonly segment: string;
  readonly waivers: WaiverChoice;
  readonly words: string;
}

const pick = <T extends string>(text: string, choices: readonly T[]): T | undefined =>
  choices.find((choice) => choice === text);

/** The filter that an address says, by name of its parameters; what it says wrongly asks for nothing. */
export const filterFrom = (valueOf: (name: string) => string): FindingFilter => ({
  severity: pick(valueOf('severity'), severities) ?? '',
  rule: valueOf('rule'),
  site: valueOf('site'),
  segment: valueOf('segment'),
  waivers: pick(valueOf('waivers'), waiverChoices) ?? 'all',
  words: valueOf('q'),
});

/** The findings that fit, in their order. Words may stand in the sentence, the names, the reasons or the sources. */
export const filterFindings = (
  findings: readonly Finding[],
  filter: FindingFilter,
  design: Design,
  isWaived: (key: string) => boolean,
): readonly Finding[] => {
  const wanted = filter.words.toLowerCase().split(/\s+/).filter(Boolean);
  const asksForPlace = filter.site !== '' || filter.segment !== '';
  const placesOf = asksForPlace ? findingPlaces(design) : undefined;
  return findings.filter((finding) => {
    if (filter.severity !== '' && finding.severity !== filter.severity) return false;
    if (filter.rule !== '' && finding.rule !== filter.rule) return false;
    if (filter.waivers !== 'all' && isWaived(finding.key) !== (filter.waivers === 'waived')) return false;
    if (placesOf !== undefined) {
      const { sites, segments } = placesOf(finding);
      if (filter.site !== '' && !sites.has(filter.site)) return false;
      if (filter.segment !== '' && !segments.has(filter.segment)) return false;
    }
    if (wanted.length === 0) return true;
    const text = [
      finding.rule,
      finding.sentence,
      finding.words,
      finding.why,
      finding.seen,
      ...finding.elements.map((ref) => nameOf(design, ref)),
      ...finding.sources.map(sourceText),
    ]
      .join(' ')
      .toLowerCase();
    return wanted.every((word) => text.includes(word));
  });
};
