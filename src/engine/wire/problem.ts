/** One thing wrong with what was asked: which field, what it held, what would have been right. */
export interface Problem {
  readonly field: string;
  readonly value: unknown;
  readonly expected: string;
}

export interface Refusal {
  readonly ok: false;
  readonly problems: readonly Problem[];
}

/** A result, or the problems for which there is none. */
export type Answer<T> = ({ readonly ok: true } & Readonly<T>) | Refusal;

export const refuse = (problems: readonly Problem[]): Refusal => ({ ok: false, problems });

/** What is wrong with a number that has to be whole and within bounds: one problem or none. */
export function wholeNumberProblems(
  field: string,
  value: number,
  least: number,
  most: number,
): readonly Problem[] {
  if (Number.isInteger(value) && value >= least && value <= most) return [];
  return [{ field, value, expected: wholeNumberFrom(least, most) }];
}

export const wholeNumberFrom = (least: number, most: number): string =>
  `a whole number from ${least} to ${most}`;
