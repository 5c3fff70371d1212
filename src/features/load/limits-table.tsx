import type { ReactNode } from 'react';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import { Unknown } from '../../canvas/inspector/fields.tsx';
import { classNames } from '../../lib/class-names.ts';
import type { LimitGroup, LimitRow } from './limit-rows.ts';
import { mostWords, roomWords, shareWords, uncountedWords, usedWords } from './limit-words.ts';
import { LoadBar } from './load-bar.tsx';

const groupWords: Readonly<Record<LimitGroup, string>> = {
  tunnels: 'tunnel',
  gateways: 'gateway',
  transports: 'transport',
  cables: 'port or cable',
};

const known = (words: string): ReactNode => (words === 'not known' ? <Unknown word={words} /> : words);

const columns: readonly Column<LimitRow>[] = [
  {
    key: 'name',
    head: 'Carries',
    cell: ({ name, way }) => (
      <>
        <span className="font-semibold whitespace-nowrap">{name}</span>{' '}
        <span className="whitespace-nowrap text-ink-2">{way}</span>
      </>
    ),
    sortBy: ({ name }) => name,
    text: ({ name, way }) => [name, way].filter(Boolean).join(' '),
  },
  {
    key: 'what',
    head: 'Limit',
    cell: ({ what }) => <span className="block min-w-120">{what}</span>,
    sortBy: ({ what }) => what,
  },
  {
    key: 'bar',
    head: 'Load in the limit',
    cell: (row) => <LoadBar row={row} />,
    text: shareWords,
    widthPx: 206,
  },
  {
    key: 'used',
    head: 'Used',
    align: 'right',
    highestFirst: true,
    cell: (row) => (
      <>
        {row.own === undefined ? (
          known(usedWords(row))
        ) : (
          <>
            {usedWords({ ...row, used: row.own })}
            {row.own !== row.used && (
              <span className="block text-note whitespace-nowrap text-ink-2">of {usedWords(row)} used</span>
            )}
          </>
        )}
        {row.uncounted.length > 0 && row.used !== undefined && (
          <span className="block text-note text-ink-2">{uncountedWords(row)}</span>
        )}
      </>
    ),
    sortBy: ({ own, used }) => own ?? used,
    text: (row) => usedWords(row.own === undefined ? row : { ...row, used: row.own }),
  },
  {
    key: 'most',
    head: 'Of',
    align: 'right',
    highestFirst: true,
    cell: (row) => <span className="whitespace-nowrap">{known(mostWords(row))}</span>,
    sortBy: ({ most }) => most,
    text: mostWords,
  },
  {
    key: 'share',
    head: 'Share',
    align: 'right',
    highestFirst: true,
    cell: (row) => <span className="whitespace-nowrap">{known(shareWords(row))}</span>,
    sortBy: ({ sharePerMillion }) => sharePerMillion,
    text: shareWords,
  },
  {
    key: 'room',
    head: 'Headroom',
    cell: (row) => (
      <span
        className={classNames(
          'whitespace-nowrap',
          row.times !== undefined && row.times < 1 && 'font-semibold text-degr',
        )}
      >
        {known(roomWords(row))}
      </span>
    ),
    sortBy: ({ times, most, used }) =>
      most === undefined || used === undefined ? undefined : (times ?? Infinity),
    text: roomWords,
  },
  {
    key: 'group',
    head: 'Kind',
    cell: ({ group }) => groupWords[group],
    sortBy: ({ group }) => groupWords[group],
    optional: true,
  },
  {
    key: 'used-exactly',
    head: 'Used, bit/s or packets/s',
    align: 'right',
    highestFirst: true,
    cell: ({ own, used }) => own ?? used ?? '–',
    sortBy: ({ own, used }) => own ?? used,
    optional: true,
  },
  {
    key: 'most-exactly',
    head: 'Of, bit/s or packets/s',
    align: 'right',
    highestFirst: true,
    cell: ({ most }) => most ?? '–',
    sortBy: ({ most }) => most,
    optional: true,
  },
];

interface LimitsTableProps {
  readonly rows: readonly LimitRow[];
  readonly chosen: string | undefined;
  readonly onChoose: (row: LimitRow) => void;
  readonly before: ReactNode;
}

/** What everything carries, in the limit that it comes up against: a pipe for the eye, figures beside it. */
export function LimitsTable({ rows, chosen, onChoose, before }: LimitsTableProps) {
  return (
    <WorkTable
      caption="Load in its limits"
      filterLabel="Name or limit"
      before={before}
      columns={columns}
      rows={rows}
      rowKey={({ key }) => key}
      view={useTableView('limits')}
      selectedKey={chosen}
      onSelect={onChoose}
      fill
      empty={<p className="px-10 py-8 text-base text-ink-2">No demand comes by anything of this kind.</p>}
    />
  );
}
