import type { VisibleRow } from './visible-rows.ts';

/** Rows that are drawn together: a group's head, or one element of a group with all that is open beneath it. */
export interface RowBlock {
  /** The key of its first row. */
  readonly key: string;
  readonly rows: readonly VisibleRow[];
}

const isSame = (a: VisibleRow, b: VisibleRow): boolean =>
  a.row === b.row &&
  a.level === b.level &&
  a.place === b.place &&
  a.siblings === b.siblings &&
  a.isOpen === b.isOpen;

/** Rows and blocks that say the same as before are the same objects, so that only what changed is drawn again. */
const keep = (block: RowBlock, before: RowBlock | undefined): RowBlock => {
  if (before === undefined) return block;
  const rows = block.rows.map((row, i) => {
    const known = before.rows[i];
    return known !== undefined && isSame(row, known) ? known : row;
  });
  return rows.length === before.rows.length && rows.every((row, i) => row === before.rows[i])
    ? before
    : { key: block.key, rows };
};

/** Cuts the visible rows into blocks, again and again, and takes over from the last time what stayed as it was. */
export const createRowBlocks = (): ((rows: readonly VisibleRow[]) => readonly RowBlock[]) => {
  let before: ReadonlyMap<string, RowBlock> = new Map();
  return (rows) => {
    const cut: { readonly key: string; readonly rows: VisibleRow[] }[] = [];
    for (const row of rows) {
      if (row.level <= 2 || cut.length === 0) cut.push({ key: row.row.key, rows: [row] });
      else cut.at(-1)!.rows.push(row);
    }
    const blocks = cut.map((block) => keep(block, before.get(block.key)));
    before = new Map(blocks.map((block) => [block.key, block]));
    return blocks;
  };
};
