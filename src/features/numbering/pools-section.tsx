import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { DataTable } from '../../components/data-table.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { Column } from '../../components/table-view.ts';
import type { Design } from '../../engine/model/design.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { asApiError } from '../../lib/api-error.ts';
import { poolsQuery } from '../../lib/pools-query.ts';
import { poolRows, type PoolRow } from './pool-rows.ts';
import { PoolsDialog } from './pools-dialog.tsx';

const sizeWords = (size: number | bigint): string => {
  const text = size.toString();
  return text.length > 15 ? `about 10^${text.length - 1}` : size.toLocaleString('en-GB');
};

const columns: readonly Column<PoolRow>[] = [
  { key: 'kind', head: 'Pool', cell: (row) => row.kind, sortBy: (row) => row.kind },
  {
    key: 'range',
    head: 'Range',
    cell: (row) => <span className="font-semibold">{row.range}</span>,
    sortBy: (row) => row.range,
  },
  {
    key: 'for',
    head: 'What for',
    cell: (row) => (row.purpose === '' ? <span className="text-ink-3">not said</span> : row.purpose),
    sortBy: (row) => row.purpose,
  },
  {
    key: 'here',
    head: 'In this design',
    align: 'right',
    cell: (row) => row.takenHere,
    sortBy: (row) => row.takenHere,
  },
  {
    key: 'elsewhere',
    head: 'In others',
    align: 'right',
    cell: (row) => row.takenElsewhere,
    sortBy: (row) => row.takenElsewhere,
  },
  {
    key: 'size',
    head: 'Of',
    align: 'right',
    cell: (row) => sizeWords(row.size),
    sortBy: (row) => Number(row.size),
  },
];

interface PoolsSectionProps {
  readonly workspaceId: string;
  readonly design: Design;
  readonly context: NumberingContext;
  readonly mayEdit: boolean;
}

/** The workspace's pools, what they are for and how full they are. */
export function PoolsSection({ workspaceId, design, context, mayEdit }: PoolsSectionProps) {
  const { data, error, refetch } = useQuery(poolsQuery(workspaceId));
  const [editing, setEditing] = useState(false);
  return (
    <section aria-labelledby="pools" className="flex flex-col gap-10">
      <div className="flex flex-wrap items-center gap-16">
        <h2 id="pools" className="text-title font-semibold">
          Pools
        </h2>
        {mayEdit && data !== undefined && (
          <Button small onClick={() => setEditing(true)}>
            Set pools
          </Button>
        )}
        {data?.changedBy != null && (
          <span className="text-note text-ink-2">
            Set by {data.changedBy}, for all designs of the workspace
          </span>
        )}
      </div>
      {error !== null && (
        <ErrorNotice
          action={
            <Button small onClick={() => void refetch()}>
              Try again
            </Button>
          }
        >
          The pools could not be read. {asApiError(error).message}
        </ErrorNotice>
      )}
      {data === undefined && error === null && (
        <p role="status" className="text-base text-ink-2">
          Reading the pools…
        </p>
      )}
      {data !== undefined && (
        <DataTable
          caption="Pools"
          columns={columns}
          rows={poolRows(data.pools, design, context)}
          rowKey={(row) => row.key}
          empty={
            <p className="p-14 text-base text-ink-2">
              No pool is set. New numbers are the lowest free from VNI 10001, VLAN 110 and 10.255.0.0/16.{' '}
              {mayEdit
                ? 'Set pools to keep them apart from what else your network uses.'
                : 'An owner of the workspace can set pools.'}
            </p>
          }
        />
      )}
      {editing && data !== undefined && (
        <PoolsDialog workspaceId={workspaceId} kept={data} onClose={() => setEditing(false)} />
      )}
    </section>
  );
}
