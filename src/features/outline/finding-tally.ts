import { elementKey } from '../../drawing/decorations.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { severities, type Finding } from '../../engine/rules/finding.ts';
import type { OutlineRow } from './outline-row.ts';

/** Places in the list of findings. */
export type FindingSet = ReadonlySet<number>;
const none: FindingSet = new Set();

/** The findings that name an element, by its key; a port's are its device's as well. */
export const findingsByElement = (findings: readonly Finding[]): ReadonlyMap<string, FindingSet> => {
  const found = new Map<string, Set<number>>();
  const add = (key: string, at: number): void => {
    const known = found.get(key);
    if (known === undefined) found.set(key, new Set([at]));
    else known.add(at);
  };
  findings.forEach((finding, at) => {
    for (const { collection, id, port, member } of finding.elements) {
      add(elementKey({ collection, id }), at);
      if (port === undefined) continue;
      // A finding that names no member is about the port of both.
      if (member !== undefined) add(elementKey({ collection, id, port, member }), at);
      else for (const of of [1, 2] as const) add(elementKey({ collection, id, port, member: of }), at);
      add(elementKey({ collection, id, port }), at);
    }
  });
  return found;
};

export const findingsOf = (
  byElement: ReadonlyMap<string, FindingSet>,
  ref: ElementRef | undefined,
): FindingSet => (ref === undefined ? none : (byElement.get(elementKey(ref)) ?? none));

export const joinSets = (sets: readonly FindingSet[]): FindingSet => {
  const filled = sets.filter((set) => set.size > 0);
  if (filled.length <= 1) return filled[0] ?? none;
  return new Set(filled.flatMap((set) => [...set]));
};

const noCounts: OutlineRow['counts'] = { blocking: 0, degrading: 0, advisory: 0 };

export const countsOf = (findings: readonly Finding[], set: FindingSet): OutlineRow['counts'] => {
  if (set.size === 0) return noCounts;
  const counts = { ...noCounts };
  for (const at of set) counts[findings[at]!.severity] += 1;
  return counts;
};

/** '2 blocking, 1 advisory'; empty where there is nothing to say. */
export const countWords = (counts: OutlineRow['counts']): string =>
  severities
    .filter((severity) => counts[severity] > 0)
    .map((severity) => `${counts[severity]} ${severity}`)
    .join(', ');
