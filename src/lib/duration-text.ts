import { decimal, reading, unreadable, wholeTimes, type Reading, type Writing } from './written-value.ts';

/** Microseconds as milliseconds, without a unit. */
export const formatMilliseconds = (durationUs: number): string => String(durationUs / 1000);

const microsecondsIn: { readonly [unit: string]: number } = { us: 1, µs: 1, ms: 1000, s: 1_000_000 };

/** Reads '18', '18 ms', '0.25 s' or '500 us' as microseconds; a bare number is in milliseconds. */
export const parseMilliseconds = (text: string): Reading<number> => {
  const match = /^([\d.,]+)\s*(us|µs|ms|s)?$/i.exec(text.trim());
  const number = decimal(match?.[1] ?? '');
  if (match === null || number === undefined) return unreadable('type milliseconds, such as 18 or 0.5');
  const durationUs = wholeTimes(number, microsecondsIn[(match[2] ?? 'ms').toLowerCase()]!);
  return durationUs === undefined
    ? unreadable('type milliseconds with at most three decimals')
    : reading(durationUs);
};

export const milliseconds: Writing<number> = {
  write: formatMilliseconds,
  read: parseMilliseconds,
  unit: 'ms',
  inputMode: 'decimal',
};

const secondsIn = [
  ['d', 86_400],
  ['h', 3_600],
  ['min', 60],
  ['s', 1],
] as const;

/** Seconds in the largest unit that comes out whole: '4 h', '90 s'. */
export const formatSeconds = (seconds: number): string => {
  const [unit, factor] = secondsIn.find(([, factor]) => seconds % factor === 0)!;
  return `${seconds / factor} ${unit}`;
};

/** Reads '4 h', '30 min', '90 s' or '90' as seconds. */
export const parseSeconds = (text: string): Reading<number> => {
  const match = /^([\d.,]+)\s*(d|h|min|s)?$/i.exec(text.trim());
  const number = decimal(match?.[1] ?? '');
  if (match === null || number === undefined)
    return unreadable('type a time with its unit, such as 8 h, 30 min or 90 s');
  const factor = secondsIn.find(([unit]) => unit === (match[2] ?? 's').toLowerCase())![1];
  const seconds = wholeTimes(number, factor);
  return seconds === undefined ? unreadable('type a time that comes to whole seconds') : reading(seconds);
};

export const lifetime: Writing<number> = { write: formatSeconds, read: parseSeconds };
