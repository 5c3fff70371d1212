import { plainHead } from './cell-readers.ts';
import type { InventoryColumn, InventoryTable } from './tables.ts';

/** Which head of a file stands for which column: column's key to the head's place from 0. */
export type ColumnMatch = { readonly [column: string]: number };

const means = ({ key, head, alike }: InventoryColumn, plain: string): boolean =>
  plain === plainHead(key) || plain === plainHead(head) || alike.includes(plain);

/** Matches a file's heads to a table's columns by what they say; each head is taken once, the first that fits. */
export const matchColumns = (table: InventoryTable, heads: readonly string[]): ColumnMatch => {
  const match: { [column: string]: number } = {};
  const taken = new Set<number>();
  // A head that says exactly what a column is called goes to it before others may have it by another name.
  const passes: readonly ((column: InventoryColumn, plain: string) => boolean)[] = [
    ({ head }, plain) => plain === plainHead(head),
    means,
  ];
  for (const fits of passes)
    for (const column of table.columns) {
      if (match[column.key] !== undefined) continue;
      const at = heads.findIndex((head, i) => !taken.has(i) && fits(column, plainHead(head)));
      if (at < 0) continue;
      match[column.key] = at;
      taken.add(at);
    }
  return match;
};

/** Columns that a row can't do without and no head was found for. */
export const missingColumns = (table: InventoryTable, match: ColumnMatch): readonly InventoryColumn[] =>
  table.columns.filter(({ key, required }) => required === true && match[key] === undefined);
