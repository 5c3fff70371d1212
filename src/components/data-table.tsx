import { useState, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { Icon } from './icon.tsx';

export interface Column<Row> {
  readonly key: string;
  readonly head: string;
  readonly cell: (row: Row) => ReactNode;
  /** What rows are sorted by when this head is pressed; without it they cannot be. */
  readonly sortBy?: (row: Row) => string | number;
  readonly align?: 'left' | 'right';
  readonly widthPx?: number;
}

export interface Sorting {
  readonly key: string;
  readonly descending: boolean;
}

interface DataTableProps<Row> {
  /** Names the table to a screen reader. */
  readonly caption: string;
  readonly columns: readonly Column<Row>[];
  readonly rows: readonly Row[];
  readonly rowKey: (row: Row) => string;
  readonly selectedKey?: string;
  readonly onSelect?: (row: Row) => void;
  readonly initialSorting?: Sorting;
  /** Shown in place of rows. */
  readonly empty?: ReactNode;
}

/** A table with an engraved head. Equal rows keep the order they came in. */
export function DataTable<Row>({
  caption,
  columns,
  rows,
  rowKey,
  selectedKey,
  onSelect,
  initialSorting,
  empty,
}: DataTableProps<Row>) {
  const [sorting, setSorting] = useState(initialSorting);
  const sortBy = columns.find((column) => column.key === sorting?.key)?.sortBy;
  const shown =
    sortBy === undefined
      ? rows
      : [...rows].sort((a, b) => compare(sortBy(a), sortBy(b)) * (sorting?.descending === true ? -1 : 1));
  return (
    <div className="overflow-x-auto border border-rule-strong bg-field">
      <table className="w-full border-collapse text-base">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr className="bg-strip text-strip-ink">
            {columns.map((column) => (
              <HeadCell
                key={column.key}
                column={column}
                sorting={sorting?.key === column.key ? sorting : undefined}
                onSort={(descending) => setSorting({ key: column.key, descending })}
              />
            ))}
          </tr>
        </thead>
        <tbody>
          {shown.map((row) => {
            const key = rowKey(row);
            const selected = key === selectedKey;
            return (
              <tr
                key={key}
                aria-selected={onSelect === undefined ? undefined : selected}
                onClick={onSelect && (() => onSelect(row))}
                className={classNames(
                  'border-t border-rule-2 first:border-t-0',
                  selected ? 'bg-blue-wash shadow-[inset_4px_0_0_var(--blue)]' : onSelect && 'hover:bg-hover',
                  onSelect && 'cursor-pointer',
                )}
              >
                {columns.map((column, at) => (
                  <td
                    key={column.key}
                    className={classNames('h-34 px-10 py-6', column.align === 'right' && 'text-right')}
                  >
                    {at === 0 && onSelect !== undefined ? (
                      // The row takes the mouse, this button the keyboard.
                      <button
                        type="button"
                        className="block w-full text-left"
                        onClick={(event) => {
                          event.stopPropagation();
                          onSelect(row);
                        }}
                      >
                        {column.cell(row)}
                      </button>
                    ) : (
                      column.cell(row)
                    )}
                  </td>
                ))}
              </tr>
            );
          })}
        </tbody>
      </table>
      {rows.length === 0 && empty}
    </div>
  );
}

function HeadCell<Row>({
  column,
  sorting,
  onSort,
}: {
  readonly column: Column<Row>;
  readonly sorting: Sorting | undefined;
  readonly onSort: (descending: boolean) => void;
}) {
  const direction = sorting === undefined ? undefined : sorting.descending ? 'descending' : 'ascending';
  const icon = direction === undefined ? 'sort' : direction === 'ascending' ? 'sort-up' : 'sort-down';
  return (
    <th
      scope="col"
      aria-sort={direction}
      style={column.widthPx === undefined ? undefined : { width: column.widthPx }}
      className={classNames(
        'h-30 px-10 font-semibold',
        column.align === 'right' ? 'text-right' : 'text-left',
      )}
    >
      {column.sortBy === undefined ? (
        column.head
      ) : (
        <button
          type="button"
          onClick={() => onSort(direction === 'ascending')}
          className="inline-flex items-center gap-4 font-semibold whitespace-nowrap outline-current"
        >
          {column.head}
          <Icon name={icon} size={13} />
        </button>
      )}
    </th>
  );
}

function compare(a: string | number, b: string | number): number {
  if (typeof a === 'number' && typeof b === 'number') return a - b;
  return String(a).localeCompare(String(b), 'en', { numeric: true });
}
