import { useMemo, type ReactNode } from 'react';
import { Unknown } from '../../canvas/inspector/fields.tsx';
import { InlineField } from '../../canvas/inspector/inline-field.tsx';
import { rate } from '../../lib/rate-text.ts';
import { Icon } from '../../components/icon.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import type { Column } from '../../components/table-view.ts';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { Design } from '../../engine/model/design.ts';
import { durationText, lossText, rateText } from '../../lib/figure-texts.ts';
import { ceilingWords, type DemandWayRow } from './demand-ways.ts';

const said = <T,>(value: T | undefined, words: (value: T) => string): string =>
  value === undefined ? 'not known' : words(value);
const shown = (words: string): ReactNode => (words === 'not known' ? <Unknown word={words} /> : words);

const growthWords = (growth: number): string => `× ${Number(growth.toFixed(2))}`;

const timeWords = ({ isInTime, allowedUs }: DemandWayRow): string =>
  isInTime === undefined
    ? allowedUs === undefined
      ? 'none stated'
      : 'not known'
    : isInTime
      ? 'in time'
      : 'too late';

/** In time or too late, by shape and word. */
function InTime({ row }: { readonly row: DemandWayRow }) {
  if (row.isInTime === undefined) return <Unknown word={timeWords(row)} />;
  return (
    <span className="inline-flex items-center gap-5 whitespace-nowrap">
      {row.isInTime ? <Icon name="check" size={14} /> : <SeverityShape severity="degrading" size={13} />}
      {timeWords(row)}
    </span>
  );
}

const oneFlowWords = ({ reachable }: DemandWayRow): string => said(reachable?.oneFlow[0]?.limitBps, rateText);
const heldWords = (design: Design, { reachable }: DemandWayRow): string =>
  said(reachable?.oneFlow[0], (ceiling) => ceilingWords(design, ceiling));

const columnsFor = (design: Design): readonly Column<DemandWayRow>[] => [
  {
    key: 'name',
    head: 'Demand',
    cell: ({ name, letter, way }) => (
      <span className="flex items-center gap-8 whitespace-nowrap">
        <SegmentSwatch letter={letter} />
        <span className="font-semibold">{name}</span>
        <span className="text-ink-2">{way === 'forward' ? 'there' : 'back'}</span>
      </span>
    ),
    sortBy: ({ name, way }) => `${name} ${way}`,
    text: ({ name, way }) => `${name}, ${way === 'forward' ? 'there' : 'back'}`,
  },
  {
    key: 'segment',
    head: 'Segment',
    cell: ({ letter, segment }) => `${letter} ${segment}`,
    sortBy: ({ letter }) => letter,
    text: ({ letter, segment }) => `${letter} ${segment}`,
    optional: true,
  },
  { key: 'from', head: 'From', cell: ({ from }) => from, sortBy: ({ from }) => from, optional: true },
  { key: 'to', head: 'To', cell: ({ to }) => to, sortBy: ({ to }) => to, optional: true },
  {
    key: 'path',
    head: 'Path',
    cell: ({ path, direction }) => (
      <span className="flex min-w-180 items-center gap-5">
        {direction.state !== 'carried' && <SeverityShape severity="blocking" size={13} />}
        {path}
      </span>
    ),
    sortBy: ({ elements }) => elements.length,
    text: ({ path }) => path,
  },
  {
    key: 'rate',
    head: 'Rate',
    align: 'right',
    widthPx: 120,
    highestFirst: true,
    cell: ({ demand, way, name }) => (
      <span className="block min-w-90">
        <InlineField
          label={`Rate ${way === 'forward' ? 'there' : 'back'} of ${name}`}
          path={['demands', demand, way === 'forward' ? 'forwardBps' : 'reverseBps']}
          writing={rate}
          alignRight
        />
      </span>
    ),
    sortBy: ({ offeredBps }) => offeredBps,
    text: ({ offeredBps }) => said(offeredBps, rateText),
  },
  {
    key: 'grown',
    head: 'In the tunnel',
    align: 'right',
    highestFirst: true,
    cell: (row) => (
      <span className="whitespace-nowrap">
        {shown(said(row.grownBps, rateText))}{' '}
        {row.growth !== undefined && <span className="text-ink-2">{growthWords(row.growth)}</span>}
      </span>
    ),
    sortBy: ({ grownBps }) => grownBps,
    text: ({ grownBps }) => said(grownBps, rateText),
  },
  {
    key: 'growth',
    head: 'Growth',
    align: 'right',
    highestFirst: true,
    cell: ({ growth }) => shown(said(growth, growthWords)),
    sortBy: ({ growth }) => growth,
    text: ({ growth }) => (growth === undefined ? '' : Number(growth.toFixed(4))),
    optional: true,
  },
  {
    key: 'latency',
    head: 'Latency, one way',
    align: 'right',
    highestFirst: true,
    cell: ({ latencyUs, allowedUs }) => (
      <span className="whitespace-nowrap">
        {shown(said(latencyUs, durationText))}
        {allowedUs !== undefined && <span className="text-ink-2"> of {durationText(allowedUs)}</span>}
      </span>
    ),
    sortBy: ({ latencyUs }) => latencyUs,
    text: ({ latencyUs }) => said(latencyUs, durationText),
  },
  { key: 'time', head: 'Allowed', cell: (row) => <InTime row={row} />, sortBy: timeWords },
  {
    key: 'loss',
    head: 'Loss',
    align: 'right',
    highestFirst: true,
    cell: ({ lossPerMillion }) => shown(said(lossPerMillion, lossText)),
    sortBy: ({ lossPerMillion }) => lossPerMillion,
    text: ({ lossPerMillion }) => said(lossPerMillion, lossText),
    optional: true,
  },
  {
    key: 'one-flow',
    head: 'A single TCP flow',
    align: 'right',
    highestFirst: true,
    cell: (row) => <span className="whitespace-nowrap">{shown(oneFlowWords(row))}</span>,
    sortBy: ({ reachable }) => reachable?.oneFlow[0]?.limitBps,
    text: oneFlowWords,
  },
  {
    key: 'held',
    head: 'Held back by',
    cell: (row) => shown(heldWords(design, row)),
    sortBy: (row) => heldWords(design, row),
  },
];

interface DemandWaysTableProps {
  readonly design: Design;
  readonly rows: readonly DemandWayRow[];
  readonly chosen: string | undefined;
  readonly onChoose: (row: DemandWayRow) => void;
  readonly before: ReactNode;
  readonly beside: ReactNode;
}

/** Both ways of every demand: where they go, what they grow to, when they arrive and what TCP makes of it. */
export function DemandWaysTable({ design, rows, chosen, onChoose, before, beside }: DemandWaysTableProps) {
  const columns = useMemo(() => columnsFor(design), [design]);
  return (
    <WorkTable
      caption="Demands on their way"
      filterLabel="Demand, place or path"
      before={before}
      beside={beside}
      columns={columns}
      rows={rows}
      rowKey={({ key }) => key}
      view={useTableView('demands')}
      selectedKey={chosen}
      onSelect={onChoose}
      fill
    />
  );
}
