import type { Problem } from '../../engine/wire/problem.ts';

const shown = (value: unknown): string | undefined => {
  if (value === undefined || value === '') return undefined;
  if (value === true) return 'yes';
  if (value === false) return 'no';
  if (Array.isArray(value)) return value.join(', ');
  return String(value as string | number);
};

/** Field, value and way out in one sentence. */
export const problemSentence = (label: string, { value, expected }: Problem): string => {
  const wanted = expected.replace(/^true\b/, 'yes').replace(/^false\b/, 'no');
  const held = shown(value);
  return `${label}: ${held === undefined ? 'nothing is given' : held}. Expected ${wanted}.`;
};

/** What is wrong with one field of the form, as a sentence for its cell; of several problems the first. */
export const problemAt = (problems: readonly Problem[], field: string, label: string): string | undefined => {
  const problem = problems.find((each) => each.field === field);
  return problem === undefined ? undefined : problemSentence(label, problem);
};

/** Problems of fields that none of these prefixes covers: said beneath the form. */
export const otherProblems = (
  problems: readonly Problem[],
  covered: (field: string) => boolean,
): readonly string[] =>
  problems.filter(({ field }) => !covered(field)).map((problem) => problemSentence(problem.field, problem));
