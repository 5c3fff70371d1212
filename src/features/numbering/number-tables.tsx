import type { ReactNode } from 'react';
import { InlineField } from '../../canvas/inspector/inline-field.tsx';
import { segmentColumn, siteColumns } from '../../canvas/inspector/segment-columns.tsx';
import { wholeNumber } from '../../lib/written-value.ts';
import { EmptyState } from '../../components/empty-state.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { LoopbackRow, Standing, VlanRow, VniRow } from './number-rows.ts';

const number = wholeNumber();

/** A name isn't broken over lines. */
const Name = ({ children }: { readonly children: string }) => (
  <span className="whitespace-nowrap">{children}</span>
);

const standingColumn = <Row extends { readonly standing: Standing }>(): Column<Row> => ({
  key: 'pool',
  head: 'Pool',
  cell: ({ standing }) =>
    standing === undefined ? (
      <span className="whitespace-nowrap text-ink-3">no pool set</span>
    ) : standing === 'in a pool' ? (
      <Name>{standing}</Name>
    ) : (
      <span className="font-semibold whitespace-nowrap text-degr">{standing}</span>
    ),
  sortBy: ({ standing }) => standing,
});

const heldColumn = <Row extends { readonly alsoHeldBy: string }>(): Column<Row> => ({
  key: 'held',
  head: 'Also held by',
  cell: ({ alsoHeldBy }) =>
    alsoHeldBy === '' ? (
      <span className="text-ink-3">nobody else</span>
    ) : (
      <span className="font-semibold text-red">{alsoHeldBy}</span>
    ),
  sortBy: ({ alsoHeldBy }) => (alsoHeldBy === '' ? undefined : alsoHeldBy),
  text: ({ alsoHeldBy }) => alsoHeldBy,
});

interface TableProps<Row> {
  readonly rows: readonly Row[];
  readonly selectedId: string | undefined;
  readonly onSelect: (id: string) => void;
  readonly beside?: ReactNode;
}

const vniColumn = (end: 'a' | 'b', head: string): Column<VniRow> => ({
  key: `vni-${end}`,
  head,
  align: 'right',
  widthPx: 150,
  cell: (row) => (
    <InlineField
      label={`VNI of ${row.name} at ${row[end].device}`}
      path={['tunnels', row.id, end, 'vni']}
      writing={number}
      alignRight
    />
  ),
  sortBy: (row) => row[end].vni,
});

const vniColumns: readonly Column<VniRow>[] = [
  {
    key: 'name',
    head: 'Tunnel',
    cell: (row) => <span className="font-semibold">{row.name}</span>,
    sortBy: (row) => row.name,
  },
  {
    key: 'carries',
    head: 'Carries',
    cell: (row) =>
      row.letters.length === 0 ? (
        <span className="text-ink-3">nothing yet</span>
      ) : (
        <span className="flex gap-4">
          {row.letters.map((letter) => (
            <SegmentSwatch key={letter} letter={letter} cordPx={0} />
          ))}
        </span>
      ),
    sortBy: (row) => row.letters.join(' '),
  },
  { key: 'from', head: 'From', cell: (row) => <Name>{row.a.device}</Name>, sortBy: (row) => row.a.device },
  vniColumn('a', 'VNI, from end'),
  { key: 'to', head: 'To', cell: (row) => <Name>{row.b.device}</Name>, sortBy: (row) => row.b.device },
  vniColumn('b', 'VNI, to end'),
  {
    key: 'udp',
    head: 'UDP ports',
    optional: true,
    cell: (row) => `${row.a.udpPort ?? 4789}, ${row.b.udpPort ?? 4789}`,
    sortBy: (row) => row.a.udpPort ?? 4789,
    text: (row) => `${row.a.udpPort ?? 4789} ${row.b.udpPort ?? 4789}`,
  },
  standingColumn(),
  heldColumn(),
];

/** VNIs of all tunnels, both ends side by side. */
export function VniTable({ rows, selectedId, onSelect, beside }: TableProps<VniRow>) {
  return (
    <WorkTable
      caption="VNIs"
      columns={vniColumns}
      rows={rows}
      rowKey={(row) => row.id}
      selectedKey={selectedId}
      onSelect={(row) => onSelect(row.id)}
      view={useTableView('vnis')}
      filterLabel="Tunnel, device or VNI"
      beside={beside}
      empty={
        <EmptyState className="m-12" title="No tunnel yet">
          A VNI names a tunnel at its endpoint, the same number at both ends. Draw a tunnel between two
          loopback endpoints on the sheet and it gets the lowest free one.
        </EmptyState>
      }
    />
  );
}

const addressColumn = (family: 'ipv4' | 'ipv6', head: string): Column<LoopbackRow> => ({
  key: family,
  head,
  widthPx: family === 'ipv4' ? 170 : 210,
  cell: (row) => (
    <InlineField
      label={`${head} address of ${row.name} on ${row.device}`}
      path={['endpoints', row.id, family]}
    />
  ),
  sortBy: (row) => row[family],
});

const loopbackColumns: readonly Column<LoopbackRow>[] = [
  {
    key: 'name',
    head: 'Loopback endpoint',
    cell: (row) => <span className="font-semibold">{row.name}</span>,
    sortBy: (row) => row.name,
  },
  { key: 'device', head: 'Device', cell: (row) => <Name>{row.device}</Name>, sortBy: (row) => row.device },
  { key: 'site', head: 'Site', cell: (row) => row.site, sortBy: (row) => row.site },
  addressColumn('ipv4', 'IPv4'),
  addressColumn('ipv6', 'IPv6'),
  {
    key: 'tunnels',
    head: 'Tunnels',
    align: 'right',
    cell: (row) => row.tunnels,
    sortBy: (row) => row.tunnels,
  },
  standingColumn(),
  heldColumn(),
];

/** Addresses of all loopback endpoints. */
export function LoopbackTable({ rows, selectedId, onSelect, beside }: TableProps<LoopbackRow>) {
  return (
    <WorkTable
      caption="Loopback addresses"
      columns={loopbackColumns}
      rows={rows}
      rowKey={(row) => row.id}
      selectedKey={selectedId}
      onSelect={(row) => onSelect(row.id)}
      view={useTableView('loopbacks')}
      filterLabel="Endpoint, device or address"
      beside={beside}
      empty={
        <EmptyState className="m-12" title="No loopback endpoint yet">
          Tunnels end on loopback addresses of the gateways, which the underlay only has to route. Drop a ring
          on a firewall or an HA pair on the sheet and it gets the lowest free address.
        </EmptyState>
      }
    />
  );
}

const vlanColumns: readonly Column<VlanRow>[] = [
  segmentColumn(),
  ...siteColumns<VlanRow>(),
  standingColumn(),
  heldColumn(),
];

/** VLANs and subnets of all segments at all their sites. */
export function VlanTable({ rows, selectedId, onSelect, beside }: TableProps<VlanRow>) {
  return (
    <WorkTable
      caption="VLANs and subnets"
      columns={vlanColumns}
      rows={rows}
      rowKey={(row) => row.id}
      selectedKey={rows.find((row) => row.segment === selectedId)?.id}
      onSelect={(row) => onSelect(row.segment)}
      view={useTableView('vlans')}
      filterLabel="Segment, site or VLAN"
      beside={beside}
      empty={
        <EmptyState className="m-12" title="No segment lands anywhere yet">
          A segment has a VLAN at each of its sites, the same one or not. Say on the page Segments where it
          lands.
        </EmptyState>
      }
    />
  );
}
