import { useDeferredValue, useMemo, useState } from 'react';
import { setInspecting } from '../../canvas/desk-state.ts';
import type { DeskTab } from '../../canvas/desk-tab.ts';
import { focusInspector } from '../../canvas/focus-inspector.ts';
import { Button } from '../../components/button.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { addDemands, demandableSegments } from './add-demands.ts';
import { DemandSide } from './demand-side.tsx';
import { demandWayRows, type DemandWayRow } from './demand-ways.ts';
import { DemandWaysTable } from './demand-ways-table.tsx';
import { LimitSide } from './limit-side.tsx';
import { limitRows, type LimitRow } from './limit-rows.ts';
import { LimitsTable } from './limits-table.tsx';
import { loadDecorations } from './load-decorations.ts';
import { kindsShown, LoadChoices, LoadFrame, loadViews, VerdictLine } from './load-panel.tsx';
import { LoadStatus } from './load-status.tsx';
import { loadVerdict } from './load-verdict.ts';
import { NoDemands } from './no-demands.tsx';
import { useLoadReport } from './use-load-report.ts';
import { WhatIf } from './what-if.tsx';

const tab = { value: 'load', label: 'Load', usualHeightPx: 340 } as const;

const oneOf = <Value extends string>(values: readonly [Value, ...Value[]], text: string): Value =>
  values.find((value) => value === text) ?? values[0];

/** The drawer's tab of load: what the demands put on everything, and what of it fills first. */
export function useLoadTab(active: boolean): DeskTab {
  const open = useOpenDesign();
  const current = useOpenState((state) => state.document);
  const editable = useOpenState((state) => state.editable);
  const { valueOf, change } = useSearchValues();
  const [tried, setTried] = useState<number>();
  const [chosenKey, setChosenKey] = useState<string>();
  const latest = useDeferredValue(current);

  const settled = valueOf('times') === '' ? 1 : Number(valueOf('times'));
  const multiplier = useDeferredValue(tried ?? settled);
  const windowBytes = valueOf('window') === '' ? undefined : Number(valueOf('window'));
  const view = oneOf(loadViews, valueOf('load'));
  const kind = oneOf(kindsShown, valueOf('limits-of'));

  const run = useLoadReport(active ? latest : undefined, multiplier, windowBytes);
  // While a new run is under way what is shown is about the design before.
  const design = run.report?.of.design ?? latest;
  const answer = run.report?.answer;
  const network = useMemo(() => (active ? indexNetwork(design) : undefined), [active, design]);
  const report = answer?.ok === true ? answer : undefined;
  const rows = useMemo(
    () => (network === undefined || report === undefined ? [] : limitRows(network, report, design)),
    [network, report, design],
  );
  const ways = useMemo(() => (report === undefined ? [] : demandWayRows(report, design)), [report, design]);
  const rowsShown = useMemo(
    () => (kind === 'all' ? rows : rows.filter(({ group }) => group === kind)),
    [rows, kind],
  );
  const bottleneck = report?.bottleneck?.limit.key;
  const chosenWay = view === 'demands' ? (ways.find(({ key }) => key === chosenKey) ?? ways[0]) : undefined;
  const chosenRow =
    view === 'limits'
      ? (rows.find(({ key }) => key === chosenKey) ??
        rows.find(({ key }) => key === bottleneck) ??
        rowsShown[0])
      : undefined;
  const lit = useMemo(
    () => chosenWay?.elements ?? (chosenRow === undefined ? [] : [chosenRow.ref]),
    [chosenWay, chosenRow],
  );
  const decorations = useMemo(
    () => (report === undefined ? undefined : loadDecorations(rows, bottleneck, lit)),
    [report, rows, bottleneck, lit],
  );

  if (!active || network === undefined) return { ...tab, panel: null };

  const choose = ({ key }: LimitRow | DemandWayRow): void => {
    setChosenKey(key);
    // The working stands where the inspector would.
    open.select([]);
    setInspecting(true);
  };
  const add = (): void => {
    const done = perform(open, addDemands(open.store.getState().document, newEntryId));
    if (!done.ok) return void showToast({ tone: 'failed', text: done.why });
    change({ load: 'demands' });
    // The first of them is selected: what is known of it is what comes next.
    focusInspector();
  };
  const addOne = editable && demandableSegments(design).length > 0 ? add : undefined;

  if (Object.keys(design.demands).length === 0)
    return {
      ...tab,
      panel: <NoDemands segments={demandableSegments(design).length} onAdd={editable ? add : undefined} />,
    };
  const status = <LoadStatus run={run} />;
  if (answer === undefined) return { ...tab, panel: <div className="px-14 py-10">{status}</div> };
  if (!answer.ok)
    return {
      ...tab,
      panel: (
        <ErrorNotice
          className="m-14"
          action={
            <Button small onClick={() => change({ times: '', window: '' })}>
              Start from the demands as they are
            </Button>
          }
        >
          {answer.problems
            .map(({ field, value, expected }) =>
              field === 'multiplier'
                ? `Times ${valueOf('times')} is not possible: expected ${expected}.`
                : field === 'windowBytes'
                  ? `TCP window ${valueOf('window')} is not possible: expected ${expected}.`
                  : `${field} ${String(value)}: expected ${expected}.`,
            )
            .join(' ')}
        </ErrorNotice>
      ),
    };

  const choices = (
    <LoadChoices
      view={view}
      onView={(next) => change({ load: next === 'limits' ? '' : next })}
      kind={kind}
      onKind={(next) => change({ 'limits-of': next === 'all' ? '' : next })}
    />
  );
  return {
    ...tab,
    panel: (
      <LoadFrame
        status={status}
        verdict={<VerdictLine verdict={loadVerdict(answer, rows, design)} />}
        whatIf={
          <WhatIf
            multiplier={settled}
            onTry={setTried}
            onSettle={(next) => {
              setTried(undefined);
              change({ times: next === 1 ? '' : String(next) });
            }}
            windowBytes={windowBytes}
            onWindow={(next) => change({ window: next === undefined ? '' : String(next) })}
          />
        }
      >
        {view === 'limits' ? (
          <LimitsTable rows={rowsShown} chosen={chosenRow?.key} onChoose={choose} before={choices} />
        ) : (
          <DemandWaysTable
            design={design}
            rows={ways}
            chosen={chosenWay?.key}
            onChoose={choose}
            before={choices}
            beside={
              addOne !== undefined && (
                <Button small onClick={addOne}>
                  Add demands
                </Button>
              )
            }
          />
        )}
      </LoadFrame>
    ),
    ...(decorations === undefined ? {} : { decorations }),
    side: (
      <div className="flex flex-col gap-12 p-14">
        {chosenWay !== undefined ? (
          <DemandSide
            row={chosenWay}
            back={ways.find(({ demand, way }) => demand === chosenWay.demand && way !== chosenWay.way)}
            design={design}
            editable={editable}
            windowBytes={windowBytes}
            onEdit={() => open.select([{ collection: 'demands', id: chosenWay.demand }])}
          />
        ) : chosenRow !== undefined ? (
          <LimitSide
            row={chosenRow}
            network={network}
            report={answer}
            design={design}
            multiplier={multiplier}
          />
        ) : null}
      </div>
    ),
  };
}
