import { useMemo, useState } from 'react';
import { useNetwork } from '../canvas/inspector/carried-segments.tsx';
import { Inspector } from '../canvas/inspector/inspector.tsx';
import { Button } from '../components/button.tsx';
import { SegmentedChoice } from '../components/segmented-choice.tsx';
import { showToast } from '../components/toast.tsx';
import { networkOverlaps, numberClashes } from '../engine/numbering/number-clashes.ts';
import { AllocateDialog } from '../features/numbering/allocate-dialog.tsx';
import { ClashesList } from '../features/numbering/clashes-list.tsx';
import { loopbackRows, vlanRows, vniRows } from '../features/numbering/number-rows.ts';
import { LoopbackTable, VlanTable, VniTable } from '../features/numbering/number-tables.tsx';
import { PoolsSection } from '../features/numbering/pools-section.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useChecks } from '../workspace/checks-context.tsx';
import { useDesignPlace, useMayHere } from '../workspace/design-place.tsx';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';

const kinds = ['vnis', 'loopbacks', 'vlans'] as const;
type Kind = (typeof kinds)[number];
const collectionOf = { vnis: 'tunnels', loopbacks: 'endpoints', vlans: 'segments' } as const;

/** /designs/:designId/numbering?kind=…: every number of the design, where it comes from, who else holds it. */
export function NumberingPage() {
  const open = useOpenDesign();
  const network = useNetwork();
  const design = useOpenState((state) => state.document);
  const selection = useOpenState((state) => state.selection);
  const editable = useOpenState((state) => state.editable);
  const { numbering: context } = useChecks();
  const { workspaceId } = useDesignPlace();
  const maySetPools = useMayHere('pools.edit');
  const { valueOf, change } = useSearchValues();
  const [allocating, setAllocating] = useState(false);
  usePageTitle(`Numbering of ${design.meta.title}`);

  const kind: Kind = kinds.find((each) => each === valueOf('kind')) ?? 'vnis';
  const held = useMemo(
    () => ({
      design,
      network,
      context,
      clashes: numberClashes(design, context),
      overlaps: networkOverlaps(design, context),
    }),
    [design, network, context],
  );
  const vnis = useMemo(() => vniRows(held), [held]);
  const loopbacks = useMemo(() => loopbackRows(held), [held]);
  const vlans = useMemo(() => vlanRows(held), [held]);
  const [selected] = selection;
  const table = {
    selectedId:
      selection.length === 1 && selected?.collection === collectionOf[kind] ? selected.id : undefined,
    onSelect: (id: string) => open.select([{ collection: collectionOf[kind], id }]),
  };

  return (
    <div className="flex min-h-0 flex-1 max-lg:flex-col max-lg:overflow-y-auto">
      <main
        id="main"
        tabIndex={-1}
        className="flex min-w-0 flex-1 flex-col gap-20 overflow-y-auto px-28 pb-28 outline-none max-lg:overflow-visible max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 pt-12">
          <h1 className="text-page font-semibold">Numbering</h1>
          <SegmentedChoice
            label="Kind of number"
            value={kind}
            onChange={(next) => change({ kind: next === 'vnis' ? '' : next })}
            options={[
              { value: 'vnis', label: `VNIs ${vnis.length}` },
              { value: 'loopbacks', label: `Loopback addresses ${loopbacks.length}` },
              { value: 'vlans', label: `VLANs and subnets ${vlans.length}` },
            ]}
          />
          {editable && (
            <Button className="ml-auto" onClick={() => setAllocating(true)}>
              Allocate what is unset
            </Button>
          )}
        </div>
        <ClashesList design={design} clashes={held.clashes} overlaps={held.overlaps} />
        {kind === 'vnis' && <VniTable rows={vnis} {...table} />}
        {kind === 'loopbacks' && <LoopbackTable rows={loopbacks} {...table} />}
        {kind === 'vlans' && <VlanTable rows={vlans} {...table} />}
        <PoolsSection workspaceId={workspaceId} design={design} context={context} mayEdit={maySetPools} />
      </main>
      {selected !== undefined && <Inspector />}
      {allocating && (
        <AllocateDialog
          design={design}
          context={context}
          onClose={() => setAllocating(false)}
          onAllocate={(patch, count) => {
            setAllocating(false);
            const done = open.commit(count === 1 ? 'Allocate a number' : `Allocate ${count} numbers`, patch);
            showToast(
              done.ok
                ? {
                    tone: 'done',
                    text: count === 1 ? 'One number given.' : `${count} numbers given.`,
                    action: { label: 'Undo', onSelect: () => open.undo() },
                  }
                : { tone: 'failed', text: done.problems.map(({ expected }) => expected).join('; ') },
            );
          }}
        />
      )}
    </div>
  );
}
