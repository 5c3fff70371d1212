import type { ReactNode } from 'react';
import { DataTable, type Column } from '../../components/data-table.tsx';
import type { Outward } from '../../engine/wire/compute-wire.ts';
import type { Tread } from './padding-staircase.ts';

interface ByteRow {
  readonly key: string;
  readonly name: string;
  readonly bytes: number;
  readonly note: string;
  readonly total?: boolean;
}

const byteColumns: readonly Column<ByteRow>[] = [
  {
    key: 'name',
    head: 'From the outside in',
    cell: ({ name, total }) => <span className={total === true ? 'font-semibold' : ''}>{name}</span>,
  },
  {
    key: 'bytes',
    head: 'Bytes',
    align: 'right',
    widthPx: 90,
    cell: ({ bytes, total }) => <span className={total === true ? 'font-semibold' : ''}>{bytes}</span>,
  },
  { key: 'note', head: 'What', cell: ({ note }) => note },
];

/** The byte anatomy of the packet on the underlay, in figures. */
export function LayersTable({
  outward,
  limitBytes,
}: {
  readonly outward: Outward;
  readonly limitBytes: number;
}) {
  const { layers, totals } = outward;
  const over = totals.outerIpPacketBytes - limitBytes;
  const rows: readonly ByteRow[] = [
    ...layers.map(({ id, name, bytes, note = '' }) => ({ key: id, name, bytes, note })),
    {
      key: 'sum-packet',
      name: 'Outermost IP packet',
      bytes: totals.outerIpPacketBytes,
      note: over > 0 ? `${over} over ${limitBytes}` : `${-over} to spare in ${limitBytes}`,
      total: true,
    },
    {
      key: 'sum-frame',
      name: 'Frame',
      bytes: totals.frameBytes,
      note: 'Ethernet header to FCS',
      total: true,
    },
    {
      key: 'sum-wire',
      name: 'On the wire',
      bytes: totals.wireBytes,
      note: 'with preamble and gap',
      total: true,
    },
  ];
  return (
    <InTable>
      <DataTable caption="Bytes on the wire" columns={byteColumns} rows={rows} rowKey={({ key }) => key} />
    </InTable>
  );
}

/** The padding staircase in figures. */
export function TreadsTable({
  treads,
  limitBytes,
}: {
  readonly treads: readonly Tread[];
  readonly limitBytes: number;
}) {
  const columns: readonly Column<Tread>[] = [
    {
      key: 'inner',
      head: 'Inner packet',
      cell: ({ fromBytes, toBytes }) => (fromBytes === toBytes ? fromBytes : `${fromBytes} to ${toBytes}`),
    },
    { key: 'outer', head: 'Outer packet', align: 'right', cell: ({ outerBytes }) => outerBytes },
    {
      key: 'fits',
      head: `In ${limitBytes}`,
      cell: ({ outerBytes }) =>
        outerBytes > limitBytes ? `${outerBytes - limitBytes} over` : `${limitBytes - outerBytes} to spare`,
    },
  ];
  return (
    <InTable>
      <DataTable
        caption="Padding around the limit, in bytes"
        columns={columns}
        rows={treads}
        rowKey={({ fromBytes }) => String(fromBytes)}
      />
    </InTable>
  );
}

const InTable = ({ children }: { readonly children: ReactNode }) => (
  <details className="mt-10">
    <summary className="w-fit text-base font-medium text-blue underline">The same in a table</summary>
    <div className="mt-8 max-w-720">{children}</div>
  </details>
);
