import type { PlaceInDesign, PresentPerson } from '../../contract/live.ts';
import type { Design } from '../../engine/model/design.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** One person, whatever the number of windows: the window they did something in last speaks for them. */
export interface PersonHere extends PresentPerson {
  readonly isFollowable: boolean;
}

/** Everybody else who has the design open, each once, by name. */
export const peopleHere = (others: readonly PresentPerson[]): readonly PersonHere[] => {
  const byPerson = new Map<string, PresentPerson>();
  for (const each of others) {
    const known = byPerson.get(each.personId);
    if (known === undefined || weight(each.place) > weight(known.place)) byPerson.set(each.personId, each);
  }
  return [...byPerson.values()]
    .map((each) => ({ ...each, isFollowable: each.place.page !== 'sheet' || each.place.view !== null }))
    .sort((a, b) => (a.name < b.name ? -1 : 1));
};

const weight = ({ selection, view }: PlaceInDesign): number => selection.length * 2 + (view === null ? 0 : 1);

const pageNames: Readonly<Record<string, string>> = {
  sheet: 'the sheet',
  segments: 'Segments',
  numbering: 'Numbering',
  checks: 'Checks',
  review: 'Review',
  history: 'History',
};

/** Where somebody is, as in 'on the sheet, at Gullhaven firewall'. */
export const whereWords = ({ page, selection }: PlaceInDesign, design: Design): string => {
  const at = `on ${pageNames[page] ?? 'another page'}`;
  const [first, ...more] = selection.filter(({ collection, id }) => Object.hasOwn(design[collection], id));
  if (first === undefined) return at;
  return `${at}, at ${nameOf(design, first)}${more.length > 0 ? ` and ${more.length} more` : ''}`;
};
