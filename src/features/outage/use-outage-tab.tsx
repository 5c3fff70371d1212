import { useDeferredValue, useEffect, useMemo, useState } from 'react';
import { setInspecting } from '../../canvas/desk-state.ts';
import type { DeskTab } from '../../canvas/desk-tab.ts';
import { Button } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { showToast } from '../../components/toast.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import type { DesignFacts } from '../../engine/network/network.ts';
import { useMedia } from '../../lib/use-media.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { kindOf } from '../../workspace/operations/name-of.ts';
import { failableAt, failedText, readFailed, toggled } from './failable.ts';
import { CutsTable, FailoversTable, PairsTable, SinglesTable } from './failure-tables.tsx';
import { PartedTable, SitesTable } from './now-tables.tsx';
import { outageDecorations } from './outage-decorations.ts';
import { outageFacts, partedRows, siteRows } from './outage-facts.ts';
import { OutageChoice, OutageHead, outageViews } from './outage-head.tsx';
import { OutageSide } from './outage-side.tsx';
import { PairsIntro } from './pairs-intro.tsx';
import { RunStatus } from './run-status.tsx';
import { useFailureRun } from './use-failure-run.ts';

const tab = { value: 'outage', label: 'Outage', usualHeightPx: 340 } as const;

/** The drawer's tab of outage: fail things on the sheet and see who is parted; try everything in turn. */
export function useOutageTab(active: boolean): DeskTab {
  const open = useOpenDesign();
  const current = useOpenState((state) => state.document);
  const { valueOf, change } = useSearchValues();
  const design = useDeferredValue(current);
  const [askedPairs, setAskedPairs] = useState<DesignFacts>();

  const view = outageViews.find((one) => one === valueOf('outage')) ?? 'every';
  const text = valueOf('failed');
  const { failed, unknown } = useMemo(() => readFailed(design, active ? text : ''), [design, active, text]);
  const network = useMemo(() => (active ? indexNetwork(design) : undefined), [active, design]);
  // The first failure of a large design takes a moment: what has failed shows at once, what comes of it follows.
  const followed = useDeferredValue(failed);
  const facts = useMemo(
    () =>
      network === undefined || (followed.length === 0 && view !== 'sites')
        ? undefined
        : outageFacts(network, followed),
    [network, followed, view],
  );
  const decorations = useMemo(
    () => (active ? outageDecorations(design, failed, facts) : undefined),
    [active, design, failed, facts],
  );
  const sites = useMemo(
    () => (facts === undefined || view !== 'sites' ? [] : siteRows(design, facts.reach)),
    [design, facts, view],
  );
  const parted = useMemo(
    () => (facts === undefined || view !== 'hosts' ? [] : partedRows(design, facts.outage)),
    [design, facts, view],
  );
  // An address that somebody was sent opens on what comes of the failure, as it did for the sender.
  const anyFailed = failed.length > 0;
  // On a phone it would leave the sheet no room; there the drawer says it, and the bar's button opens the rest.
  const isNarrow = useMedia('(max-width: 767px)');
  useEffect(() => {
    if (anyFailed && !isNarrow) setInspecting(true);
  }, [anyFailed, isNarrow]);
  // The same while things are only moved about on the sheet.
  const tried = network?.design;
  const singles = useFailureRun('singles', view === 'every' ? tried : undefined);
  const pairs = useFailureRun('pairs', askedPairs === tried ? askedPairs : undefined);
  const failovers = useFailureRun('failovers', view === 'failovers' ? tried : undefined);
  const cuts = useFailureRun('cuts', view === 'cuts' ? tried : undefined);

  if (!active) return { ...tab, panel: null };
  if (Object.keys(design.devices).length === 0)
    return {
      ...tab,
      panel: (
        <div className="flex h-full items-center justify-center p-14">
          <EmptyState className="w-full max-w-560" title="There is nothing to fail yet">
            Once devices, cables and tunnels are drawn, press one here to fail it: the sheet shows which hosts
            of which segments no longer reach each other, and the list ranks every single failure by the harm
            it does.
          </EmptyState>
        </div>
      ),
    };

  const fail = (next: readonly ElementRef[]): void => {
    change({ failed: failedText(next) });
    // What has come of it stands where the inspector would.
    open.select([]);
    if (!isNarrow) setInspecting(true);
  };
  const restore = (ref: ElementRef): void => fail(toggled(failed, ref));
  const restoreAll = (): void => fail([]);
  const pick = (ref: ElementRef): void => {
    const document = open.store.getState().document;
    const failable = failableAt(document, ref);
    if (failable === undefined)
      return void showToast({
        tone: 'other',
        text: `A ${kindOf(document, ref).toLowerCase()} does not fail. Press a device, a cable, a landing, a tunnel, an association or a transport.`,
      });
    fail(toggled(failed, failable));
  };

  const before = (
    <OutageChoice view={view} onView={(next) => change({ outage: next === 'every' ? '' : next })} />
  );
  const table = { design, before, failed, onFail: fail };
  const panels = {
    every: () => (
      <RunStatus run={singles} before={before} doing="Failing everything in turn">
        <SinglesTable {...table} rows={singles.result ?? []} empty={null} />
      </RunStatus>
    ),
    sites: () => <SitesTable design={design} rows={sites} before={before} />,
    hosts: () => (
      <PartedTable
        rows={parted}
        before={before}
        empty={
          failed.length === 0
            ? 'Nothing has failed: every host reaches whom it reaches.'
            : 'Nobody is parted by what has failed.'
        }
      />
    ),
    pairs: () => (
      <RunStatus
        run={pairs}
        before={before}
        idle={<PairsIntro onStart={() => setAskedPairs(tried)} />}
        doing="Failing them two by two"
        onCancel={() => setAskedPairs(undefined)}
      >
        <PairsTable
          {...table}
          rows={pairs.result?.pairs ?? []}
          beside={
            pairs.result !== undefined && (
              <>
                <p className="text-base text-ink-2">
                  {pairs.result.tried} pairs tried
                  {pairs.result.paired < pairs.result.considered &&
                    `, of the ${pairs.result.paired} of ${pairs.result.considered} on which most hangs`}
                  .
                </p>
                {askedPairs !== tried && (
                  <Button small kind="accent" onClick={() => setAskedPairs(tried)}>
                    The design has changed: try again
                  </Button>
                )}
              </>
            )
          }
          empty={
            <p className="px-10 py-8 text-base text-ink-2">
              No two failures part more together than each does alone.
            </p>
          }
        />
      </RunStatus>
    ),
    failovers: () => (
      <RunStatus run={failovers} before={before} doing="Following every failover">
        <FailoversTable
          {...table}
          rows={failovers.result ?? []}
          empty={
            <p className="px-10 py-8 text-base text-ink-2">
              There is no HA pair in this design, so nothing fails over.
            </p>
          }
        />
      </RunStatus>
    ),
    cuts: () => (
      <RunStatus run={cuts} before={before} doing="Looking for the smallest cuts">
        <CutsTable
          {...table}
          rows={cuts.result ?? []}
          empty={<p className="px-10 py-8 text-base text-ink-2">There is no segment in this design yet.</p>}
        />
      </RunStatus>
    ),
  };

  return {
    ...tab,
    panel: (
      <div className="flex h-full min-h-0 flex-col gap-8 px-14 py-10 max-md:h-auto">
        <OutageHead
          design={design}
          failed={failed}
          unknown={unknown}
          singles={singles.result}
          facts={followed === failed ? facts : undefined}
          onRestore={restore}
          onRestoreAll={restoreAll}
          onForget={() => fail(failed)}
        />
        <div className="min-h-0 flex-1">{panels[view]()}</div>
      </div>
    ),
    ...(decorations === undefined ? {} : { decorations }),
    onPick: pick,
    side: (
      <OutageSide
        design={design}
        failed={failed}
        facts={followed === failed ? facts : undefined}
        onRestore={restore}
        onRestoreAll={restoreAll}
      />
    ),
  };
}
