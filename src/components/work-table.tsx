import { useMemo, useState, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { Button } from './button.tsx';
import { copyCsv } from './copy-csv.ts';
import { DataTable, type DataTableProps } from './data-table.tsx';
import { Icon } from './icon.tsx';
import { Menu } from './menu.tsx';
import { SearchField } from './search-field.tsx';
import {
  columnsShown,
  plainView,
  rowsAsCsv,
  rowsFound,
  rowsSorted,
  type Column,
  type TableView,
} from './table-view.ts';

interface WorkTableProps<Row> extends Omit<DataTableProps<Row>, 'sorted' | 'className'> {
  /** What the filter looks for, such as 'Segment, VLAN or subnet'; without it there is none. */
  readonly filterLabel?: string;
  /** Where the view is kept, such as `useTableView('demands')`; without it the table keeps it itself. */
  readonly view?: readonly [view: TableView, onChange: (view: TableView) => void];
  /** What the rows are chosen by, before the filter. */
  readonly before?: ReactNode;
  /** More buttons, at the left of those for columns and CSV. */
  readonly beside?: ReactNode;
  /** Fills the height of what it stands in, and scrolls inside. */
  readonly fill?: boolean;
  readonly className?: string;
}

/** A table to work with: narrowed by a filter, sorted, its columns chosen, copied as CSV as it is shown. */
export function WorkTable<Row>({
  filterLabel,
  view: kept,
  before,
  beside,
  fill = false,
  className,
  columns,
  rows,
  empty,
  initialSorting,
  ...table
}: WorkTableProps<Row>) {
  const [ownView, setOwnView] = useState(plainView);
  const [view, setView] = kept ?? [ownView, setOwnView];
  const sorting = view.sorting ?? initialSorting;
  const shownColumns = useMemo(() => columnsShown(columns, view), [columns, view]);
  const found = useMemo(() => rowsFound(rows, columns, view.filter), [rows, columns, view.filter]);
  return (
    <div className={classNames('flex min-w-0 flex-col', fill && 'h-full min-h-0', className)}>
      <div className="flex shrink-0 flex-wrap items-center gap-8 pb-8">
        {before}
        {filterLabel !== undefined && (
          <SearchField
            label={filterLabel}
            value={view.filter}
            onChange={(filter) => setView({ ...view, filter })}
            className="max-w-240 min-w-130 flex-1 max-md:max-w-full"
          />
        )}
        <p role="status" className="text-note whitespace-nowrap text-ink-2 empty:hidden">
          {view.filter.trim() === '' ? '' : `${found.length} of ${rows.length}`}
        </p>
        <div className="ml-auto flex flex-wrap items-center gap-8">
          {beside}
          <ColumnMenu
            columns={columns}
            shown={shownColumns}
            onChange={(keys) => setView({ ...view, columns: keys })}
          />
          <Button
            small
            disabled={found.length === 0}
            onClick={() =>
              void copyCsv(
                table.caption,
                rowsAsCsv(shownColumns, rowsSorted(found, columns, sorting)),
                found.length,
              )
            }
          >
            Copy CSV
          </Button>
        </div>
      </div>
      <DataTable
        {...table}
        columns={shownColumns}
        rows={found}
        sorted={{ by: sorting, onChange: (next) => setView({ ...view, sorting: next }) }}
        empty={
          rows.length === 0 ? (
            empty
          ) : (
            <NothingFound filter={view.filter} onClear={() => setView({ ...view, filter: '' })} />
          )
        }
        // On a phone what it stands in grows with it: it then bounds itself, or all of thousands of rows would be in sight.
        {...(fill ? { className: 'min-h-0 max-md:max-h-[70dvh]' } : {})}
      />
    </div>
  );
}

const NothingFound = ({ filter, onClear }: { readonly filter: string; readonly onClear: () => void }) => (
  <p className="flex flex-wrap items-center gap-10 px-10 py-8 text-base text-ink-2">
    No row says “{filter.trim()}”.
    <Button small kind="quiet" onClick={onClear}>
      Show all
    </Button>
  </p>
);

function ColumnMenu<Row>({
  columns,
  shown,
  onChange,
}: {
  readonly columns: readonly Column<Row>[];
  readonly shown: readonly Column<Row>[];
  readonly onChange: (keys: readonly string[]) => void;
}) {
  const chosen = new Set(shown.map(({ key }) => key));
  return (
    <Menu
      align="end"
      trigger={
        <Button small icon={<Icon name="chevron-down" size={13} />} className="flex-row-reverse">
          Columns
        </Button>
      }
      groups={[
        {
          checks: {
            label: 'Columns shown',
            options: columns.map(({ key, head }) => ({
              value: key,
              label: head,
              checked: chosen.has(key),
              // One has to stay.
              disabled: chosen.size === 1 && chosen.has(key),
            })),
            onToggle: (key) =>
              onChange(
                columns
                  .map((column) => column.key)
                  .filter((each) => (each === key ? !chosen.has(key) : chosen.has(each))),
              ),
          },
        },
      ]}
    />
  );
}
