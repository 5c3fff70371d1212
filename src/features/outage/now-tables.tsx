import { useMemo, type ReactNode } from 'react';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { Design } from '../../engine/model/design.ts';
import { reachWords, type PartedRow, type SiteRow } from './outage-facts.ts';
import { ReachMark } from './reach-mark.tsx';

const columnsAtFirst = 10;

const lostWords = (lostPairs: number, pairs: number): string =>
  lostPairs === 0 ? '' : `${lostPairs} of ${pairs}`;

const siteColumns = (design: Design, rows: readonly SiteRow[]): readonly Column<SiteRow>[] => {
  const lost = new Map<string, number>();
  for (const { reach } of rows)
    for (const [segment, { lostPairs }] of reach) lost.set(segment, (lost.get(segment) ?? 0) + lostPairs);
  // Those that lost something come first: of many segments only so many are shown.
  const segments = [...lost.keys()].sort(
    (x, y) =>
      Number(lost.get(y)! > 0) - Number(lost.get(x)! > 0) ||
      (design.segments[x]!.letter < design.segments[y]!.letter ? -1 : 1),
  );
  return [
    {
      key: 'site',
      head: 'Site',
      cell: ({ name }) => <span className="font-semibold">{name}</span>,
      sortBy: ({ name }) => name,
    },
    {
      key: 'lost',
      head: 'Pairs lost',
      align: 'right',
      highestFirst: true,
      cell: ({ lostPairs }) => lostPairs,
      sortBy: ({ lostPairs }) => lostPairs,
    },
    ...segments.map((id, at): Column<SiteRow> => {
      const { letter, name } = design.segments[id]!;
      return {
        key: id,
        head: `${letter} ${name}`,
        cell: ({ reach }) => {
          const own = reach.get(id);
          return own === undefined ? (
            <span className="text-ink-3">not there</span>
          ) : (
            <ReachMark reach={own.reach} lost={lostWords(own.lostPairs, own.pairs)} />
          );
        },
        sortBy: ({ reach }) => reach.get(id)?.lostPairs,
        highestFirst: true,
        text: ({ reach }) => {
          const own = reach.get(id);
          return own === undefined
            ? 'not there'
            : [reachWords[own.reach], lostWords(own.lostPairs, own.pairs)].filter(Boolean).join(' ');
        },
        optional: at >= columnsAtFirst,
      };
    }),
  ];
};

/** Site by site and segment by segment, who still reaches the other sites. */
export function SitesTable({
  design,
  rows,
  before,
}: {
  readonly design: Design;
  readonly rows: readonly SiteRow[];
  readonly before: ReactNode;
}) {
  const columns = useMemo(() => siteColumns(design, rows), [design, rows]);
  return (
    <WorkTable
      caption="What each site still reaches"
      filterLabel="Site, or how it stands"
      before={before}
      columns={columns}
      rows={rows}
      rowKey={({ site }) => site}
      view={useTableView('sites')}
      initialSorting={{ key: 'lost', descending: true }}
      fill
      empty={
        <p className="px-10 py-8 text-base text-ink-2">
          No segment has a host at a site yet, so nothing can be parted.
        </p>
      }
    />
  );
}

const partedColumns: readonly Column<PartedRow>[] = [
  {
    key: 'segment',
    head: 'Segment',
    cell: ({ letter, segment }) => (
      <span className="flex items-center gap-8 whitespace-nowrap">
        <SegmentSwatch letter={letter} />
        {segment}
      </span>
    ),
    sortBy: ({ letter }) => letter,
    text: ({ letter, segment }) => `${letter} ${segment}`,
  },
  {
    key: 'from',
    head: 'Host',
    cell: ({ from }) => <span className="font-semibold">{from}</span>,
    sortBy: ({ from }) => from,
  },
  { key: 'from-site', head: 'At', cell: ({ fromSite }) => fromSite, sortBy: ({ fromSite }) => fromSite },
  {
    key: 'to',
    head: 'No longer reaches',
    cell: ({ to }) => <span className="font-semibold">{to}</span>,
    sortBy: ({ to }) => to,
  },
  { key: 'to-site', head: 'At (far)', cell: ({ toSite }) => toSite, sortBy: ({ toSite }) => toSite },
  { key: 'ways', head: 'Ways', cell: ({ ways }) => ways, sortBy: ({ ways }) => ways },
];

/** Which hosts can no longer reach which. */
export function PartedTable({
  rows,
  before,
  empty,
}: {
  readonly rows: readonly PartedRow[];
  readonly before: ReactNode;
  readonly empty: string;
}) {
  return (
    <WorkTable
      caption="Hosts that are parted"
      filterLabel="Host, site or segment"
      before={before}
      columns={partedColumns}
      rows={rows}
      rowKey={({ key }) => key}
      view={useTableView('parted')}
      fill
      empty={<p className="px-10 py-8 text-base text-ink-2">{empty}</p>}
    />
  );
}
