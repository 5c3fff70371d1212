import type { ColumnMatch } from './match-columns.ts';
import { missingColumns } from './match-columns.ts';
import type { InventoryColumn, InventoryName, InventoryTable } from './tables.ts';

/** One table as it comes from a file. */
export interface TableInput {
  readonly heads: readonly string[];
  readonly rows: readonly (readonly string[])[];
  /** Which head stands for which column; see matchColumns. */
  readonly match: ColumnMatch;
}

/** One cell that can't be taken. */
export interface CellProblem {
  readonly table: InventoryName;
  /** Line of the table, its heads being line 1. */
  readonly line: number;
  /** As the file heads it. */
  readonly column: string;
  readonly value: string;
  readonly expected: string;
}

/** A row whose cells could be read. */
export interface ReadRow {
  readonly line: number;
  /** Values by column; an empty cell has none. */
  readonly cells: { readonly [column: string]: unknown };
  readonly problem: (column: string, expected: string) => CellProblem;
}

// A file that is no inventory shouldn't fill a screen with what is wrong with each of its lines.
export const mostProblems = 200;

/** Reads a table's cells; rows without any text are passed over. */
export const readRows = (
  table: InventoryTable,
  { heads, rows, match }: TableInput,
): { readonly rows: readonly ReadRow[]; readonly problems: readonly CellProblem[] } => {
  const missing = missingColumns(table, match);
  if (missing.length > 0)
    return {
      rows: [],
      problems: missing.map(({ head }) => ({
        table: table.name,
        line: 1,
        column: head,
        value: heads.join(', '),
        expected: `a column for ${head}: say which one it is`,
      })),
    };
  const problems: CellProblem[] = [];
  const read: ReadRow[] = [];
  const columns = table.columns.filter(({ key }) => match[key] !== undefined);
  const textAt = (row: readonly string[], { key }: InventoryColumn): string =>
    (row[match[key]!] ?? '').trim();
  rows.forEach((row, at) => {
    if (row.every((text) => text.trim() === '')) return;
    const line = at + 2;
    const problem = (column: string, expected: string): CellProblem => ({
      table: table.name,
      line,
      column: heads[match[column] ?? -1] ?? table.columns.find(({ key }) => key === column)?.head ?? column,
      value: row[match[column] ?? -1]?.trim() ?? '',
      expected,
    });
    const cells: { [column: string]: unknown } = {};
    let isWhole = true;
    for (const column of columns) {
      const text = textAt(row, column);
      if (text === '') {
        if (column.required !== true) continue;
        problems.push(problem(column.key, `something: ${column.explains}`));
        isWhole = false;
        continue;
      }
      const reading = column.reader.read(text);
      if (reading.ok) cells[column.key] = reading.value;
      else {
        problems.push(problem(column.key, reading.expected));
        isWhole = false;
      }
    }
    if (isWhole) read.push({ line, cells, problem });
  });
  return { rows: read, problems };
};
