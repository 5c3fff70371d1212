import { ReactFlowProvider } from '@xyflow/react';
import { useQuery } from '@tanstack/react-query';
import { useCallback, useEffect, useMemo, useState } from 'react';
import { GeometryProvider, useDrawn } from '../canvas/geometry-context.tsx';
import '../canvas/canvas.css';
import { askToJoin, clearDesk, setInspecting, useDesk } from '../canvas/desk-state.ts';
import { standingOf } from '../canvas/flow-changes-to-patch.ts';
import { FindDialog } from '../canvas/find-dialog.tsx';
import { Inspector } from '../canvas/inspector/inspector.tsx';
import { JoinDialog } from '../canvas/join-dialog.tsx';
import { PartsTray } from '../canvas/parts-tray/parts-tray.tsx';
import { SheetBar } from '../canvas/sheet-bar.tsx';
import { SheetCanvas } from '../canvas/sheet-canvas.tsx';
import { endOf } from '../canvas/connect-ends.ts';
import { useShortcuts } from '../canvas/use-shortcuts.ts';
import { useView } from '../canvas/use-view.ts';
import { Button } from '../components/button.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { SeverityCounts } from '../components/severity-mark.tsx';
import { showToast } from '../components/toast.tsx';
import { openDesignSchema, type OpenDesign as OpenDesignAnswer } from '../contract/designs.ts';
import { elementKey } from '../drawing/decorations.ts';
import { anchorOf } from '../drawing/routing/anchors.ts';
import type { Design } from '../engine/model/design.ts';
import { parseDesign } from '../engine/model/parse-design.ts';
import { countBySeverity } from '../engine/rules/run-rules.ts';
import { rules } from '../engine/rules/index.ts';
import { SheetDrawer } from '../features/drawer/sheet-drawer.tsx';
import { findingItem } from '../features/findings/finding-words.ts';
import { FindingsList } from '../features/findings/findings-list.tsx';
import { useFindingDecorations } from '../features/findings/use-finding-decorations.ts';
import { useFindingFixes } from '../features/findings/use-finding-fixes.ts';
import { Outline } from '../features/outline/outline.tsx';
import { createOutlineView } from '../features/outline/outline-view.ts';
import { callApi } from '../lib/api-client.ts';
import { asApiError } from '../lib/api-error.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { ChecksProvider, useChecks } from '../workspace/checks-context.tsx';
import { designServer } from '../workspace/design-server.ts';
import { browserEditStorage } from '../workspace/edit-storage.ts';
import { openDesign, type OpenDesign } from '../workspace/open-design.ts';
import { OpenDesignProvider, useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';

const phone = '(max-width: 767px)';
// As they stand in the address; the first is open where it says nothing.
const drawerTabs = ['findings', 'outline'] as const;

/** Opens one design and lays out everything to work on it with: bar, tray, sheet, drawer, inspector. */
export function SheetDesk({ designId }: { readonly designId: string }) {
  // Read once: from then on the open design keeps itself up to date.
  const answer = useQuery({
    queryKey: ['open-design', designId],
    queryFn: ({ signal }) =>
      callApi(openDesignSchema, `/api/designs/${encodeURIComponent(designId)}`, { signal }),
    staleTime: Infinity,
    gcTime: 0,
    refetchOnWindowFocus: false,
  });
  if (answer.error !== null)
    return <CannotOpen message={asApiError(answer.error).message} onRetry={() => void answer.refetch()} />;
  if (answer.data === undefined) return <Opening />;
  return <ReadDesign answer={answer.data} />;
}

function Opening() {
  return (
    <main
      id="main"
      tabIndex={-1}
      aria-busy="true"
      className="flex min-h-0 flex-1 items-center justify-center bg-desk outline-none"
    >
      <p role="status" className="text-base text-ink-2">
        Opening the sheet…
      </p>
    </main>
  );
}

function CannotOpen({ message, onRetry }: { readonly message: string; readonly onRetry: () => void }) {
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-0 flex-1 items-start justify-center bg-desk p-28 outline-none"
    >
      <ErrorNotice
        action={
          <Button small onClick={onRetry}>
            Try again
          </Button>
        }
      >
        {message}
      </ErrorNotice>
    </main>
  );
}

function ReadDesign({ answer }: { readonly answer: OpenDesignAnswer }) {
  const parsed = useMemo(() => parseDesign(answer.document), [answer.document]);
  if (!parsed.ok)
    return (
      <CannotOpen
        message={`This design can't be read: ${parsed.problems[0]!.path}, ${parsed.problems[0]!.expected}.`}
        onRetry={() => location.reload()}
      />
    );
  return <Desk answer={answer} document={parsed.value} />;
}

function Desk({ answer, document }: { readonly answer: OpenDesignAnswer; readonly document: Design }) {
  const { id } = answer.summary;
  const open = (): OpenDesign =>
    openDesign({
      document,
      sequence: answer.sequence,
      // A phone shows the sheet; to draw on it takes a larger screen.
      editable: answer.actions.includes('design.edit') && !window.matchMedia(phone).matches,
      server: designServer(id),
      storage: browserEditStorage(localStorage, id, Date.now),
      newEditId: () => crypto.randomUUID(),
      now: Date.now,
    });
  useEffect(() => clearDesk, []);
  return (
    <OpenDesignProvider open={open}>
      <ChecksProvider>
        <ReactFlowProvider>
          <GeometryProvider>
            <SheetBar
              engagementName={answer.engagementName}
              workspaceId={answer.workspaceId}
              summary={answer.summary}
            />
            <Surface />
            <JoinDialog />
            <FindDialog />
          </GeometryProvider>
        </ReactFlowProvider>
      </ChecksProvider>
    </OpenDesignProvider>
  );
}

function Surface() {
  useShortcuts();
  const open = useOpenDesign();
  const { findings, document } = useChecks();
  const editable = useOpenState((state) => state.editable);
  const title = useOpenState((state) => state.document.meta.title);
  const anySelected = useOpenState((state) => state.selection.length > 0);
  const inspecting = useDesk((state) => state.inspecting);
  const { settled, preview, setPreview } = useDrawn();
  const view = useView();
  const standing = useMemo(() => standingOf(settled), [settled]);
  const fixes = useFindingFixes();
  const [selectedKey, setSelectedKey] = useState<string | null>(null);
  const [outline] = useState(createOutlineView);
  const { valueOf, change } = useSearchValues();
  const drawer = drawerTabs.find((tab) => tab === valueOf('drawer')) ?? 'findings';
  usePageTitle(title);
  useEffect(() => {
    if (anySelected) setInspecting(true);
  }, [anySelected]);

  const decorations = useFindingDecorations(selectedKey, preview);
  const items = useMemo(
    () =>
      findings.map((finding, i) => findingItem(finding, i + 1, document, settled, fixes.get(finding.key))),
    [findings, document, settled, fixes],
  );

  const select = useCallback(
    (key: string) => {
      setSelectedKey(key);
      const finding = findings.find((candidate) => candidate.key === key);
      if (finding === undefined) return;
      open.select(finding.elements.slice(0, 1));
      const at = finding.elements[0] === undefined ? undefined : anchorOf(settled, finding.elements[0]);
      if (at !== undefined) view.showPoint(at);
    },
    [findings, open, settled, view],
  );
  const apply = useCallback(
    (findingKey: string, fixId?: string) => {
      const fix = fixes.get(findingKey)?.find((candidate) => fixId === undefined || candidate.id === fixId);
      if (fix === undefined) return;
      setPreview(undefined);
      const done = open.commit(fix.label, fix.patch);
      if (done.ok)
        showToast({
          tone: 'done',
          text: fix.sentence,
          action: { label: 'Undo', onSelect: () => open.undo() },
        });
      else
        showToast({
          tone: 'failed',
          text: done.problems.map((problem) => `${problem.path}: ${problem.expected}`).join('; '),
        });
    },
    [fixes, open, setPreview],
  );
  // A ghost is drawn for one finding and stands for its first cure.
  const acceptGhost = useCallback((id: string) => apply(id), [apply]);

  return (
    <main id="main" tabIndex={-1} className="sheet-desk" data-selected={anySelected}>
      <h1 className="sr-only">{title}</h1>
      <PartsTray />
      <div className="flex min-w-0 flex-1 flex-col">
        <SheetCanvas
          decorations={decorations}
          onAcceptGhost={acceptGhost}
          onPickBalloon={(number) => findings[number - 1] !== undefined && select(findings[number - 1]!.key)}
        />
        <SheetDrawer
          value={drawer}
          onChange={(tab) => change({ drawer: tab === 'findings' ? '' : tab })}
          // With nothing to say at first it leaves its room to the sheet.
          openAtFirst={findings.length > 0 || drawer !== 'findings'}
          counts={
            <SeverityCounts
              counts={countBySeverity(findings)}
              worded
              clear={`All ${rules.length} checks pass`}
            />
          }
          tabs={[
            {
              value: 'findings',
              label: 'Findings',
              count: findings.length,
              usualHeightPx: 180,
              panel: (
                <FindingsList
                  findings={items}
                  selectedKey={selectedKey}
                  onSelect={select}
                  canFix={editable}
                  onApplyFix={apply}
                  empty={`All ${rules.length} checks pass. They run again with every change.`}
                />
              ),
            },
            { value: 'outline', label: 'Outline', usualHeightPx: 300, panel: <Outline view={outline} /> },
          ]}
        />
      </div>
      {inspecting && (
        <Inspector
          onConnect={({ kind, from }) => {
            const end = endOf(
              elementKey({ collection: from.collection, id: from.id }),
              from.port === undefined
                ? undefined
                : `port:${from.port}${from.member === undefined ? '' : `@${from.member}`}`,
            );
            askToJoin({ kind, ...(end === undefined ? {} : { a: end }) });
          }}
          onShowFinding={select}
          standing={standing}
        />
      )}
    </main>
  );
}
