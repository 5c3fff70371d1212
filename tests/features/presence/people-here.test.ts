import { expect, test } from 'vitest';
import type { PresentPerson } from '../../../src/contract/live.ts';
import { peopleHere, whereWords } from '../../../src/features/presence/people-here.ts';
import { pairDesign } from '../../support/designs.ts';

const person = (
  personId: string,
  name: string,
  place: Partial<PresentPerson['place']> = {},
): PresentPerson => ({
  connectionId: `${personId}-${place.page ?? 'sheet'}`,
  personId,
  name,
  initials: 'XX',
  place: { page: 'sheet', selection: [], view: null, ...place },
});

test('shows each person once, by the window in which they have something selected', () => {
  const people = peopleHere([
    person('n', 'Noor Okafor', { page: 'checks' }),
    person('n', 'Noor Okafor', { selection: [{ collection: 'devices', id: 'fw-s0' }] }),
    person('m', 'Mara Tadese'),
  ]);
  expect(people.map(({ name, connectionId }) => [name, connectionId])).toEqual([
    ['Mara Tadese', 'm-sheet'],
    ['Noor Okafor', 'n-sheet'],
  ]);
});

test('does not offer to follow a sheet on which nobody moves by themselves', () => {
  const view = { x: 0, y: 0, width: 10, height: 10 };
  const [following, moving, reading] = peopleHere([
    person('a', 'A'),
    person('b', 'B', { view }),
    person('c', 'C', { page: 'checks' }),
  ]);
  expect([following, moving, reading].map((each) => each!.isFollowable)).toEqual([false, true, true]);
});

test('says where somebody is by the names of the design, and leaves out what is gone', () => {
  const design = pairDesign();
  const place = {
    page: 'sheet',
    view: null,
    selection: [
      { collection: 'devices' as const, id: 'gone' },
      { collection: 'devices' as const, id: 'fw-s0' },
    ],
  };
  expect(whereWords(place, design)).toBe(`on the sheet, at ${design.devices['fw-s0']!.name}`);
  expect(whereWords({ ...place, page: 'numbering', selection: [] }, design)).toBe('on Numbering');
});
