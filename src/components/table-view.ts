import type { ReactNode } from 'react';
import { csvText } from '../lib/csv.ts';

export interface Column<Row> {
  readonly key: string;
  readonly head: string;
  readonly cell: (row: Row) => ReactNode;
  /** What rows are sorted by when this head is pressed; without it they cannot be. Undefined, as unknown, comes last either way. */
  readonly sortBy?: (row: Row) => string | number | undefined;
  /** The first press sorts the highest to the top. */
  readonly highestFirst?: boolean;
  /** The cell in plain words, for the filter and for CSV. Without it, what it is sorted by. */
  readonly text?: (row: Row) => string | number;
  readonly align?: 'left' | 'right';
  readonly widthPx?: number;
  /** Shown only once it is chosen. */
  readonly optional?: boolean;
}

export interface Sorting {
  readonly key: string;
  readonly descending: boolean;
}

/** How somebody looks at a table. */
export interface TableView {
  readonly filter: string;
  readonly sorting?: Sorting | undefined;
  /** Keys of the columns shown; absent while nobody has chosen. */
  readonly columns?: readonly string[] | undefined;
}

export const plainView: TableView = { filter: '' };

const textOf = <Row>({ text, sortBy }: Column<Row>, row: Row): string | number =>
  text?.(row) ?? sortBy?.(row) ?? '';

export const columnsShown = <Row>(
  columns: readonly Column<Row>[],
  { columns: chosen }: TableView,
): readonly Column<Row>[] => {
  const shown = columns.filter(({ key, optional }) =>
    chosen === undefined ? optional !== true : chosen.includes(key),
  );
  // An address that names columns which are no more still gets a table.
  return shown.length === 0 ? columns.filter(({ optional }) => optional !== true) : shown;
};

/** The rows in which every word of the filter stands, in whichever column. */
export const rowsFound = <Row>(
  rows: readonly Row[],
  columns: readonly Column<Row>[],
  filter: string,
): readonly Row[] => {
  const words = filter.toLowerCase().split(/\s+/).filter(Boolean);
  if (words.length === 0) return rows;
  return rows.filter((row) => {
    const all = columns
      .map((column) => textOf(column, row))
      .join('\n')
      .toLowerCase();
    return words.every((word) => all.includes(word));
  });
};

const numeric = new Intl.Collator('en', { numeric: true });

/** Equal rows keep the order they came in. */
export const rowsSorted = <Row>(
  rows: readonly Row[],
  columns: readonly Column<Row>[],
  sorting: Sorting | undefined,
): readonly Row[] => {
  const sortBy = columns.find(({ key }) => key === sorting?.key)?.sortBy;
  if (sortBy === undefined) return rows;
  const sign = sorting?.descending === true ? -1 : 1;
  return rows
    .map((row) => ({ row, value: sortBy(row) }))
    .sort(({ value: a }, { value: b }) => {
      if (a === undefined || b === undefined) return Number(a === undefined) - Number(b === undefined);
      return (
        sign *
        (typeof a === 'number' && typeof b === 'number' ? a - b : numeric.compare(String(a), String(b)))
      );
    })
    .map(({ row }) => row);
};

/** Rows as CSV, heads first. */
export const rowsAsCsv = <Row>(columns: readonly Column<Row>[], rows: readonly Row[]): string =>
  csvText([
    columns.map(({ head }) => head),
    ...rows.map((row) => columns.map((column) => textOf(column, row))),
  ]);

/** A row made of the longest text of every column: what the columns have to be wide enough for. */
export const widestCells = <Row>(
  columns: readonly Column<Row>[],
  rows: readonly Row[],
): readonly (readonly [Column<Row>, Row])[] =>
  columns.flatMap((column) => {
    let widest: Row | undefined;
    let length = -1;
    for (const row of rows) {
      const own = String(textOf(column, row)).length;
      if (own > length) [widest, length] = [row, own];
    }
    return widest === undefined ? [] : [[column, widest] as const];
  });
