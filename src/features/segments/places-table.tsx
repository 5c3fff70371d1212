import { segmentColumn, siteColumns } from '../../canvas/inspector/segment-columns.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import { landingWords, type PlaceRow } from './segment-rows.ts';

const columns: readonly Column<PlaceRow>[] = [
  segmentColumn(),
  ...siteColumns<PlaceRow>(),
  {
    key: 'hosts',
    head: 'Hosts',
    align: 'right',
    widthPx: 70,
    cell: (row) => row.hosts,
    sortBy: (row) => row.hosts,
    text: (row) => String(row.hosts),
  },
  {
    key: 'landing',
    head: 'Joined to the others',
    cell: (row) =>
      row.landing.kind === 'joined' ? (
        landingWords(row.landing)
      ) : (
        <span className={row.landing.kind === 'parted' ? 'font-semibold text-red' : 'text-ink-2'}>
          {landingWords(row.landing)}
        </span>
      ),
    sortBy: (row) => landingWords(row.landing),
    text: (row) => landingWords(row.landing),
  },
];

/** Where each segment lands, VLAN and subnets typed straight into their rows. */
export function PlacesTable({ rows }: { readonly rows: readonly PlaceRow[] }) {
  return (
    <WorkTable
      view={useTableView('places')}
      filterLabel="Segment, site or VLAN"
      caption="Where the segments land"
      columns={columns}
      rows={rows}
      rowKey={(row) => row.key}
      empty={
        <p className="p-14 text-ink-2">
          No segment lands anywhere yet. Select one above and say at which sites it lands.
        </p>
      }
    />
  );
}
