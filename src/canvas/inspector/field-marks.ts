import type { CellMark } from '../../components/cell.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import type { Finding, PropertyRef } from '../../engine/rules/finding.ts';

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

/** The findings that name an element or one of its fields, most severe first. */
export const findingsAbout = (findings: readonly Finding[], ref: ElementRef): readonly Finding[] => {
  const isIt = (other: ElementRef): boolean =>
    other.collection === ref.collection &&
    other.id === ref.id &&
    (ref.port === undefined || other.port === ref.port);
  return findings.filter(
    ({ elements, properties }) =>
      elements.some(isIt) ||
      properties.some(
        (property) =>
          isIt(property.ref) ||
          (ref.port !== undefined && pathOfProperty(property).slice(0, 4).join('/') === portKey(ref)),
      ),
  );
};

const portKey = (ref: ElementRef): string => `${ref.collection}/${ref.id}/ports/${ref.port}`;
