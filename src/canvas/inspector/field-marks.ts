import type { CellMark } from '../../components/cell.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { severities, type Finding, type PropertyRef } from '../../engine/rules/finding.ts';

/** Keys from the document's root to a field. */
export type FieldPath = readonly string[];

const keyOf = (path: FieldPath): string => path.join('/');

/** Where a finding's property stands in the document; a port's fields lie inside its device. */
export const pathOfProperty = ({ ref, path }: PropertyRef): FieldPath => [
  ref.collection,
  ref.id,
  ...(ref.port !== undefined && path[0] !== 'ports' ? ['ports', ref.port] : []),
  ...path,
];

const known = new WeakMap<readonly Finding[], ReadonlyMap<string, CellMark>>();

/** Of every field that a finding is about, what its most severe finding says. Made once per run of the checks. */
const marksOf = (findings: readonly Finding[]): ReadonlyMap<string, CellMark> => {
  const before = known.get(findings);
  if (before !== undefined) return before;
  const marks = new Map<string, CellMark>();
  for (const { severity, sentence, properties } of findings)
    for (const property of properties) {
      const key = keyOf(pathOfProperty(property));
      if (!marks.has(key)) marks.set(key, { severity, sentence });
    }
  known.set(findings, marks);
  return marks;
};

export const markAt = (findings: readonly Finding[], path: FieldPath): CellMark | undefined =>
  marksOf(findings).get(keyOf(path));

/** What the most severe finding about a part of the document says, the part itself or anything in it. */
export const markWithin = (findings: readonly Finding[], path: FieldPath): CellMark | undefined => {
  const key = keyOf(path);
  // Marks are in the order of their findings, the most severe first.
  for (const [marked, mark] of marksOf(findings))
    if (marked === key || marked.startsWith(`${key}/`)) return mark;
  return undefined;
};

/** The findings that name an element or one of its fields, most severe first, those about its own fields before others. */
export const findingsAbout = (findings: readonly Finding[], ref: ElementRef): readonly Finding[] => {
  const isIt = (other: ElementRef): boolean =>
    other.collection === ref.collection &&
    other.id === ref.id &&
    (ref.port === undefined || other.port === ref.port);
  const hasField = ({ properties }: Finding): boolean =>
    properties.some(
      (property) =>
        isIt(property.ref) ||
        (ref.port !== undefined && keyOf(pathOfProperty(property).slice(0, 4)) === portKey(ref)),
    );
  return findings
    .filter((finding) => finding.elements.some(isIt) || hasField(finding))
    .map((finding, at) => ({ finding, at, isOwn: hasField(finding) }))
    .sort(
      (a, b) =>
        severities.indexOf(a.finding.severity) - severities.indexOf(b.finding.severity) ||
        Number(b.isOwn) - Number(a.isOwn) ||
        a.at - b.at,
    )
    .map(({ finding }) => finding);
};

const portKey = (ref: ElementRef): string => `${ref.collection}/${ref.id}/ports/${ref.port}`;
