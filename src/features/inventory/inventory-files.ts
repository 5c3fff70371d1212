import type { InventoryInput } from '../../engine/formats/inventory/import-inventory.ts';
import {
  matchColumns,
  missingColumns,
  type ColumnMatch,
} from '../../engine/formats/inventory/match-columns.ts';
import { inventoryTables, tableNamed, type InventoryName } from '../../engine/formats/inventory/tables.ts';
import { readCsv } from '../../lib/csv.ts';

/** A file that was chosen, what table it is taken for and which of its columns are which. */
export interface InventoryFile {
  readonly name: string;
  readonly heads: readonly string[];
  readonly rows: readonly (readonly string[])[];
  readonly table: InventoryName;
  readonly match: ColumnMatch;
}
export type FileRead =
  { readonly ok: true; readonly file: InventoryFile } | { readonly ok: false; readonly problem: string };

// Of a design's own size at most; a larger file is more likely something else.
const mostBytes = 4_000_000;
const mostRows = 20_000;

/** The table that a file most likely is: named by the file, or the one whose columns its heads match best. */
const likelyTable = (fileName: string, heads: readonly string[]): InventoryName => {
  const byName = inventoryTables.find(({ name }) => fileName.toLowerCase().includes(name));
  if (byName !== undefined && missingColumns(byName, matchColumns(byName, heads)).length === 0)
    return byName.name;
  const score = (name: InventoryName): number => {
    const table = tableNamed(name);
    const match = matchColumns(table, heads);
    return Object.keys(match).length - 10 * missingColumns(table, match).length;
  };
  return inventoryTables
    .map(({ name }) => name)
    .reduce((best, each) => (score(each) > score(best) ? each : best));
};

/** Reads what was chosen as a table of the inventory, or says why it is none. */
export const readInventoryFile = (fileName: string, text: string): FileRead => {
  if (text.length > mostBytes)
    return {
      ok: false,
      problem: `${fileName} has ${text.length} characters; choose a table of at most ${mostBytes}.`,
    };
  const read = readCsv(text);
  if (!read.ok) return { ok: false, problem: `${fileName}: ${read.problem}` };
  if (read.rows.length > mostRows)
    return {
      ok: false,
      problem: `${fileName} has ${read.rows.length} rows; bring in at most ${mostRows} at a time.`,
    };
  const table = likelyTable(fileName, read.heads);
  return {
    ok: true,
    file: {
      name: fileName,
      heads: read.heads,
      rows: read.rows,
      table,
      match: matchColumns(tableNamed(table), read.heads),
    },
  };
};

/** The same file taken for another table. */
export const takenFor = (file: InventoryFile, table: InventoryName): InventoryFile => ({
  ...file,
  table,
  match: matchColumns(tableNamed(table), file.heads),
});

/** The same file with one column matched to another of its heads, or to none. */
export const matchedTo = (file: InventoryFile, column: string, head: number | undefined): InventoryFile => {
  const match = Object.fromEntries(
    Object.entries(file.match).filter(([other, at]) => other !== column && at !== head),
  );
  return { ...file, match: head === undefined ? match : { ...match, [column]: head } };
};

/** Files as the engine takes them; two for one table are one table, as long as their columns are the same. */
export const inputOf = (
  files: readonly InventoryFile[],
):
  | { readonly ok: true; readonly input: InventoryInput }
  | { readonly ok: false; readonly problem: string } => {
  const byTable = new Map<InventoryName, InventoryFile>();
  for (const file of files) {
    const before = byTable.get(file.table);
    if (before !== undefined)
      return {
        ok: false,
        problem: `${before.name} and ${file.name} are both taken for ${tableNamed(file.table).title.toLowerCase()}: take one away or say what it is.`,
      };
    byTable.set(file.table, file);
  }
  return { ok: true, input: Object.fromEntries(byTable) };
};
