import { dayByUtc, dayInWords } from '../../lib/format-time.ts';

const dayMs = 24 * 60 * 60 * 1000;
const mostReasonCharacters = 1000;

/** The day so many days from now, by UTC. */
export const dayAhead = (now: Date, days: number): string => dayByUtc(new Date(now.getTime() + days * dayMs));

/** The first and the last day that a waiver may end on, as the contract has it: from today to a year from today. */
export const expiryBounds = (now: Date): { readonly first: string; readonly last: string } => {
  const inAYear = new Date(now);
  inAYear.setUTCFullYear(now.getUTCFullYear() + 1);
  return { first: dayByUtc(now), last: dayByUtc(inAYear) };
};

/** What is wrong with a reason, as a sentence with the way out. */
export const reasonProblem = (reason: string): string | undefined => {
  const { length } = reason.trim();
  if (length === 0) return 'Reason is empty. Say why this may stay as it is, for whoever reads it next.';
  return length > mostReasonCharacters
    ? `Reason has ${length} characters. Shorten it to ${mostReasonCharacters}.`
    : undefined;
};

/** What is wrong with the last day of a waiver, as a sentence with the way out. */
export const expiryProblem = (day: string, now: Date): string | undefined => {
  const { first, last } = expiryBounds(now);
  const wayOut = `Choose a day from ${dayInWords(first)} to ${dayInWords(last)}.`;
  // A browser's field for dates answers '' for what is no day.
  if (day === '') return `Holds until is no day. ${wayOut}`;
  if (day < first) return `Holds until ${dayInWords(day)} is past. ${wayOut}`;
  return day > last ? `Holds until ${dayInWords(day)} is more than a year off. ${wayOut}` : undefined;
};
