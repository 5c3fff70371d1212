import { Button } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import { SeverityCounts } from '../../components/severity-mark.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { Finding } from '../../engine/rules/finding.ts';
import { countBySeverity } from '../../engine/rules/run-rules.ts';
import { joinedWords, type SegmentRow } from './segment-rows.ts';

interface SegmentsTableProps {
  readonly rows: readonly SegmentRow[];
  readonly findings: readonly Finding[];
  readonly selectedId: string | undefined;
  readonly onSelect: (id: string) => void;
  /** Absent for those who only read. */
  readonly onAdd: (() => void) | undefined;
}

const unknown = <span className="text-ink-3">not stated</span>;

/** All segments: what each needs, what it gets. */
export function SegmentsTable({ rows, findings, selectedId, onSelect, onAdd }: SegmentsTableProps) {
  const about = (id: string): readonly Finding[] =>
    findings.filter(({ elements }) => elements.some((ref) => ref.collection === 'segments' && ref.id === id));
  const columns: readonly Column<SegmentRow>[] = [
    {
      key: 'letter',
      head: 'Segment',
      cell: (row) => (
        <span className="flex items-center gap-10">
          <SegmentSwatch letter={row.letter} cordPx={30} />
          <span className="font-semibold">{row.name}</span>
        </span>
      ),
      sortBy: (row) => row.letter,
      text: (row) => `${row.letter} ${row.name}`,
    },
    {
      key: 'protocols',
      head: 'Must carry',
      cell: (row) => (row.protocols === '' ? unknown : row.protocols),
      sortBy: (row) => row.protocols,
      text: (row) => row.protocols,
    },
    {
      key: 'needed',
      head: 'MTU needed',
      align: 'right',
      cell: (row) => (row.neededBytes === undefined ? unknown : `${row.neededBytes} B`),
      sortBy: (row) => row.neededBytes,
      text: (row) => String(row.neededBytes ?? ''),
    },
    {
      key: 'fitting',
      head: 'Largest that fits',
      align: 'right',
      cell: (row) =>
        row.fittingBytes === undefined ? (
          <span className="text-ink-3">{row.tunnels === 0 ? 'no tunnel' : 'unknown'}</span>
        ) : row.neededBytes !== undefined && row.neededBytes > row.fittingBytes ? (
          <span className="font-semibold text-degr">
            {row.fittingBytes} B
            <span className="block text-note">{row.neededBytes - row.fittingBytes} B short</span>
          </span>
        ) : (
          `${row.fittingBytes} B`
        ),
      sortBy: (row) => row.fittingBytes,
      text: (row) => String(row.fittingBytes ?? ''),
    },
    {
      key: 'filtered',
      head: 'Filtered between sites',
      cell: (row) => (row.mustBeFiltered === undefined ? unknown : row.mustBeFiltered ? 'yes' : 'no'),
      sortBy: (row) => String(row.mustBeFiltered),
      text: (row) => (row.mustBeFiltered === undefined ? '' : row.mustBeFiltered ? 'yes' : 'no'),
    },
    {
      key: 'hosts',
      head: 'Hosts',
      align: 'right',
      cell: (row) =>
        row.hostsExpected === undefined ? row.hosts : `${row.hosts} of ${row.hostsExpected} expected`,
      sortBy: (row) => row.hosts,
      text: (row) => String(row.hosts),
    },
    {
      key: 'sites',
      head: 'Sites',
      align: 'right',
      cell: (row) => row.sites,
      sortBy: (row) => row.sites,
      text: (row) => String(row.sites),
    },
    {
      key: 'tunnels',
      head: 'Tunnels',
      align: 'right',
      cell: (row) => row.tunnels,
      sortBy: (row) => row.tunnels,
      text: (row) => String(row.tunnels),
    },
    {
      key: 'joined',
      head: 'Its places',
      cell: (row) =>
        row.joined === 'parted' ? (
          <span className="font-semibold text-red">{joinedWords[row.joined]}</span>
        ) : (
          joinedWords[row.joined]
        ),
      sortBy: (row) => joinedWords[row.joined],
      text: (row) => joinedWords[row.joined],
    },
    {
      key: 'findings',
      head: 'Findings',
      cell: (row) => <SeverityCounts counts={countBySeverity(about(row.id))} clear="none" />,
      sortBy: (row) => -about(row.id).length,
      text: (row) => String(about(row.id).length),
    },
  ];
  return (
    <WorkTable
      view={useTableView('segments')}
      filterLabel="Segment or protocol"
      caption="Segments"
      columns={columns}
      rows={rows}
      rowKey={(row) => row.id}
      selectedKey={selectedId}
      onSelect={(row) => onSelect(row.id)}
      empty={
        <EmptyState
          className="m-12"
          title="No segment yet"
          action={onAdd && <Button onClick={onAdd}>Add a segment</Button>}
        >
          A segment is one broadcast domain that has to reach from site to site, such as a ticketing VLAN. Say
          here what it must carry; the sheet then shows which tunnels do.
        </EmptyState>
      }
    />
  );
}
