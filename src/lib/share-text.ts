import { decimal, reading, unreadable, wholeTimes, type Reading, type Writing } from './written-value.ts';

const ppmInPercent = 10_000;

/** Parts per million as per cent, without the sign. */
export const formatPercent = (ppm: number): string => String(ppm / ppmInPercent);

/** Reads '0.02' or '0.02 %' as parts per million. */
export const parsePercent = (text: string): Reading<number> => {
  const number = decimal(text.trim().replace(/\s*%$/, ''));
  if (number === undefined) return unreadable('type per cent, such as 0.02');
  if (number > 100) return unreadable('type 0 to 100 per cent');
  const ppm = wholeTimes(number, ppmInPercent);
  return ppm === undefined ? unreadable('type per cent with at most four decimals') : reading(ppm);
};

export const percent: Writing<number> = {
  write: formatPercent,
  read: parsePercent,
  unit: '%',
  inputMode: 'decimal',
};
