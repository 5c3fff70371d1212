import type { ElementRef } from '../model/design.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { casualtiesOf } from './casualties.ts';
import { loneElements } from './every-single-failure.ts';
import { outageOf } from './outage.ts';

/** Two things that part more together than either does and than both do added up: each hides behind the other. */
export interface PairOfFailures {
  readonly elements: readonly [ElementRef, ElementRef];
  /** Pairs of points that they part together, and each alone. */
  readonly pairCount: number;
  readonly alone: readonly [number, number];
}
export interface PairCandidates {
  /** Every two of them are to be tried. */
  readonly elements: readonly ElementRef[];
  /** How many things could have been paired; more than the elements where that would take too long. */
  readonly considered: number;
}

// What many things hang on comes first: where not all can be paired, those are.
const rankOf = ({ collection, member }: ElementRef): number =>
  collection === 'transports'
    ? 0
    : collection === 'devices'
      ? member === undefined
        ? 2
        : 1
      : collection === 'links'
        ? 3
        : collection === 'associations'
          ? 4
          : 5;

const isHostsOwn = (network: Network, { collection, id }: ElementRef): boolean => {
  const { design } = network;
  const isHost = (device: string): boolean => entryOf(design.devices, device).kind === 'host';
  if (collection === 'devices') return isHost(id);
  if (collection !== 'links') return false;
  const link = entryOf(design.links, id);
  return link.kind === 'cable' && (isHost(link.a.device) || isHost(link.b.device));
};

/**
 * What is worth failing two by two: everything that can fail alone, except whole sites and hosts with their own cables, whose
 * failure hides nothing. At most so many that there are `mostPairs` pairs of them.
 */
export const pairCandidates = (network: Network, mostPairs: number): PairCandidates => {
  const all = loneElements(network).filter((ref) => ref.collection !== 'sites' && !isHostsOwn(network, ref));
  const most = Math.floor((1 + Math.sqrt(1 + 8 * mostPairs)) / 2);
  const ranked = all
    .map((ref, at) => ({ ref, at }))
    .sort((x, y) => rankOf(x.ref) - rankOf(y.ref) || x.at - y.at)
    .map(({ ref }) => ref);
  return { elements: ranked.slice(0, most), considered: all.length };
};

/** How many pairs of points part when all of these fail together. */
export const partedBy = (network: Network, failed: readonly ElementRef[]): number => {
  const answer = casualtiesOf(network, failed);
  if (!answer.ok)
    throw new Error(`what can fail alone can fail together: ${JSON.stringify(answer.problems)}`);
  return outageOf(network, failed, answer.casualties).pairCount;
};

/** The two as a pair of failures, if they part more together than added up; `alone` is what each parts by itself. */
export const pairOfFailures = (
  network: Network,
  elements: readonly [ElementRef, ElementRef],
  alone: readonly [number, number],
): PairOfFailures | undefined => {
  const pairCount = partedBy(network, elements);
  return pairCount > alone[0] + alone[1] ? { elements, pairCount, alone } : undefined;
};
