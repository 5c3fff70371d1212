import type { LoadReport } from '../../engine/load/load-of.ts';
import type { Design } from '../../engine/model/design.ts';
import { shareText } from '../../lib/figure-texts.ts';
import { limitSubject, type LimitRow } from './limit-rows.ts';
import { mostWords, roomWords, usedWords } from './limit-words.ts';

export interface LoadVerdict {
  readonly state: 'over' | 'room' | 'unknown';
  /** The first bottleneck in one sentence. */
  readonly sentence: string;
  /** What the sentence leaves out; '' where nothing is left out. */
  readonly besides: string;
}

const counted = (count: number, one: string): string => `${count} ${one}${count === 1 ? '' : 's'}`;

const besidesOf = (rows: readonly LimitRow[], report: LoadReport): string => {
  const unknown = rows.filter(({ group, most }) => group !== 'tunnels' && most === undefined).length;
  const uncounted = new Set(report.limits.flatMap((use) => use.uncounted)).size;
  const parts = [
    unknown === 0 ? '' : `${counted(unknown, 'limit')} not known`,
    uncounted === 0 ? '' : `${counted(uncounted, 'demand')} not counted in full`,
  ].filter(Boolean);
  return parts.length === 0 ? '' : `${parts.join(', ')}.`;
};

/** Which limit is reached first as all demands grow alike, and how far off that is. */
export const loadVerdict = (report: LoadReport, rows: readonly LimitRow[], design: Design): LoadVerdict => {
  const besides = besidesOf(rows, report);
  const row = rows.find(({ key }) => key === report.bottleneck?.limit.key);
  if (row?.limit === undefined || row.sharePerMillion === undefined || row.times === undefined) {
    const isCounted = report.limits.some(({ demands, used }) => demands.length > 0 && used > 0);
    return {
      state: 'unknown',
      sentence: isCounted
        ? 'No limit on the way of these demands is known: fill in port speeds, ordered rates and equipment profiles.'
        : report.demands.every(({ forward }) => forward.direction.state !== 'carried')
          ? 'No demand gets to where it should: the checks say why.'
          : 'Nothing can be counted yet: a demand needs its rate and its frame mix.',
      besides,
    };
  }
  const subject = limitSubject(design, row.limit);
  return row.times < 1
    ? {
        state: 'over',
        sentence: `${subject}, is asked for ${usedWords(row)} and has ${mostWords(row)}: ${roomWords(row)}.`,
        besides,
      }
    : {
        state: 'room',
        sentence: `${subject}, fills first: ${shareText(row.sharePerMillion)} of ${mostWords(row)} is used, ${roomWords(row)}.`,
        besides,
      };
};
