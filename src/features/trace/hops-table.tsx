import { useMemo } from 'react';
import type { Column } from '../../components/table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { HopRow } from './hop-rows.ts';
import type { TraceResult } from './trace-result.ts';

/** A frame's bytes from the outside in, as one text: 'Eth 14 + IP 20 + 1480'. */
export const barText = ({ bar }: HopRow): string =>
  bar === undefined
    ? ''
    : [
        ...bar.before.map(({ name, bytes }) => `${name} ${bytes}`),
        String(bar.payloadBytes),
        ...bar.after.map(({ name, bytes }) => `${name} ${bytes}`),
      ].join(' + ');

const overOf = ({ bar }: HopRow): number | undefined =>
  bar?.pipeBytes === undefined ? undefined : bar.ipPacketBytes - bar.pipeBytes;

export const hopColumns = (result: TraceResult): readonly Column<HopRow>[] => {
  const decided = ({ step, kind }: HopRow): string =>
    kind === 'inside' ? '' : result.trace.steps[step]!.decisions.map(({ words }) => words).join('; ');
  return [
    {
      key: 'number',
      head: 'Hop',
      cell: ({ number }) => number,
      sortBy: ({ number }) => number,
      align: 'right',
    },
    { key: 'title', head: 'Where', widthPx: 150, cell: ({ title }) => title, text: ({ title }) => title },
    { key: 'note', head: 'On the wire', widthPx: 150, cell: ({ note }) => note, text: ({ note }) => note },
    { key: 'decided', head: 'Decided', cell: decided, text: decided },
    {
      key: 'packet',
      head: 'Packet, B',
      align: 'right',
      cell: ({ bar }) => bar?.ipPacketBytes,
      sortBy: ({ bar }) => bar?.ipPacketBytes,
    },
    {
      key: 'pipe',
      head: 'Pipe, B',
      align: 'right',
      cell: ({ bar }) => bar?.pipeBytes,
      sortBy: ({ bar }) => bar?.pipeBytes,
    },
    {
      key: 'over',
      head: 'Over, B',
      align: 'right',
      cell: (row) => {
        const over = overOf(row);
        return over !== undefined && over > 0 ? <span className="font-semibold text-red">{over}</span> : '';
      },
      text: (row) => Math.max(0, overOf(row) ?? 0),
      sortBy: overOf,
      highestFirst: true,
    },
    { key: 'layers', head: 'Bytes, from the outside in', widthPx: 230, cell: barText, text: barText },
    {
      key: 'end',
      head: 'End',
      cell: ({ leaf }) => leaf?.words,
      text: ({ leaf }) => leaf?.words ?? '',
    },
  ];
};

/** All hops in figures, to be searched, sorted and copied as CSV. */
export function HopsTable({ result, caption }: { readonly result: TraceResult; readonly caption: string }) {
  const own = useMemo(() => hopColumns(result), [result]);
  return (
    <div className="h-full min-h-0 bg-raise px-12 py-8">
      <WorkTable
        fill
        caption={caption}
        filterLabel="Find in the hops"
        columns={own}
        rows={result.hops}
        rowKey={({ key }) => key}
      />
    </div>
  );
}
