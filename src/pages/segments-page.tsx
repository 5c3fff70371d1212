import { useMemo, useState } from 'react';
import { useNetwork } from '../canvas/inspector/carried-segments.tsx';
import { Inspector } from '../canvas/inspector/inspector.tsx';
import { Button } from '../components/button.tsx';
import { SelectCell } from '../components/field-cells.tsx';
import { showToast } from '../components/toast.tsx';
import { InventoryDialog } from '../features/inventory/inventory-dialog.tsx';
import { DemandsTable } from '../features/segments/demands-table.tsx';
import { demandRows } from '../features/segments/demand-rows.ts';
import { PlacesTable } from '../features/segments/places-table.tsx';
import { placeRows, segmentRows } from '../features/segments/segment-rows.ts';
import { SegmentsTable } from '../features/segments/segments-table.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useChecks } from '../workspace/checks-context.tsx';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import type { Operation } from '../workspace/operations/operation.ts';
import { placeDemand, placeSegment } from '../workspace/operations/place-parts.ts';

/** /designs/:designId/segments?segment=…: what must be carried, where it lands, how much of it there is. */
export function SegmentsPage() {
  const open = useOpenDesign();
  const network = useNetwork();
  const document = useOpenState((state) => state.document);
  const selection = useOpenState((state) => state.selection);
  const editable = useOpenState((state) => state.editable);
  const { openFindings, numbering } = useChecks();
  const { valueOf, change } = useSearchValues();
  const [inventory, setInventory] = useState(false);
  usePageTitle(`Segments of ${document.meta.title}`);

  const asked = valueOf('segment');
  const only = Object.hasOwn(document.segments, asked) ? asked : undefined;
  const segments = useMemo(() => segmentRows(network), [network]);
  const places = useMemo(() => placeRows(network, only), [network, only]);
  const demands = useMemo(() => demandRows(document, only), [document, only]);
  const [selected] = selection;
  const shownIn = (collection: 'segments' | 'demands'): string | undefined =>
    selection.length === 1 && selected?.collection === collection ? selected.id : undefined;
  const act = (operation: Operation): void => {
    const done = perform(open, operation);
    if (!done.ok) showToast({ tone: 'failed', text: done.why });
  };
  const addSegment = editable ? () => act(placeSegment(document, newEntryId, numbering)) : undefined;
  // A demand needs a segment that lands at two sites.
  const demandFor = only ?? segments.find(({ sites }) => sites > 1)?.id;
  const addDemand =
    editable && demandFor !== undefined ? () => act(placeDemand(document, demandFor, newEntryId)) : undefined;

  return (
    <div className="flex min-h-0 flex-1 max-lg:flex-col max-lg:overflow-y-auto">
      <main
        id="main"
        tabIndex={-1}
        className="flex min-w-0 flex-1 flex-col gap-20 overflow-y-auto px-28 pb-28 outline-none max-lg:overflow-visible max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 pt-12">
          <h1 className="text-page font-semibold">Segments</h1>
          {asked !== '' && only === undefined && (
            <p role="status" className="text-base text-degr">
              Segment {asked} is not in this design: all are shown.
            </p>
          )}
          <div className="ml-auto flex items-center gap-8">
            <Button onClick={() => setInventory(true)}>Inventory as tables</Button>
            {addSegment && <Button onClick={addSegment}>Add a segment</Button>}
          </div>
        </div>
        <SegmentsTable
          rows={segments}
          findings={openFindings}
          selectedId={shownIn('segments')}
          onSelect={(id) => open.select([{ collection: 'segments', id }])}
          onAdd={addSegment}
        />
        {segments.length > 0 && (
          <>
            <section aria-labelledby="places" className="flex flex-col gap-10">
              <div className="flex flex-wrap items-center gap-16">
                <h2 id="places" className="text-title font-semibold">
                  Where they land
                </h2>
                <div className="w-260">
                  <SelectCell
                    label="Show"
                    value={only ?? ''}
                    placeholder="all segments"
                    options={segments.map(({ id, letter, name }) => ({
                      value: id,
                      label: `${letter} ${name}`,
                    }))}
                    onChange={(segment) => change({ segment })}
                    onClear={() => change({ segment: '' })}
                  />
                </div>
              </div>
              <PlacesTable rows={places} />
            </section>
            <section aria-labelledby="demands" className="flex flex-col gap-10">
              <div className="flex flex-wrap items-center gap-16">
                <h2 id="demands" className="text-title font-semibold">
                  Demands
                </h2>
                {addDemand && demands.length > 0 && (
                  <Button small onClick={addDemand}>
                    Add a demand
                  </Button>
                )}
              </div>
              <DemandsTable
                rows={demands}
                selectedId={shownIn('demands')}
                onSelect={(id) => open.select([{ collection: 'demands', id }])}
                onAdd={addDemand}
              />
            </section>
          </>
        )}
      </main>
      {selected !== undefined && <Inspector />}
      {inventory && (
        <InventoryDialog
          design={document}
          onClose={() => setInventory(false)}
          onBringIn={
            editable
              ? (patch, rowCount) => {
                  const done = open.commit('Bring in an inventory', patch);
                  if (done.ok) setInventory(false);
                  showToast(
                    done.ok
                      ? {
                          tone: 'done',
                          text: rowCount === 1 ? 'One row brought in.' : `${rowCount} rows brought in.`,
                          action: { label: 'Undo', onSelect: () => open.undo() },
                        }
                      : { tone: 'failed', text: done.problems.map(({ expected }) => expected).join('; ') },
                  );
                }
              : undefined
          }
        />
      )}
    </div>
  );
}
