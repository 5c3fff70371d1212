import { expect, test } from 'vitest';
import {
  bytesText,
  durationText,
  lossText,
  packetRateText,
  rateText,
  shareText,
  timesText,
} from '../../src/lib/figure-texts.ts';

test('rates stand in the largest unit that leaves something before the point, to three digits', () => {
  expect([873_862_158, 1_000_000, 999_600, 64_000, 12, 0].map(rateText)).toEqual([
    '874 Mbit/s',
    '1 Mbit/s',
    '1 Mbit/s',
    '64 kbit/s',
    '12 bit/s',
    '0 bit/s',
  ]);
});

test('packet rates are counted out up to a million', () => {
  expect([950, 12_345, 2_500_000].map(packetRateText)).toEqual([
    '950 packets/s',
    '12,345 packets/s',
    '2.5 million packets/s',
  ]);
});

test('a share that is there is never said to be nothing', () => {
  expect([0, 3, 15_000, 623_400, 14_000_000].map(shareText)).toEqual([
    '0 %',
    'under 0.1 %',
    '1.5 %',
    '62 %',
    '1400 %',
  ]);
});

test('loss is told as small as it is', () => {
  expect([0, 1, 200, 15_000].map(lossText)).toEqual(['0 %', '0.0001 %', '0.02 %', '1.5 %']);
});

test('how often something fits is rounded down', () => {
  expect([0.719, 1, 2.39, 15.9, 12_000].map(timesText)).toEqual([
    '0.71 times',
    '1 times',
    '2.3 times',
    '15 times',
    '12,000 times',
  ]);
});

test('times and sizes go to the unit that fits them', () => {
  expect([18_000, 500, 2_000_000, 90_000_000].map(durationText)).toEqual([
    '18 ms',
    '500 µs',
    '2 s',
    '1.5 min',
  ]);
  expect([65_535, 3_932_380].map(bytesText)).toEqual(['65.5 kB', '3.93 MB']);
});
