import { ReactFlowProvider } from '@xyflow/react';
import { useEffect, useMemo, useState } from 'react';
import '../canvas/canvas.css';
import { clearDesk } from '../canvas/desk-state.ts';
import { GeometryProvider, useDrawn } from '../canvas/geometry-context.tsx';
import { SheetCanvas } from '../canvas/sheet-canvas.tsx';
import { useView } from '../canvas/use-view.ts';
import { EmptyState } from '../components/empty-state.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { changesToDecorations } from '../drawing/changes-to-decorations.ts';
import { anchorOf } from '../drawing/routing/anchors.ts';
import type { Revision } from '../contract/revisions.ts';
import type { Change } from '../engine/diff/change.ts';
import { compareDesigns } from '../engine/diff/compare-designs.ts';
import { together } from '../engine/diff/together.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import { DifferenceLegend, DifferenceList } from '../features/revisions/difference-list.tsx';
import { pointWords, writePoint, type HistoryPoint } from '../features/revisions/history-point.ts';
import { usePastDesign, usePatchesBetween } from '../features/revisions/past-design.ts';
import { FrozenDesign } from '../workspace/frozen-design.tsx';

interface DifferenceViewProps {
  readonly designId: string;
  readonly from: HistoryPoint;
  readonly to: HistoryPoint;
  readonly revisions: readonly Revision[];
}

/** What differs between two moments of a design: drawn on one sheet, and as sentences beside it. */
export function DifferenceView({ designId, from, to, revisions }: DifferenceViewProps) {
  const before = usePastDesign(designId, from, revisions);
  const after = usePastDesign(designId, to, revisions);
  const patches = usePatchesBetween(designId, before.sequence, after.sequence);
  const { design: was } = before;
  const { design: is } = after;
  const comparison = useMemo(
    () => (was === undefined || is === undefined ? undefined : compareDesigns(was, is)),
    [was, is],
  );
  const failure = before.failure ?? after.failure;
  if (failure !== undefined) return <ErrorNotice className="m-20">{failure}</ErrorNotice>;
  if (was === undefined || is === undefined || comparison === undefined)
    return (
      <p role="status" className="p-20 text-base text-ink-2">
        Fetching both states of the design…
      </p>
    );
  if (comparison.changes.length === 0)
    return (
      <EmptyState title="Nothing differs" className="m-20">
        {`Between ${pointWords(from)} and ${pointWords(to)} nothing was added, removed or changed. Choose two other moments above.`}
      </EmptyState>
    );
  return (
    <Difference
      key={`${writePoint(from)} ${writePoint(to)}`}
      was={was}
      is={is}
      changes={comparison.changes}
      patches={patches}
      sequence={after.sequence}
    />
  );
}

interface DifferenceProps {
  readonly was: Design;
  readonly is: Design;
  readonly changes: readonly Change[];
  readonly patches: Parameters<typeof DifferenceList>[0]['patches'];
  readonly sequence: number;
}

function Difference({ was, is, changes, patches, sequence }: DifferenceProps) {
  const both = useMemo(() => together(was, is), [was, is]);
  const [chosen, setChosen] = useState<Change>();
  useEffect(() => clearDesk, []);
  return (
    // A later state of the draft is drawn anew.
    <FrozenDesign key={sequence} document={both} sequence={sequence}>
      <ReactFlowProvider>
        <GeometryProvider>
          <div className="flex min-h-0 flex-1 max-md:flex-col">
            <div className="flex min-h-0 min-w-0 flex-1 flex-col max-md:min-h-320">
              <MarkedSheet both={both} changes={changes} chosen={chosen} onChoose={setChosen} />
            </div>
            <section
              aria-label="What differs"
              className="flex w-380 shrink-0 flex-col border-l-1.5 border-ink bg-panel max-md:w-full max-md:border-t-1.5 max-md:border-l-0"
            >
              <div className="border-b border-rule-2 px-14 py-10">
                <DifferenceLegend changes={changes} />
              </div>
              <div className="min-h-0 flex-1 overflow-y-auto px-14 py-12 max-md:overflow-visible">
                <DifferenceList changes={changes} patches={patches} chosen={chosen} onChoose={setChosen} />
              </div>
            </section>
          </div>
        </GeometryProvider>
      </ReactFlowProvider>
    </FrozenDesign>
  );
}

interface MarkedSheetProps {
  readonly both: Design;
  readonly changes: readonly Change[];
  readonly chosen: Change | undefined;
  readonly onChoose: (change: Change) => void;
}

function MarkedSheet({ both, changes, chosen, onChoose }: MarkedSheetProps) {
  const { settled } = useDrawn();
  const view = useView();
  const decorations = useMemo(() => changesToDecorations(both, changes, chosen), [both, changes, chosen]);
  useEffect(() => {
    const at = chosen?.ref == null ? undefined : anchorOf(settled, chosen.ref);
    if (at !== undefined) view.showPoint(at);
    // Only another choice moves the view.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [chosen]);
  const pick = (ref: ElementRef): void => {
    const change = changes.find(
      (each) => each.ref !== null && each.ref.collection === ref.collection && each.ref.id === ref.id,
    );
    if (change !== undefined) onChoose(change);
  };
  return (
    <SheetCanvas
      decorations={decorations}
      onPick={pick}
      onAcceptGhost={() => undefined}
      onPickBalloon={() => undefined}
    />
  );
}
