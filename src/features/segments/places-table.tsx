import { InlineField } from '../../canvas/inspector/inline-field.tsx';
import { textList, wholeNumber } from '../../lib/written-value.ts';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import { landingWords, type PlaceRow } from './segment-rows.ts';

const number = wholeNumber();

const columns: readonly Column<PlaceRow>[] = [
  {
    key: 'segment',
    head: 'Segment',
    cell: (row) => (
      <span className="flex items-center gap-10">
        <SegmentSwatch letter={row.letter} />
        {row.segmentName}
      </span>
    ),
    sortBy: (row) => row.letter,
    text: (row) => `${row.letter} ${row.segmentName}`,
  },
  {
    key: 'site',
    head: 'Site',
    cell: (row) => row.siteName,
    sortBy: (row) => row.siteName,
    text: (row) => row.siteName,
  },
  {
    key: 'vlan',
    head: 'VLAN',
    align: 'right',
    widthPx: 96,
    cell: (row) => (
      <InlineField
        label={`VLAN of ${row.segmentName} at ${row.siteName}`}
        path={['segments', row.segment, 'sites', row.site, 'vlan']}
        writing={number}
        alignRight
      />
    ),
    sortBy: (row) => row.vlan,
    text: (row) => String(row.vlan ?? ''),
  },
  {
    key: 'subnets',
    head: 'Subnets',
    widthPx: 260,
    cell: (row) => (
      <InlineField
        label={`Subnets of ${row.segmentName} at ${row.siteName}`}
        path={['segments', row.segment, 'sites', row.site, 'subnets']}
        writing={textList}
      />
    ),
    sortBy: (row) => row.subnets[0],
    text: (row) => row.subnets.join(' '),
  },
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
