import type { SheetGeometry } from '../../drawing/geometry.ts';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { zoneOf } from '../../drawing/routing/sheet-frame.ts';
import type { Design } from '../../engine/model/design.ts';
import type { Finding, Fix } from '../../engine/rules/finding.ts';
import { sourceText } from '../../engine/rules/rule-reference.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import type { FindingItem } from './finding-item.ts';

// More names than this don't fit a row; the rest is counted.
const namesShown = 3;

const elementsOf = (design: Design, finding: Finding): string => {
  const names = [...new Set(finding.elements.map((ref) => nameOf(design, ref)))];
  const shown = names.slice(0, namesShown).join(', ');
  return names.length > namesShown ? `${shown} and ${names.length - namesShown} more` : shown;
};

/** The zones of the sheet that a finding's elements lie in: one, or the first and the last. */
const zoneOfFinding = (geometry: SheetGeometry, finding: Finding): string | undefined => {
  const zones = finding.elements
    .flatMap((ref) => anchorOf(geometry, ref) ?? [])
    .map((at) => zoneOf(geometry.sheet, at))
    .sort();
  const [first, last] = [zones[0], zones.at(-1)];
  return first === undefined || first === last ? first : `${first}–${last}`;
};

/** A finding in the words of the list; `fixes` undefined while nobody asked for them. */
export const findingItem = (
  finding: Finding,
  number: number,
  design: Design,
  geometry: SheetGeometry,
  fixes: readonly Fix[] | undefined,
): FindingItem => {
  const zone = zoneOfFinding(geometry, finding);
  return {
    key: finding.key,
    number,
    severity: finding.severity,
    ...(finding.severityReason === undefined ? {} : { severityReason: finding.severityReason }),
    sentence: finding.sentence,
    elements: elementsOf(design, finding),
    ...(zone === undefined ? {} : { zone }),
    why: finding.why,
    seen: finding.seen,
    sources: finding.sources.map(sourceText),
    fixes: fixes?.map(({ id, label, sentence }) => ({ id, label, sentence })),
  };
};
