import { dayInWords } from '../../lib/format-time.ts';

/** A moment's day where the reader is, such as '2027-03-31'. */
export const localDay = (time: Date): string =>
  [time.getFullYear(), time.getMonth() + 1, time.getDate()]
    .map((part) => String(part).padStart(2, '0'))
    .join('-');

/** What is wrong with the day of building, for a revision that was approved at a moment. */
export const builtProblem = (day: string, approvedAt: string | null, now: Date): string | undefined => {
  if (day === '') return 'Built on is empty. Give the day on which it was built.';
  const approved = approvedAt === null ? '' : localDay(new Date(approvedAt));
  if (day < approved)
    return `Built on ${dayInWords(day)} is before the approval. Give a day from ${dayInWords(approved)} on.`;
  if (day > localDay(now)) return `Built on ${dayInWords(day)} is yet to come. Give today or an earlier day.`;
  return undefined;
};
