import { packetRateText, rateText, shareText, timesText } from '../../lib/figure-texts.ts';
import type { LimitRow } from './limit-rows.ts';

type Figures = Pick<LimitRow, 'unit' | 'used' | 'most' | 'sharePerMillion' | 'times' | 'uncounted'>;

const figure = ({ unit }: Figures, value: number): string =>
  unit === 'packets/s' ? packetRateText(value) : rateText(value);

export const usedWords = (row: Figures): string =>
  row.used === undefined ? 'not known' : figure(row, row.used);

export const mostWords = (row: Figures): string =>
  row.most === undefined ? 'not known' : figure(row, row.most);

export const shareWords = (row: Figures): string =>
  row.sharePerMillion === undefined ? 'not known' : shareText(row.sharePerMillion);

/** What is free, told in what is there now; what is short of it, in how much of it fits. */
export const roomWords = ({ most, used, times }: Figures): string => {
  if (most === undefined || used === undefined) return 'not known';
  if (times === undefined) return 'all of it';
  return times >= 1 ? `room for ${timesText(times)} this` : `only ${Math.floor(times * 100)} % of this fits`;
};

export const uncountedWords = ({ uncounted }: Figures): string =>
  uncounted.length === 0
    ? ''
    : `${uncounted.length === 1 ? '1 demand' : `${uncounted.length} demands`} not counted`;
