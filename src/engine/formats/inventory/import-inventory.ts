import type { Design } from '../../model/design.ts';
import type { MergePatch } from '../../model/merge-patch.ts';
import { diffPatch, sameJson } from '../../model/merge-patch.ts';
import { parseDesign } from '../../model/parse-design.ts';
import { inventoryWriter, type Draft, type InventoryWriter } from './inventory-writer.ts';
import type { CellProblem, ReadRow, TableInput } from './read-rows.ts';
import { mostProblems, readRows } from './read-rows.ts';
import { inventoryTables, type InventoryName } from './tables.ts';

export type InventoryInput = { readonly [name in InventoryName]?: TableInput };

/** How many of a table's rows do what. */
export interface RowCounts {
  readonly added: number;
  readonly changed: number;
  readonly unchanged: number;
}
export type Imported =
  | {
      readonly ok: true;
      /** All of it as one change; {} where the design has everything already. */
      readonly patch: MergePatch;
      readonly counts: { readonly [name in InventoryName]?: RowCounts };
    }
  | {
      readonly ok: false;
      /** In order of table and line, at most 200. */
      readonly problems: readonly CellProblem[];
      /** How many there are in all. */
      readonly total: number;
    };

const writers: { readonly [name in InventoryName]: (writer: InventoryWriter, row: ReadRow) => void } = {
  sites: (writer, row) => writer.site(row),
  devices: (writer, row) => writer.device(row),
  ports: (writer, row) => writer.port(row),
  segments: (writer, row) => writer.segment(row),
  hosts: (writer, row) => writer.host(row),
};

/**
 * Brings tables of an inventory into a design. Things are told apart by their names: what has one already is changed where the
 * row says something else, the rest is added, nothing is taken away, and an empty cell leaves alone what is there. With any
 * cell that can't be taken nothing is.
 */
export const importInventory = (
  design: Design,
  input: InventoryInput,
  newId: (prefix: string) => string,
): Imported => {
  const problems: CellProblem[] = [];
  const draft = JSON.parse(JSON.stringify(design)) as Draft;
  const writer = inventoryWriter(draft, newId, (problem) => problems.push(problem));
  const counts: { [name in InventoryName]?: RowCounts } = {};
  for (const table of inventoryTables) {
    const given = input[table.name];
    if (given === undefined) continue;
    const read = readRows(table, given);
    problems.push(...read.problems);
    const tally = { added: 0, changed: 0, unchanged: 0 };
    for (const row of read.rows) {
      writer.begin(row);
      writers[table.name](writer, row);
      tally[writer.end()] += 1;
    }
    counts[table.name] = tally;
  }
  const order = inventoryTables.map(({ name }) => name);
  const refuse = (found: readonly CellProblem[]): Imported => ({
    ok: false,
    problems: [...found]
      .sort((a, b) => order.indexOf(a.table) - order.indexOf(b.table) || a.line - b.line)
      .slice(0, mostProblems),
    total: found.length,
  });
  if (problems.length > 0) return refuse(problems);
  const parsed = parseDesign(draft);
  if (!parsed.ok)
    return refuse(
      parsed.problems.map(({ path, expected }) => writer.problemAt(path, expected.replace(/^expected /, ''))),
    );
  const patch = sameJson(design, parsed.value) ? {} : diffPatch(design, parsed.value);
  return { ok: true, patch, counts };
};
