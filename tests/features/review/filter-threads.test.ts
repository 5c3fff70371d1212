import { expect, test } from 'vitest';
import { commentFlags } from '../../../src/features/review/comment-flags.ts';
import { filterThreads, threadFilterFrom } from '../../../src/features/review/filter-threads.ts';
import { pairDesign } from '../../support/designs.ts';
import { comment, noor, rosa, thread } from './threads.ts';

const tunnel = { collection: 'tunnels', id: 'tn-s0-s1-a' } as const;
const suggestion = {
  patch: { meta: { title: 'New' } },
  before: { meta: { title: 'Old' } },
  baseSequence: 0,
  appliedBy: null,
  appliedAt: null,
  appliedSequence: null,
};
const general = thread({ id: 'general' });
const answered = thread({
  id: 'answered',
  pin: { kind: 'element', ref: tunnel, path: ['b', 'vni'], called: 'a tunnel' },
  comments: [
    comment({ mentions: [{ id: rosa.id, name: rosa.name }] }),
    comment({ id: 'c-2', author: { id: rosa.id, name: rosa.name, initials: 'RH' } }),
  ],
});
const suggested = thread({
  id: 'suggested',
  pin: { kind: 'finding', key: 'k', ref: tunnel, called: 'VNIs differ' },
  comments: [comment({ suggestion })],
});
const resolved = thread({ id: 'resolved', resolvedAt: '2026-12-01T14:00:00.000Z' });
const threads = [general, answered, suggested, resolved];

const found = (address: string, personId?: string): readonly string[] => {
  const params = new URLSearchParams(address);
  return filterThreads(
    threads,
    threadFilterFrom((name) => params.get(name) ?? ''),
    personId,
  ).map(({ id }) => id);
};

test.each([
  ['', ['general', 'answered', 'suggested']],
  ['threads=resolved', ['resolved']],
  ['threads=all', ['general', 'answered', 'suggested', 'resolved']],
  ['threads=nonsense&whose=nonsense', ['general', 'answered', 'suggested']],
  ['whose=mine', ['answered']],
  ['whose=mentions', ['answered']],
  ['whose=suggestions', ['suggested']],
  ['on=tunnels/tn-s0-s1-a', ['answered', 'suggested']],
  ['on=design&threads=all', ['general', 'resolved']],
])('the address “%s” shows', (address, ids) => {
  expect(found(address, rosa.id)).toEqual(ids);
});

test('what is mine is told by who reads', () => {
  expect(found('whose=mine', noor.id)).toEqual(['general', 'answered', 'suggested']);
  expect(found('whose=mentions', noor.id)).toEqual([]);
});

test('open threads stand on the sheet, one slip for an element, none for what is gone', () => {
  const design = pairDesign();
  const gone = thread({
    id: 'gone',
    pin: { kind: 'element', ref: { collection: 'sites', id: 'no-more' }, path: [], called: 'Old quay' },
  });
  expect(commentFlags([...threads, gone], design)).toEqual([{ at: tunnel, count: 2, suggests: true }]);
  const applied = { ...suggestion, appliedAt: '2026-12-01T14:00:00.000Z' };
  expect(commentFlags([{ ...suggested, comments: [comment({ suggestion: applied })] }], design)).toEqual([
    { at: tunnel, count: 1, suggests: false },
  ]);
});
