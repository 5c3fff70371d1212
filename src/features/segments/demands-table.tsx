import { milliseconds } from '../../lib/duration-text.ts';
import { InlineField } from '../../canvas/inspector/inline-field.tsx';
import { segmentColumn } from '../../canvas/inspector/segment-columns.tsx';
import { rate } from '../../lib/rate-text.ts';
import { wholeNumber } from '../../lib/written-value.ts';
import { Button } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { DemandRow } from './demand-rows.ts';

const count = wholeNumber();

const rateColumn = (way: 'forwardBps' | 'reverseBps', head: string): Column<DemandRow> => ({
  key: way === 'forwardBps' ? 'forward' : 'reverse',
  head,
  align: 'right',
  widthPx: 120,
  cell: (row) => (
    <InlineField label={`${head} of ${row.name}`} path={['demands', row.id, way]} writing={rate} alignRight />
  ),
  sortBy: (row) => row[way],
  text: (row) => String(row[way] ?? ''),
});

const columns: readonly Column<DemandRow>[] = [
  {
    key: 'name',
    head: 'Demand',
    cell: (row) => <span className="font-semibold">{row.name}</span>,
    sortBy: (row) => row.name,
    text: (row) => row.name,
  },
  segmentColumn(),
  { key: 'from', head: 'From', cell: (row) => row.from, sortBy: (row) => row.from, text: (row) => row.from },
  { key: 'to', head: 'To', cell: (row) => row.to, sortBy: (row) => row.to, text: (row) => row.to },
  rateColumn('forwardBps', 'Rate there'),
  rateColumn('reverseBps', 'Rate back'),
  {
    key: 'flows',
    head: 'Flows',
    align: 'right',
    widthPx: 90,
    cell: (row) => (
      <InlineField
        label={`Flows of ${row.name}`}
        path={['demands', row.id, 'flows']}
        writing={count}
        alignRight
      />
    ),
    sortBy: (row) => row.flows,
    text: (row) => String(row.flows ?? ''),
  },
  {
    key: 'latency',
    head: 'Latency allowed, ms',
    align: 'right',
    widthPx: 140,
    cell: (row) => (
      <InlineField
        label={`Latency allowed of ${row.name}, milliseconds`}
        path={['demands', row.id, 'latencyAllowedUs']}
        writing={milliseconds}
        alignRight
      />
    ),
    sortBy: (row) => row.latencyAllowedUs,
    text: (row) => (row.latencyAllowedUs === undefined ? '' : String(row.latencyAllowedUs / 1000)),
  },
];

interface DemandsTableProps {
  readonly rows: readonly DemandRow[];
  readonly selectedId: string | undefined;
  readonly onSelect: (id: string) => void;
  /** Absent where none can be added. */
  readonly onAdd: (() => void) | undefined;
}

/** What has to be carried, and how much of it. */
export function DemandsTable({ rows, selectedId, onSelect, onAdd }: DemandsTableProps) {
  return (
    <WorkTable
      view={useTableView('demands')}
      filterLabel="Demand, segment or place"
      caption="Demands"
      columns={columns}
      rows={rows}
      rowKey={(row) => row.id}
      selectedKey={selectedId}
      onSelect={(row) => onSelect(row.id)}
      empty={
        <EmptyState
          className="m-12"
          title="No demand stated"
          action={onAdd && <Button onClick={onAdd}>Add a demand</Button>}
        >
          A demand is traffic that a segment must carry between two places. With it, Load can tell which
          tunnel, gateway or transport runs full first.
        </EmptyState>
      }
    />
  );
}
