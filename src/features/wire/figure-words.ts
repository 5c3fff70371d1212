const grouped = new Intl.NumberFormat('en-GB', { useGrouping: 'min2' });

/** A number with its thousands apart, from 10,000 on: lengths in bytes stay as they are written elsewhere. */
export const groupedNumber = (value: number): string => grouped.format(value);

const units = [
  ['Tbit/s', 1e12],
  ['Gbit/s', 1e9],
  ['Mbit/s', 1e6],
  ['kbit/s', 1e3],
] as const;

/** A computed rate to four figures, rounded down: never more than there is. */
export function rateAtMost(rateBps: number): string {
  const [unit, factor] = units.find((each) => rateBps >= each[1]) ?? ['bit/s', 1];
  const value = rateBps / factor;
  const step = 10 ** Math.max(0, 3 - Math.floor(Math.log10(Math.max(1, value))));
  return `${groupedNumber(Math.floor(value * step) / step)} ${unit}`;
}

/** A share in per cent with two decimals, rounded down. */
export const shareAtMost = (partsPerMillion: number): string =>
  `${Math.floor(partsPerMillion / 100) / 100} %`;
