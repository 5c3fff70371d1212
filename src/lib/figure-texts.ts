// Computed figures as they are read, to three digits. What is typed back in keeps all of its digits: see the writings.

const grouped = new Intl.NumberFormat('en-GB', { useGrouping: 'min2' });
const threeDigits = (value: number): string =>
  grouped.format(value >= 1_000 ? Math.round(value) : Number(value.toPrecision(3)));

const inUnits = (value: number, units: readonly (readonly [unit: string, factor: number])[]): string => {
  // Rounding may lift 999.6 k into the next unit.
  const [unit, factor] = units.find(([, least]) => Number(value.toPrecision(3)) >= least) ?? units.at(-1)!;
  return `${threeDigits(value / factor)} ${unit}`;
};

const rateUnits = [
  ['Tbit/s', 1e12],
  ['Gbit/s', 1e9],
  ['Mbit/s', 1e6],
  ['kbit/s', 1e3],
  ['bit/s', 1],
] as const;

/** 873862158 as '874 Mbit/s'. */
export const rateText = (rateBps: number): string => inUnits(rateBps, rateUnits);

/** 12345 as '12,345 packets/s', 2_500_000 as '2.5 million packets/s'. */
export const packetRateText = (packetsPerSecond: number): string =>
  packetsPerSecond >= 1_000_000
    ? `${threeDigits(packetsPerSecond / 1_000_000)} million packets/s`
    : `${grouped.format(packetsPerSecond)} packets/s`;

const byteUnits = [
  ['GB', 1e9],
  ['MB', 1e6],
  ['kB', 1e3],
  ['B', 1],
] as const;

/** 3932380 as '3.93 MB'. */
export const bytesText = (bytes: number): string => inUnits(bytes, byteUnits);

/** Parts of a million in per cent; what is there is never said to be nothing. */
export const shareText = (perMillion: number): string => {
  if (perMillion === 0) return '0 %';
  if (perMillion < 1_000) return 'under 0.1 %';
  const percent = perMillion / 10_000;
  return `${percent < 10 ? Number(percent.toFixed(1)) : grouped.format(Math.round(percent))} %`;
};

/** Packets lost of a million in per cent, as small as it may be: 200 as '0.02 %'. */
export const lossText = (perMillion: number): string => `${Number((perMillion / 10_000).toPrecision(3))} %`;

/** How many times something fits, rounded down: '2.3 times', '0.71 times', '1,200 times'. */
export const timesText = (times: number): string => {
  const digits = times < 1 ? 2 : times < 10 ? 1 : 0;
  const floor = Math.floor(times * 10 ** digits + 1e-9) / 10 ** digits;
  return `${grouped.format(floor)} times`;
};

const timeUnits = [
  ['d', 86_400_000_000],
  ['h', 3_600_000_000],
  ['min', 60_000_000],
  ['s', 1_000_000],
  ['ms', 1_000],
  ['µs', 1],
] as const;

/** 18000 as '18 ms', 90000000 as '1.5 min'. */
export const durationText = (durationUs: number): string => inUnits(durationUs, timeUnits);
