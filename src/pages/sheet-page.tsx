import { ReactFlowProvider } from '@xyflow/react';
import { useCallback, useEffect, useMemo, useState } from 'react';
import '../canvas/canvas.css';
import { DeskCommands } from '../canvas/commands/desk-commands.tsx';
import { endOf } from '../canvas/connect-ends.ts';
import { ExtraActionsProvider } from '../canvas/actions/extra-actions.ts';
import { useElementMenu } from '../canvas/actions/use-element-menu.ts';
import { askToJoin, clearDesk, setInspecting, useDesk } from '../canvas/desk-state.ts';
import type { DeskTab } from '../canvas/desk-tab.ts';
import { standingOf } from '../canvas/flow-changes-to-patch.ts';
import { GeometryProvider, useDrawn } from '../canvas/geometry-context.tsx';
import { Inspector } from '../canvas/inspector/inspector.tsx';
import { JoinDialog } from '../canvas/join-dialog.tsx';
import { PartsTray } from '../canvas/parts-tray/parts-tray.tsx';
import { SheetActions } from '../canvas/sheet-actions.tsx';
import { sheetCommands } from '../canvas/sheet-turner.tsx';
import { SheetCanvas } from '../canvas/sheet-canvas.tsx';
import { useView } from '../canvas/use-view.ts';
import { SeverityCounts } from '../components/severity-mark.tsx';
import { showToast } from '../components/toast.tsx';
import { elementKey, layOver } from '../drawing/decorations.ts';
import { anchorOf } from '../drawing/routing/anchors.ts';
import type { ElementRef } from '../engine/model/design.ts';
import { rules } from '../engine/rules/index.ts';
import { countBySeverity } from '../engine/rules/run-rules.ts';
import { SheetDrawer } from '../features/drawer/sheet-drawer.tsx';
import { ExportButton } from '../features/export/export-button.tsx';
import { PrintedSheet } from '../features/export/printed-sheet.tsx';
import { findingItem } from '../features/findings/finding-words.ts';
import { FindingsList } from '../features/findings/findings-list.tsx';
import { useAskedFinding } from '../features/findings/use-asked-finding.ts';
import { useFindingDecorations } from '../features/findings/use-finding-decorations.ts';
import { useFindingFixes } from '../features/findings/use-finding-fixes.ts';
import { useWaiving } from '../features/findings/use-waiving.tsx';
import { ElementComments } from '../features/review/element-comments.tsx';
import { SuggestButton } from '../features/review/suggest-button.tsx';
import { useCommenting, type Commenting } from '../features/review/use-commenting.tsx';
import { useCommentsTab } from '../features/review/use-comments-tab.tsx';
import { useLoadTab } from '../features/load/use-load-tab.tsx';
import { useOutageTab } from '../features/outage/use-outage-tab.tsx';
import { createOutlineView } from '../features/outline/outline-view.ts';
import { Outline } from '../features/outline/outline.tsx';
import { PresenceOnSheet } from '../features/presence/presence-on-sheet.tsx';
import { useTraceFromHere } from '../features/trace/use-trace-from-here.ts';
import { useTraceTab } from '../features/trace/use-trace-tab.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useChecks } from '../workspace/checks-context.tsx';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { SheetSide } from './sheet-side.tsx';
import { useDrawerTabs } from './use-drawer-tabs.ts';

/** /designs/:designId: the drawing, with its tray, drawer and inspector. */
export function SheetPage() {
  const { actionsOf: tracesFrom } = useTraceFromHere();
  const { change } = useSearchValues();
  const openThread = (thread: string): void => change({ drawer: 'comments', thread });
  const commenting = useCommenting(openThread);
  const { actionsOf: commentsOn } = commenting;
  const actionsOf = useCallback(
    (ref: ElementRef) => [...tracesFrom(ref), ...commentsOn(ref)],
    [tracesFrom, commentsOn],
  );
  useEffect(() => clearDesk, []);
  return (
    <ReactFlowProvider>
      <GeometryProvider>
        <SheetActions>
          <SuggestButton />
          <ExportButton />
        </SheetActions>
        <PrintedSheet />
        <ExtraActionsProvider value={actionsOf}>
          <Surface commenting={commenting} onOpenThread={openThread} />
        </ExtraActionsProvider>
        <JoinDialog />
        <PresenceOnSheet />
        {commenting.dialog}
      </GeometryProvider>
    </ReactFlowProvider>
  );
}

interface SurfaceProps {
  readonly commenting: Commenting;
  readonly onOpenThread: (threadId: string) => void;
}

function Surface({ commenting, onOpenThread }: SurfaceProps) {
  const { ask, suggestFix } = commenting;
  const open = useOpenDesign();
  const { findings, openFindings, waiverOf, document } = useChecks();
  const waiving = useWaiving();
  const editable = useOpenState((state) => state.editable);
  const title = useOpenState((state) => state.document.meta.title);
  const anySelected = useOpenState((state) => state.selection.length > 0);
  const { settled, preview, setPreview, sheet } = useDrawn();
  const view = useView();
  const standing = useMemo(() => standingOf(settled), [settled]);
  const menuOf = useElementMenu();
  const fixes = useFindingFixes();
  const { valueOf, change } = useSearchValues();
  // A link to a finding leads here.
  const askedKey = valueOf('finding');
  const [selectedKey, setSelectedKey] = useState<string | null>(askedKey === '' ? null : askedKey);
  useAskedFinding(askedKey);
  const [outline] = useState(createOutlineView);
  usePageTitle(title);
  useEffect(() => {
    if (!anySelected) return;
    if (useDesk.getState().menu === undefined) return setInspecting(true);
    // What a menu was opened on stays in sight until it is shut.
    const stop = useDesk.subscribe(({ menu }) => {
      if (menu !== undefined) return;
      stop();
      setInspecting(true);
    });
    return stop;
  }, [anySelected]);

  const found = useFindingDecorations(selectedKey, preview);
  const items = useMemo(
    () =>
      findings.map((finding, i) =>
        findingItem(finding, i + 1, document, settled, fixes.get(finding.key), waiverOf(finding.key)),
      ),
    [findings, document, settled, fixes, waiverOf],
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
  const showFinding = (key: string): void => {
    change({ drawer: '' });
    select(key);
  };
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

  const findingsTab: DeskTab = {
    value: 'findings',
    label: 'Findings',
    count: openFindings.length,
    usualHeightPx: 180,
    panel: (
      <FindingsList
        findings={items}
        selectedKey={selectedKey}
        onSelect={select}
        canFix={editable}
        onApplyFix={apply}
        waiving={waiving.tools}
        commenting={
          ask && {
            onComment: (key) => ask({ kind: 'finding', key }),
            onSuggest:
              suggestFix &&
              ((key, fixId) => {
                const fix = fixes.get(key)?.find(({ id }) => id === fixId);
                if (fix !== undefined) suggestFix(key, fix);
              }),
          }
        }
        empty={`All ${rules.length} checks pass. They run again with every change.`}
      />
    ),
  };
  const outlineTab: DeskTab = {
    value: 'outline',
    label: 'Outline',
    usualHeightPx: 300,
    panel: <Outline view={outline} />,
  };
  const traceTab = useTraceTab(valueOf('drawer') === 'trace', { onShowFinding: showFinding });
  const loadTab = useLoadTab(valueOf('drawer') === 'load');
  const outageTab = useOutageTab(valueOf('drawer') === 'outage');
  const comments = useCommentsTab(commenting, (ref) => {
    open.select([ref]);
    const at = anchorOf(settled, ref, document);
    if (at !== undefined) view.showPoint(at);
  });
  const tabs: [DeskTab, ...DeskTab[]] = [findingsTab, comments.tab, traceTab, loadTab, outageTab, outlineTab];
  const { active, openTab, openings } = useDrawerTabs(tabs);
  const { decorations: upper, onPick } = active;
  const { flags } = comments;
  const decorations = useMemo(() => layOver(layOver(found, { flags }), upper ?? {}), [found, flags, upper]);

  return (
    <main id="main" tabIndex={-1} className="sheet-desk" data-selected={anySelected}>
      <h1 className="sr-only">{title}</h1>
      <DeskCommands more={[...openings, ...sheetCommands(document, sheet)]} />
      <PartsTray />
      <div className="flex min-w-0 flex-1 flex-col">
        <SheetCanvas
          decorations={decorations}
          onPick={onPick}
          onAcceptGhost={acceptGhost}
          onPickFlag={comments.onPickFlag}
          onPickBalloon={(number) => findings[number - 1] !== undefined && select(findings[number - 1]!.key)}
        />
        <SheetDrawer
          value={active.value}
          onChange={openTab}
          // With nothing to say at first it leaves its room to the sheet.
          openAtFirst={findings.length > 0 || active !== findingsTab}
          counts={
            <SeverityCounts
              counts={countBySeverity(openFindings)}
              worded
              clear={`All ${rules.length} checks pass`}
            />
          }
          tabs={tabs}
          asked={[active.value, valueOf('thread'), valueOf('on')].join(' ')}
        />
      </div>
      {waiving.dialog}
      <SheetSide
        active={active}
        inspector={
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
            footOf={(ref) => (
              <ElementComments
                of={ref}
                onComment={ask && (() => ask({ kind: 'element', ref }))}
                onOpenThread={onOpenThread}
              />
            )}
            standing={standing}
            menuOf={menuOf}
          />
        }
      />
    </main>
  );
}
