import type { Crowded } from '../geometry.ts';
import type { DrawingFacts } from './drawing-facts.ts';

const mostNamed = 3;

/** An element's name as far as drawings know it: ids are of one namespace per kind, the first kind that knows it says it. */
const nameOf = (facts: DrawingFacts, id: string): string =>
  facts.associations[id] ?? facts.endpoints[id] ?? facts.transports[id]?.name ?? facts.sites[id] ?? id;

const listed = (names: readonly string[]): string => {
  const shown =
    names.length > mostNamed
      ? [...names.slice(0, mostNamed - 1), `${names.length - mostNamed + 1} more`]
      : names;
  return shown.length < 2 ? (shown[0] ?? '') : `${shown.slice(0, -1).join(', ')} and ${shown.at(-1)!}`;
};

/** One sentence on what found no room and what helps. */
export const crowdedWords = (entry: Crowded, facts: DrawingFacts): string => {
  const ids = [...new Set(entry.ids)];
  const names = listed(ids.map((id) => nameOf(facts, id)));
  switch (entry.what) {
    case 'overlap':
      return ids.length > 1
        ? `${names} lie on top of each other: move their sites apart or widen the band.`
        : `${names} lies on top of itself: move its sites apart or widen the band.`;
    case 'no-way':
      return `No way through for ${names}: what stands around its ends leaves no room.`;
    case 'text':
      return `No free place for the words of ${names}: make room beside it.`;
    case 'sheet':
      return `Larger than A0: ${names} ${ids.length > 1 ? 'lie' : 'lies'} outside the sheet. Collapse sites or split the design.`;
  }
};
