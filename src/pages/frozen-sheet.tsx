import { ReactFlowProvider } from '@xyflow/react';
import { useCallback, useEffect, useMemo, useState } from 'react';
import '../canvas/canvas.css';
import { ExtraActionsProvider } from '../canvas/actions/extra-actions.ts';
import { useElementMenu } from '../canvas/actions/use-element-menu.ts';
import { DeskCommands } from '../canvas/commands/desk-commands.tsx';
import { clearDesk, setInspecting } from '../canvas/desk-state.ts';
import type { DeskTab } from '../canvas/desk-tab.ts';
import { standingOf } from '../canvas/flow-changes-to-patch.ts';
import { GeometryProvider, useDrawn } from '../canvas/geometry-context.tsx';
import { Inspector } from '../canvas/inspector/inspector.tsx';
import { PartsTray } from '../canvas/parts-tray/parts-tray.tsx';
import { SheetActions } from '../canvas/sheet-actions.tsx';
import { SheetCanvas } from '../canvas/sheet-canvas.tsx';
import { useView } from '../canvas/use-view.ts';
import { SeverityCounts } from '../components/severity-mark.tsx';
import { layOver, type Decorations } from '../drawing/decorations.ts';
import { anchorOf } from '../drawing/routing/anchors.ts';
import { countBySeverity } from '../engine/rules/run-rules.ts';
import { SheetDrawer } from '../features/drawer/sheet-drawer.tsx';
import { ExportButton } from '../features/export/export-button.tsx';
import { PrintedSheet } from '../features/export/printed-sheet.tsx';
import { findingItem } from '../features/findings/finding-words.ts';
import { FindingsList } from '../features/findings/findings-list.tsx';
import { useFindingDecorations } from '../features/findings/use-finding-decorations.ts';
import { useLoadTab } from '../features/load/use-load-tab.tsx';
import { useOutageTab } from '../features/outage/use-outage-tab.tsx';
import { createOutlineView } from '../features/outline/outline-view.ts';
import { Outline } from '../features/outline/outline.tsx';
import { useTraceFromHere } from '../features/trace/use-trace-from-here.ts';
import { useTraceTab } from '../features/trace/use-trace-tab.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useChecks } from '../workspace/checks-context.tsx';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { SheetSide } from './sheet-side.tsx';
import { useDrawerTabs } from './use-drawer-tabs.ts';

/** A sheet that nobody changes, with all that can be read from it: findings, traces, loads, outages, every value. */
export function FrozenSheet({ title }: { readonly title: string }) {
  const { actionsOf } = useTraceFromHere();
  usePageTitle(title);
  useEffect(() => clearDesk, []);
  return (
    <ReactFlowProvider>
      <GeometryProvider>
        <SheetActions>
          <ExportButton />
        </SheetActions>
        <PrintedSheet />
        <ExtraActionsProvider value={actionsOf}>
          <Surface title={title} />
        </ExtraActionsProvider>
      </GeometryProvider>
    </ReactFlowProvider>
  );
}

function Surface({ title }: { readonly title: string }) {
  const open = useOpenDesign();
  const { findings, openFindings, waiverOf, document } = useChecks();
  const anySelected = useOpenState((state) => state.selection.length > 0);
  const { settled } = useDrawn();
  const view = useView();
  const menuOf = useElementMenu();
  const { valueOf, change } = useSearchValues();
  const [selectedKey, setSelectedKey] = useState<string | null>(null);
  const [outline] = useState(createOutlineView);
  const standing = useMemo(() => standingOf(settled), [settled]);
  useEffect(() => {
    if (anySelected) setInspecting(true);
  }, [anySelected]);

  const found = useFindingDecorations(selectedKey, undefined);
  const items = useMemo(
    () =>
      findings.map((finding, i) =>
        findingItem(finding, i + 1, document, settled, undefined, waiverOf(finding.key)),
      ),
    [findings, document, settled, waiverOf],
  );
  const select = useCallback(
    (key: string) => {
      setSelectedKey(key);
      const [ref] = findings.find((finding) => finding.key === key)?.elements ?? [];
      if (ref === undefined) return;
      open.select([ref]);
      const at = anchorOf(settled, ref);
      if (at !== undefined) view.showPoint(at);
    },
    [findings, open, settled, view],
  );

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
        canFix={false}
        onApplyFix={() => undefined}
        empty="The checks found nothing when this revision was frozen."
      />
    ),
  };
  const outlineTab: DeskTab = {
    value: 'outline',
    label: 'Outline',
    usualHeightPx: 300,
    panel: <Outline view={outline} />,
  };
  const showFinding = (key: string): void => {
    change({ drawer: '' });
    select(key);
  };
  const traceTab = useTraceTab(valueOf('drawer') === 'trace', { onShowFinding: showFinding });
  const loadTab = useLoadTab(valueOf('drawer') === 'load');
  const outageTab = useOutageTab(valueOf('drawer') === 'outage');
  const tabs: [DeskTab, ...DeskTab[]] = [findingsTab, traceTab, loadTab, outageTab, outlineTab];
  const { active, openTab, openings } = useDrawerTabs(tabs);
  const { decorations: upper, onPick } = active;
  const decorations = useLaidOver(found, upper);

  return (
    <main id="main" tabIndex={-1} className="sheet-desk" data-selected={anySelected}>
      <h1 className="sr-only">{title}</h1>
      <DeskCommands more={openings} />
      <PartsTray />
      <div className="flex min-w-0 flex-1 flex-col">
        <SheetCanvas
          decorations={decorations}
          onPick={onPick}
          onAcceptGhost={() => undefined}
          onPickBalloon={(number) => findings[number - 1] !== undefined && select(findings[number - 1]!.key)}
        />
        <SheetDrawer
          value={active.value}
          onChange={openTab}
          openAtFirst={findings.length > 0 || active !== findingsTab}
          counts={<SeverityCounts counts={countBySeverity(openFindings)} worded clear="All checks passed" />}
          tabs={tabs}
          asked={active.value}
        />
      </div>
      <SheetSide
        active={active}
        inspector={
          <Inspector onConnect={() => undefined} onShowFinding={select} standing={standing} menuOf={menuOf} />
        }
      />
    </main>
  );
}

const useLaidOver = (lower: Decorations, upper: Partial<Decorations> | undefined): Decorations =>
  useMemo(() => layOver(lower, upper ?? {}), [lower, upper]);
