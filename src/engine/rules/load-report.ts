import { loadOfNetwork, type LoadReport } from '../load/load-of.ts';
import type { Collection } from '../model/design.ts';
import { entryOf, perNetwork, type DesignFacts } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';

/** What the demands put on everything; undefined where there is none, or more than can be computed. */
export const loadReport = perNetwork((network): LoadReport | undefined => {
  if (Object.keys(network.design.demands).length === 0) return undefined;
  const answer = loadOfNetwork(network);
  return answer.ok ? answer : undefined;
});

export const loadFacts = [...segmentPathFacts, 'demands'] as const satisfies readonly Collection[];

/** A demand by its name, or by its segment where it has none. */
export const demandName = (design: DesignFacts, id: string): string => {
  const { name, segment } = entryOf(design.demands, id);
  return name ?? `A demand of segment ${entryOf(design.segments, segment).letter}`;
};

const units = [
  { bps: 1_000_000_000, unit: 'Gbit/s' },
  { bps: 1_000_000, unit: 'Mbit/s' },
  { bps: 1_000, unit: 'kbit/s' },
] as const;

/** A rate in the largest unit that leaves something before the point. */
export const rateText = (bps: number, digits = 3): string => {
  const unit = units.find((each) => bps >= each.bps);
  return unit === undefined ? `${bps} bit/s` : `${Number((bps / unit.bps).toPrecision(digits))} ${unit.unit}`;
};
