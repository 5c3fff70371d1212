import { expect, test } from 'vitest';
import {
  countByState,
  faultsWaiting,
  filterEngagements,
} from '../../src/features/engagements/filter-engagements.ts';
import { designSummary, engagement } from '../support/fake-api.ts';

const blocking = (count: number) => ({ blocking: count, degrading: 0, advisory: 0 });
const ferries = engagement({
  designs: [
    designSummary({ id: 'd-1', state: 'draft', counts: blocking(1), changedAt: '2026-03-01T10:00:00.000Z' }),
    designSummary({
      id: 'd-2',
      title: 'CCTV',
      identification: 'SMF-L2-005',
      state: 'in-review',
      counts: blocking(3),
    }),
  ],
});
const quarries = engagement({ id: 'e-2', name: 'Tolland Quarries', designs: [] });
const dairies = engagement({
  id: 'e-3',
  name: 'Brackwater Dairies',
  designs: [
    designSummary({
      id: 'd-3',
      title: 'Filling line',
      identification: null,
      counts: blocking(1),
      changedAt: '2026-03-02T10:00:00.000Z',
    }),
    designSummary({ id: 'd-4', title: 'Old', counts: blocking(9), archivedAt: '2026-01-01T00:00:00.000Z' }),
  ],
});
const all = [ferries, quarries, dairies];
const ids = (engagements: readonly { readonly designs: readonly { readonly id: string }[] }[]) =>
  engagements.map(({ designs }) => designs.map(({ id }) => id));

test('without a filter everything stays, engagements without designs too', () => {
  expect(filterEngagements(all, { state: null, words: '  ' })).toEqual(all);
});

test('a state keeps its designs, and only engagements that have some', () => {
  expect(ids(filterEngagements(all, { state: 'in-review', words: '' }))).toEqual([['d-2']]);
});

test('words find titles and numbers in any case', () => {
  expect(ids(filterEngagements(all, { state: null, words: 'cctv' }))).toEqual([['d-2']]);
  expect(ids(filterEngagements(all, { state: null, words: 'l2-005' }))).toEqual([['d-2']]);
});

test('words that name an engagement keep all its designs, and itself without any', () => {
  expect(ids(filterEngagements(all, { state: null, words: 'dairies' }))).toEqual([['d-3', 'd-4']]);
  expect(ids(filterEngagements(all, { state: null, words: 'quarries' }))).toEqual([[]]);
});

test('state and words both have to fit', () => {
  expect(filterEngagements(all, { state: 'draft', words: 'cctv' })).toEqual([]);
});

test('states are counted in the order of a design’s life, those without any left out', () => {
  expect(countByState(all)).toEqual([
    { state: 'draft', count: 3 },
    { state: 'in-review', count: 1 },
  ]);
});

test('the designs with most blocking findings come first, the newer of equals before the older, archived ones never', () => {
  expect(faultsWaiting(all, 9).map(({ design }) => design.id)).toEqual(['d-2', 'd-3', 'd-1']);
  expect(faultsWaiting(all, 1).map(({ design }) => design.id)).toEqual(['d-2']);
  const archived = all.map((each) => ({ ...each, archivedAt: '2026-01-01T00:00:00.000Z' }));
  expect(faultsWaiting(archived, 9)).toEqual([]);
});
