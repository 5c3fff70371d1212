import type { Waiver } from '../../contract/waivers.ts';
import type { SheetGeometry } from '../../drawing/geometry.ts';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { zoneOf } from '../../drawing/routing/sheet-frame.ts';
import type { Design } from '../../engine/model/design.ts';
import type { Finding, Fix } from '../../engine/rules/finding.ts';
import { sourceText } from '../../engine/rules/rule-reference.ts';
import { dayInWords } from '../../lib/format-time.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import type { FindingItem, WaiverWords } from './finding-item.ts';

// What a row has room for; names beyond it are counted.
const lettersShown = 22;

const elementsOf = (design: Design, finding: Finding): string => {
  const [first = '', ...others] = new Set(finding.elements.map((ref) => nameOf(design, ref)));
  let text = first;
  for (const [i, name] of others.entries()) {
    if (text.length + name.length + 2 > lettersShown) return `${text} and ${others.length - i} more`;
    text += `, ${name}`;
  }
  return text;
};

/** The zones of the sheet that a finding's elements lie in: one, or the first and the last. */
const zoneOfFinding = (geometry: SheetGeometry, finding: Finding, design: Design): string | undefined => {
  const zones = finding.elements
    .flatMap((ref) => anchorOf(geometry, ref, design) ?? [])
    .map((at) => zoneOf(geometry.sheet, at))
    .sort();
  const [first, last] = [zones[0], zones.at(-1)];
  return first === undefined || first === last ? first : `${first}–${last}`;
};

const waiverWords = ({ id, madeBy, expiresOn, reason }: Waiver): WaiverWords => ({
  id,
  by: madeBy,
  until: dayInWords(expiresOn),
  reason,
});

/** A finding in the words of the list; `fixes` undefined while nobody asked for them. */
export const findingItem = (
  finding: Finding,
  number: number,
  design: Design,
  geometry: SheetGeometry,
  fixes: readonly Fix[] | undefined,
  waiver?: Waiver,
): FindingItem => {
  const zone = zoneOfFinding(geometry, finding, design);
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
    ...(waiver === undefined ? {} : { waiver: waiverWords(waiver) }),
  };
};
