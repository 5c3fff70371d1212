import { expect, it } from 'vitest';
import { outlineTree } from '../../../src/features/outline/outline-tree.ts';
import { createRowBlocks } from '../../../src/features/outline/row-blocks.ts';
import { visibleRows } from '../../../src/features/outline/visible-rows.ts';
import { pairDesign } from '../../support/designs.ts';

const roots = outlineTree(pairDesign(), []);
const openedAt = (keys: readonly string[]) =>
  visibleRows(roots, (row) => row.group !== undefined || keys.includes(row.key));

it('rows are drawn again only in the block that a row was opened in', () => {
  const cut = createRowBlocks();
  const before = cut(openedAt([]));
  const site = before.find(({ key }) => key.endsWith('sites/s1'))!;
  const after = cut(openedAt([site.key]));
  expect(after.flatMap(({ rows }) => rows)).toEqual(openedAt([site.key]));
  const changed = after.filter((block) => !before.includes(block));
  expect(changed.map(({ key }) => key)).toEqual([site.key]);
  expect(changed[0]!.rows.length).toBeGreaterThan(1);
});

it('rows that say the same are the same objects when the design is read anew', () => {
  const cut = createRowBlocks();
  const before = cut(openedAt([]));
  expect(cut(openedAt([]))).toEqual(before);
  expect(cut(openedAt([])).every((block, i) => block === before[i])).toBe(true);
});
