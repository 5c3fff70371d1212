import { expect, test } from 'vitest';
import { makerOf } from '#engine/diff/change-makers.ts';
import { compareDesigns } from '#engine/diff/compare-designs.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { pairDesign } from '../../support/designs.ts';

const pair = pairDesign();
const patches = (
  [
    ['Rosa', { sites: { s9: { name: 'Marl' } } }],
    ['Jon', { sites: { s9: { zone: 'ashore' } }, meta: { status: 'Draft' } }],
    ['Rosa', { sites: { s0: { zone: 'ashore' } } }],
    [null, { sites: { s0: { zone: 'afloat' } }, notes: { n: null } }],
  ] as readonly (readonly [string | null, MergePatch])[]
).map(([by, patch], i) => ({ by, at: `2026-12-01T14:0${i}:00Z`, patch }));

test('what came is of who added it, what changed of who wrote to it last', () => {
  const after = patches.reduce((design, { patch }) => applyPatch(design, patch), pair);
  const { changes } = compareDesigns(pair, after);
  expect(changes.map((change) => [change.sentence, makerOf(change, patches)])).toEqual([
    ['Zone of site Head office set to afloat', { by: null, at: '2026-12-01T14:03:00Z' }],
    ['Site Marl added', { by: 'Rosa', at: '2026-12-01T14:00:00Z' }],
    ['Status in the title block set to Draft', { by: 'Jon', at: '2026-12-01T14:01:00Z' }],
  ]);
});

test('what no patch touches is of nobody', () => {
  const { changes } = compareDesigns(pair, applyPatch(pair, { sites: { s1: { zone: 'ashore' } } }));
  expect(makerOf(changes[0]!, patches)).toBeUndefined();
});

test('what went with all that it lay in is of who removed that', () => {
  const after = applyPatch(pair, { sites: { s9: { name: 'Marl', zone: 'ashore' } } });
  const { changes } = compareDesigns(after, pair);
  const removal = { by: 'Jon', at: '2026-12-01T15:00:00Z', patch: { sites: { s9: null } } };
  expect(makerOf(changes[0]!, [...patches, removal])).toEqual({ by: 'Jon', at: '2026-12-01T15:00:00Z' });
});
