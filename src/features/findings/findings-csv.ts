import { severityWords } from '../../components/severity-mark.tsx';
import { csvText } from '../../lib/csv.ts';
import type { FindingItem } from './finding-item.ts';

const head = [
  'Number',
  'Severity',
  'Finding',
  'Elements',
  'Zone',
  'Why it matters',
  'What is seen on site',
  'Rests on',
  'Waived until',
  'Waived by',
  'Reason',
];

/** Findings as a table for a spreadsheet. */
export const findingsCsv = (items: readonly FindingItem[]): string =>
  csvText([
    head,
    ...items.map((item) => [
      item.number,
      severityWords[item.severity],
      item.sentence,
      item.elements,
      item.zone ?? '',
      item.why,
      item.seen,
      item.sources.join('; '),
      item.waiver?.until ?? '',
      item.waiver?.by ?? '',
      item.waiver?.reason ?? '',
    ]),
  ]);
