import type { FloodStep } from '../flood/storm.ts';
import type { ElementRef } from '../model/design.ts';
import type { Surroundings } from './told-by.ts';
import { toldBy } from './told-by.ts';
import type { DropReason, Explanation } from './trace.ts';

/** As much of a finding as it takes to point at it. */
export interface KnownFinding {
  readonly key: string;
  readonly rule: string;
  readonly elements: readonly ElementRef[];
}

/** Checks that look for the cause of a drop, and what their finding would be about. */
const candidates = (reason: DropReason, around: Surroundings): readonly Explanation[] => {
  const tells = toldBy[reason.code] as
    ((reason: DropReason, around: Surroundings) => readonly Explanation[]) | { readonly noRule: string };
  return typeof tells === 'function' ? tells(reason, around) : [];
};

const isSame = (x: ElementRef, y: ElementRef): boolean =>
  x.collection === y.collection &&
  x.id === y.id &&
  (x.port === undefined || y.port === undefined || x.port === y.port);

const isAbout = (finding: KnownFinding, elements: readonly ElementRef[]): boolean =>
  finding.elements.some((one) => elements.some((other) => isSame(one, other)));

/** Where findings are at hand only those that were made are pointed at; otherwise the rules that would look. */
const made = (
  explanations: readonly Explanation[],
  findings: readonly KnownFinding[] | undefined,
): readonly Explanation[] =>
  findings === undefined
    ? explanations
    : explanations.flatMap((one) =>
        findings
          .filter((finding) => finding.rule === one.rule && isAbout(finding, one.elements))
          .map(({ rule, elements, key }) => ({ rule, elements, key })),
      );

/**
 * The checks that tell of the cause of a drop. What is dropped by design is as a rule as it should be: of that only findings
 * that were really made are named, and no rule that might look.
 */
export const explainDrop = (
  reason: DropReason,
  around: Surroundings,
  { findings, byDesign }: { readonly findings?: readonly KnownFinding[]; readonly byDesign: boolean },
): readonly Explanation[] =>
  byDesign && findings === undefined ? [] : made(candidates(reason, around), findings);

/** The checks that tell of a storm. */
export const explainStorm = (
  cycle: readonly FloodStep[],
  findings: readonly KnownFinding[] | undefined,
): readonly Explanation[] => {
  const elements = [
    ...new Map(
      cycle.map(({ collection, id }) => [`${collection} ${id}`, { collection, id }] as const),
    ).values(),
  ];
  return made(
    ['storm-any-to-any-mesh', 'storm-customer-cable', 'storm-local'].map((rule) => ({ rule, elements })),
    findings,
  );
};
