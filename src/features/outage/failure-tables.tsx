import { useMemo, type ReactNode } from 'react';
import { SeverityShape } from '../../components/severity-mark.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Failover } from '../../engine/outage/failovers.ts';
import type { PairOfFailures } from '../../engine/outage/pairs-of-failures.ts';
import type { SegmentCut } from '../../engine/outage/smallest-segment-cuts.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { failedKind, failedName, failedText } from './failable.ts';
import type { FailureSummary } from './failure-run.ts';
import { associationWords, leftBehindWords, movesWords, takesWords } from './failover-words.ts';

interface FailureTableProps<Row> {
  readonly design: Design;
  readonly rows: readonly Row[];
  readonly before: ReactNode;
  readonly beside?: ReactNode;
  /** What has failed, so that the row it belongs to shows. */
  readonly failed: readonly ElementRef[];
  readonly onFail: (failed: readonly ElementRef[]) => void;
  readonly empty: ReactNode;
}

const letters = (design: Design, segments: readonly string[]): readonly string[] =>
  segments
    .map((id) => design.segments[id]?.letter ?? id)
    .sort((x, y) => x.length - y.length || (x < y ? -1 : 1));

const mostLetters = 8;
const lettersShown = (all: readonly string[]): string =>
  all.length === 0
    ? '–'
    : all.length <= mostLetters
      ? all.join(', ')
      : `${all.slice(0, mostLetters - 2).join(', ')} and ${all.length - mostLetters + 2} more`;

const Harm = ({ pairs }: { readonly pairs: number }) => (
  <span className="inline-flex items-center gap-6 whitespace-nowrap">
    {pairs > 0 && <SeverityShape severity="degrading" size={13} />}
    {pairs === 0 ? 'nobody' : `${pairs} ${pairs === 1 ? 'pair' : 'pairs'}`}
  </span>
);

/** Everything that can fail alone, the most harmful first; a press fails it on the sheet. */
export function SinglesTable({ design, rows, failed, onFail, ...table }: FailureTableProps<FailureSummary>) {
  const columns = useMemo(
    (): readonly Column<FailureSummary>[] => [
      {
        key: 'name',
        head: 'Fails',
        cell: ({ element }) => (
          <span className="font-semibold whitespace-nowrap">{failedName(design, element)}</span>
        ),
        sortBy: ({ element }) => failedName(design, element),
      },
      {
        key: 'kind',
        head: 'What it is',
        cell: ({ element }) => failedKind(design, element),
        sortBy: ({ element }) => failedKind(design, element),
      },
      {
        key: 'parts',
        head: 'Parts',
        highestFirst: true,
        cell: ({ pairCount }) => <Harm pairs={pairCount} />,
        sortBy: ({ pairCount }) => pairCount,
      },
      {
        key: 'single',
        head: 'Single point',
        cell: ({ pairCount }) => (pairCount > 0 ? 'yes' : 'no'),
        sortBy: ({ pairCount }) => (pairCount > 0 ? 'yes' : 'no'),
      },
      {
        key: 'cut-off',
        head: 'Hosts cut off',
        align: 'right',
        highestFirst: true,
        cell: ({ cutOff }) => cutOff,
        sortBy: ({ cutOff }) => cutOff,
      },
      {
        key: 'gone',
        head: 'Out of service with it',
        align: 'right',
        highestFirst: true,
        cell: ({ gone }) => gone,
        sortBy: ({ gone }) => gone,
      },
      {
        key: 'tunnels',
        head: 'Tunnels down',
        align: 'right',
        highestFirst: true,
        cell: ({ tunnelsDown }) => tunnelsDown,
        sortBy: ({ tunnelsDown }) => tunnelsDown,
      },
      {
        key: 'segments',
        head: 'Segments',
        cell: ({ segments }) => lettersShown(letters(design, segments)),
        sortBy: ({ segments }) => segments.length,
        highestFirst: true,
        text: ({ segments }) => letters(design, segments).join(' '),
      },
    ],
    [design],
  );
  return (
    <WorkTable
      {...table}
      caption="Every single failure"
      filterLabel="Name or kind"
      columns={columns}
      rows={rows}
      rowKey={({ element }) => elementKey(element)}
      view={useTableView('failures')}
      selectedKey={failedText(failed)}
      onSelect={({ element }) => onFail([element])}
      fill
    />
  );
}

const pairKey = ({ elements }: PairOfFailures): string => failedText(elements);

/** Two that part more together than added up. */
export function PairsTable({ design, rows, failed, onFail, ...table }: FailureTableProps<PairOfFailures>) {
  const columns = useMemo((): readonly Column<PairOfFailures>[] => {
    const name = (at: 0 | 1) => (row: PairOfFailures) => failedName(design, row.elements[at]);
    const kind = (at: 0 | 1) => (row: PairOfFailures) => failedKind(design, row.elements[at]);
    return [
      { key: 'first', head: 'This', cell: (row) => <b>{name(0)(row)}</b>, sortBy: name(0) },
      { key: 'first-kind', head: 'What it is', cell: kind(0), sortBy: kind(0) },
      { key: 'second', head: 'With that', cell: (row) => <b>{name(1)(row)}</b>, sortBy: name(1) },
      { key: 'second-kind', head: 'What that is', cell: kind(1), sortBy: kind(1) },
      {
        key: 'parts',
        head: 'Part together',
        highestFirst: true,
        cell: ({ pairCount }) => <Harm pairs={pairCount} />,
        sortBy: ({ pairCount }) => pairCount,
      },
      {
        key: 'alone',
        head: 'Each alone',
        cell: ({ alone }) => `${alone[0]} and ${alone[1]}`,
        sortBy: ({ alone }) => alone[0] + alone[1],
        text: ({ alone }) => `${alone[0]} and ${alone[1]}`,
      },
    ];
  }, [design]);
  return (
    <WorkTable
      {...table}
      caption="Pairs of failures"
      filterLabel="Name or kind"
      columns={columns}
      rows={rows}
      rowKey={pairKey}
      view={useTableView('pairs')}
      selectedKey={failedText(failed)}
      onSelect={({ elements }) => onFail(elements)}
      fill
    />
  );
}

/** What happens when a forwarding member of each pair is lost. */
export function FailoversTable({ design, rows, failed, onFail, ...table }: FailureTableProps<Failover>) {
  const refOf = ({ device, lost }: Failover): ElementRef => ({
    collection: 'devices',
    id: device,
    member: lost,
  });
  const columns = useMemo((): readonly Column<Failover>[] => {
    const lost = (row: Failover): string => failedName(design, refOf(row));
    const active = ({ device, active: member }: Failover): string =>
      failedName(design, { collection: 'devices', id: device, member });
    return [
      { key: 'lost', head: 'Lost', cell: (row) => <b>{lost(row)}</b>, sortBy: lost },
      {
        key: 'pair',
        head: 'Of pair',
        cell: ({ device }) => nameOf(design, { collection: 'devices', id: device }),
        sortBy: ({ device }) => nameOf(design, { collection: 'devices', id: device }),
      },
      { key: 'active', head: 'Takes over', cell: active, sortBy: active },
      {
        key: 'takes',
        head: 'Frames pass again after',
        highestFirst: true,
        cell: (row) => takesWords(row),
        sortBy: ({ totalUs }) => totalUs,
        text: takesWords,
      },
      {
        key: 'moves',
        head: 'Carried on',
        cell: (row) => movesWords(design, row),
        text: (row) => movesWords(design, row),
      },
      {
        key: 'left',
        head: 'Left behind',
        cell: (row) => leftBehindWords(design, row) || 'nothing',
        text: (row) => leftBehindWords(design, row) || 'nothing',
      },
      {
        key: 'associations',
        head: 'IPsec associations',
        cell: (row) => (
          <ul>
            {associationWords(design, row).map((words) => (
              <li key={words}>{words}</li>
            ))}
          </ul>
        ),
        text: (row) => associationWords(design, row).join('; '),
      },
      {
        key: 'parts',
        head: 'Parts',
        highestFirst: true,
        cell: ({ outage }) => <Harm pairs={outage.pairCount} />,
        sortBy: ({ outage }) => outage.pairCount,
      },
    ];
  }, [design]);
  return (
    <WorkTable
      {...table}
      caption="Failover of each pair"
      filterLabel="Pair or what it carries"
      columns={columns}
      rows={rows}
      rowKey={(row) => elementKey(refOf(row))}
      view={useTableView('failovers')}
      selectedKey={failedText(failed)}
      onSelect={(row) => onFail([refOf(row)])}
      fill
    />
  );
}

/** A segment and what parts it. */
interface CutRow {
  readonly segment: string;
  readonly cut?: SegmentCut;
}

/** The smallest cut of every segment: how few cables and tunnels have to fail for it to part. */
export function CutsTable({ design, rows, failed, onFail, ...table }: FailureTableProps<SegmentCut>) {
  const cuts = useMemo((): readonly CutRow[] => {
    const found = new Map(rows.map((cut) => [cut.segment, cut]));
    return Object.keys(design.segments)
      .sort((x, y) => (design.segments[x]!.letter < design.segments[y]!.letter ? -1 : 1))
      .map((segment) => ({ segment, ...(found.has(segment) ? { cut: found.get(segment)! } : {}) }));
  }, [design, rows]);
  const columns = useMemo((): readonly Column<CutRow>[] => {
    const words = ({ cut }: CutRow): string =>
      cut === undefined
        ? 'no cable or tunnel parts it'
        : cut.elements.map((ref) => failedName(design, ref)).join(', ');
    const segment = ({ segment: id }: CutRow): string =>
      `${design.segments[id]!.letter} ${design.segments[id]!.name}`;
    return [
      { key: 'segment', head: 'Segment', cell: (row) => <b>{segment(row)}</b>, sortBy: segment },
      {
        key: 'count',
        head: 'How many must fail',
        align: 'right',
        cell: ({ cut }) => cut?.elements.length ?? '–',
        sortBy: ({ cut }) => cut?.elements.length,
      },
      { key: 'cut', head: 'Which', cell: words, sortBy: words },
      {
        key: 'parts',
        head: 'Parts',
        highestFirst: true,
        cell: ({ cut }) => <Harm pairs={cut?.pairCount ?? 0} />,
        sortBy: ({ cut }) => cut?.pairCount,
      },
    ];
  }, [design]);
  return (
    <WorkTable
      {...table}
      caption="Smallest cut of each segment"
      filterLabel="Segment, cable or tunnel"
      columns={columns}
      rows={cuts}
      rowKey={({ segment, cut }) => (cut === undefined ? segment : failedText(cut.elements))}
      view={useTableView('cuts')}
      selectedKey={failedText(failed)}
      onSelect={({ cut }) => {
        if (cut !== undefined) onFail(cut.elements);
      }}
      fill
    />
  );
}
