import { decimal, reading, unreadable, wholeTimes, type Reading, type Writing } from './written-value.ts';

const units = [
  ['Tbit/s', 1_000_000_000_000],
  ['Gbit/s', 1_000_000_000],
  ['Mbit/s', 1_000_000],
  ['kbit/s', 1_000],
] as const;

const factors: { readonly [prefix: string]: number } = {
  t: 1_000_000_000_000,
  g: 1_000_000_000,
  m: 1_000_000,
  k: 1_000,
  '': 1,
};

/** A rate in bit/s in the largest unit that needs no more than three decimals, so that it reads back the same. */
export const formatRate = (rateBps: number): string => {
  for (const [unit, factor] of units) {
    const value = rateBps / factor;
    if (value >= 1 && Number.isInteger(Math.round(value * 1e9) / 1e6)) return `${value} ${unit}`;
  }
  return `${rateBps} bit/s`;
};

/** Reads '100 Mbit/s', '1.5G', '64 kbps' as bit/s. A number without a unit could be anything, so it is refused. */
export const parseRate = (text: string): Reading<number> => {
  const match = /^([\d.,]+)\s*(?:([tgmk])?(?:bit\/s|bps|bit)|([tgmk]))$/i.exec(text.trim());
  const number = decimal(match?.[1] ?? text.trim());
  if (match === null)
    return unreadable(
      number === undefined
        ? 'type a rate with its unit, such as 100 Mbit/s'
        : `add the unit, such as ${text.trim()} Mbit/s`,
    );
  if (number === undefined) return unreadable('type a rate with its unit, such as 100 Mbit/s');
  const rateBps = wholeTimes(number, factors[(match[2] ?? match[3] ?? '').toLowerCase()]!);
  return rateBps === undefined ? unreadable('type a rate that comes to whole bit/s') : reading(rateBps);
};

export const rate: Writing<number> = { write: formatRate, read: parseRate };
