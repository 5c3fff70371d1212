import { useMemo } from 'react';
import { Button } from '../../components/button.tsx';
import { DataTable } from '../../components/data-table.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { Column } from '../../components/table-view.ts';
import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { allocateUnset, type Allocated } from '../../engine/numbering/allocate-unset.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

interface AllocateDialogProps {
  readonly design: Design;
  readonly context: NumberingContext;
  readonly onAllocate: (patch: MergePatch, count: number) => void;
  readonly onClose: () => void;
}

const whatOf = (design: Design, { ref, path }: Allocated): string => {
  const tunnel = ref.collection === 'tunnels' ? design.tunnels[ref.id] : undefined;
  if (tunnel !== undefined) {
    const { endpoint } = tunnel[path[0] as 'a' | 'b'];
    return `VNI at ${design.devices[design.endpoints[endpoint]!.device]!.name}`;
  }
  if (ref.collection === 'segments') return `VLAN at ${design.sites[path[1]!]!.name}`;
  return path[0] === 'ipv4' ? 'IPv4 address' : 'IPv6 address';
};

/** Shows which number each unnumbered thing would get, and gives them all as one step. */
export function AllocateDialog({ design, context, onAllocate, onClose }: AllocateDialogProps) {
  const { patch, allocated, problems } = useMemo(() => allocateUnset(design, context), [design, context]);
  const columns: readonly Column<Allocated>[] = [
    {
      key: 'of',
      head: 'Gets a number',
      cell: ({ ref }) => nameOf(design, ref),
      sortBy: ({ ref }) => nameOf(design, ref),
    },
    {
      key: 'what',
      head: 'What',
      cell: (each) => whatOf(design, each),
      sortBy: (each) => whatOf(design, each),
    },
    {
      key: 'value',
      head: 'Number',
      align: 'right',
      cell: ({ value }) => value,
      sortBy: ({ value }) => value,
    },
  ];
  const count = allocated.length;
  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onClose();
      }}
      title="Allocate what has no number"
      widthPx={620}
      footer={
        <>
          <Button onClick={onClose}>{count === 0 ? 'Close' : 'Leave them unset'}</Button>
          {count > 0 && (
            <Button kind="primary" onClick={() => onAllocate(patch, count)}>
              {count === 1 ? 'Give this number' : `Give these ${count} numbers`}
            </Button>
          )}
        </>
      }
    >
      {count > 0 && (
        <DataTable
          caption="Numbers that would be given"
          columns={columns}
          rows={allocated}
          rowKey={({ ref, path }) => `${ref.collection}/${ref.id}/${path.join('/')}`}
          className="max-h-[46dvh]"
        />
      )}
      {count === 0 && problems.length === 0 && (
        <p className="text-base text-ink-2">
          Everything in this design has its number: every tunnel its VNI, every endpoint its address, every
          segment its VLAN at each site.
        </p>
      )}
      {problems.map(({ field, expected }) => (
        <ErrorNotice key={field} className="mt-10">
          {`Not every one gets a number: expected ${expected.replace(/^expected /, '')}.`}
        </ErrorNotice>
      ))}
    </Dialog>
  );
}
