import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { Column } from '../../components/table-view.ts';
import { textList, wholeNumber } from '../../lib/written-value.ts';
import { InlineField } from './inline-field.tsx';

interface OfSegment {
  readonly letter: string;
  readonly segmentName: string;
}
/** A segment at one of its sites. */
interface AtSite extends OfSegment {
  readonly segment: string;
  readonly site: string;
  readonly siteName: string;
  readonly vlan?: number | undefined;
  readonly subnets: readonly string[];
}

const number = wholeNumber();

/** The segment that a row is about, by its letter. */
export const segmentColumn = <Row extends OfSegment>(): Column<Row> => ({
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
});

/** Where a segment lands, with its VLAN and its subnets typed straight into the row. */
export const siteColumns = <Row extends AtSite>(): readonly Column<Row>[] => [
  { key: 'site', head: 'Site', cell: (row) => row.siteName, sortBy: (row) => row.siteName },
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
  },
  {
    key: 'subnets',
    head: 'Subnets',
    widthPx: 240,
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
];
