import { useMemo, useRef, useState, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { Icon } from './icon.tsx';
import { rowsSorted, widestCells, type Column, type Sorting } from './table-view.ts';
import { useCutEdge } from './use-cut-edge.ts';
import { useRowWindow } from './use-row-window.ts';

export type { Column, Sorting } from './table-view.ts';

export interface DataTableProps<Row> {
  /** Names the table to a screen reader. */
  readonly caption: string;
  readonly columns: readonly Column<Row>[];
  readonly rows: readonly Row[];
  readonly rowKey: (row: Row) => string;
  readonly selectedKey?: string | undefined;
  readonly onSelect?: ((row: Row) => void) | undefined;
  readonly initialSorting?: Sorting | undefined;
  /** For who keeps the order elsewhere; without, the table does. */
  readonly sorted?: {
    readonly by: Sorting | undefined;
    readonly onChange: (sorting: Sorting) => void;
  };
  /** Shown in place of rows. */
  readonly empty?: ReactNode;
  /** Of the box that it scrolls in. */
  readonly className?: string;
}

// So many rows the browser draws at once without being felt.
const windowFrom = 150;

/**
 * A table with an engraved head that stays in sight. Equal rows keep the order they came in. Of many rows only those in
 * sight are drawn, each on one line, and the table scrolls in its own box.
 */
export function DataTable<Row>({
  caption,
  columns,
  rows,
  rowKey,
  selectedKey,
  onSelect,
  initialSorting,
  sorted,
  empty,
  className,
}: DataTableProps<Row>) {
  const [ownSorting, setOwnSorting] = useState(initialSorting);
  const sorting = sorted === undefined ? ownSorting : sorted.by;
  const shown = useMemo(() => rowsSorted(rows, columns, sorting), [rows, columns, sorting]);
  const box = useRef<HTMLDivElement>(null);
  const isLong = shown.length > windowFrom;
  const { from, to, abovePx, belowPx } = useRowWindow(box, shown.length, isLong);
  const cutPx = useCutEdge(box);
  const widest = useMemo(() => (isLong ? widestCells(columns, shown) : []), [isLong, columns, shown]);
  return (
    <div className="relative flex min-h-0 min-w-0 flex-col">
      <div
        ref={box}
        className={classNames(
          // Placed, so that what is said to screen readers alone stays in it and doesn't widen the page.
          'relative overflow-auto border border-rule-strong bg-field',
          className ?? (isLong && 'max-h-[70dvh]'),
        )}
      >
        <table
          aria-rowcount={isLong ? shown.length + 1 : undefined}
          className={classNames('w-full border-collapse text-base', isLong && 'whitespace-nowrap')}
        >
          <caption className="sr-only">{caption}</caption>
          <thead className="sticky top-0 z-1">
            <tr className="bg-strip text-strip-ink">
              {columns.map((column) => (
                <HeadCell
                  key={column.key}
                  column={column}
                  sorting={sorting?.key === column.key ? sorting : undefined}
                  onSort={(descending) =>
                    (sorted?.onChange ?? setOwnSorting)({ key: column.key, descending })
                  }
                />
              ))}
            </tr>
          </thead>
          <tbody>
            {isLong && (
              // Takes no room itself, but keeps the columns as wide as their longest value while rows come and go.
              <tr aria-hidden="true" className="collapse">
                {widest.map(([column, row]) => (
                  <td key={column.key} className="px-10">
                    {column.cell(row)}
                  </td>
                ))}
              </tr>
            )}
            {abovePx > 0 && <Spacer heightPx={abovePx} columns={columns.length} />}
            {shown.slice(from, to).map((row, at) => {
              const key = rowKey(row);
              return (
                <BodyRow
                  key={key}
                  row={row}
                  columns={columns}
                  selected={key === selectedKey}
                  onSelect={onSelect}
                  // The head is the first.
                  number={isLong ? from + at + 2 : undefined}
                />
              );
            })}
            {belowPx > 0 && <Spacer heightPx={belowPx} columns={columns.length} />}
          </tbody>
        </table>
        {rows.length === 0 && empty}
      </div>
      {cutPx !== undefined && (
        // For the eye and the pointer: the keys bring what they come to into sight by themselves.
        <button
          type="button"
          tabIndex={-1}
          aria-hidden="true"
          title="Further columns"
          className="absolute inset-y-0 z-2 flex w-16 flex-col items-center border-l-1.5 border-ink bg-raise text-ink"
          style={{ right: cutPx }}
          onClick={() => box.current?.scrollBy({ left: box.current.clientWidth / 2 })}
        >
          <span className="flex h-30 w-full items-center justify-center bg-strip text-strip-ink">
            <Icon name="chevron-right" size={13} />
          </span>
        </button>
      )}
    </div>
  );
}

const Spacer = ({ heightPx, columns }: { readonly heightPx: number; readonly columns: number }) => (
  <tr aria-hidden="true">
    <td colSpan={columns} className="p-0" style={{ height: heightPx }} />
  </tr>
);

function BodyRow<Row>({
  row,
  columns,
  selected,
  onSelect,
  number,
}: {
  readonly row: Row;
  readonly columns: readonly Column<Row>[];
  readonly selected: boolean;
  readonly onSelect: ((row: Row) => void) | undefined;
  readonly number: number | undefined;
}) {
  return (
    <tr
      aria-rowindex={number}
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
        'h-30 bg-strip px-10 font-semibold',
        column.align === 'right' ? 'text-right' : 'text-left',
      )}
    >
      {column.sortBy === undefined ? (
        column.head
      ) : (
        <button
          type="button"
          onClick={() => onSort(sorting === undefined ? column.highestFirst === true : !sorting.descending)}
          className="inline-flex items-center gap-4 font-semibold whitespace-nowrap outline-current"
        >
          {column.head}
          <Icon name={icon} size={13} />
        </button>
      )}
    </th>
  );
}
