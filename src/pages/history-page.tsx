import { useQuery } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { Button, buttonClasses } from '../components/button.tsx';
import { CellGrid } from '../components/cell.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { readPoint, writePoint, type HistoryPoint } from '../features/revisions/history-point.ts';
import { sittingsQuery } from '../features/revisions/past-design.ts';
import { PointSelect } from '../features/revisions/point-select.tsx';
import { RestoreDialog } from '../features/revisions/restore-dialog.tsx';
import { timelineEntries } from '../features/revisions/timeline-entries.ts';
import { Timeline } from '../features/revisions/timeline.tsx';
import { asApiError } from '../lib/api-error.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { designPath } from '../lib/workspace-path.ts';
import { useDesignPlace } from '../workspace/design-place.tsx';
import { openDesignQuery } from '../workspace/open-design-query.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { revisionsQuery } from '../workspace/revisions-query.ts';
import { DifferenceView } from './difference-view.tsx';

/** /designs/:designId/history?from=…&to=…: what was frozen and who worked on it when, and what differs between two moments. */
export function HistoryPage() {
  const { designId, workspaceId } = useDesignPlace();
  const membership = useMembership(workspaceId);
  const { valueOf, change } = useSearchValues();
  const [restoring, setRestoring] = useState<HistoryPoint>();
  const { data: answer } = useQuery(openDesignQuery(designId));
  const revisions = useQuery(revisionsQuery(designId));
  const sittings = useQuery(sittingsQuery(designId));
  const meta = useOpenState((state) => state.document.meta);
  const sequence = useOpenState((state) => state.sequence);
  usePageTitle(`History of ${meta.title}`);

  const failure = revisions.error ?? sittings.error;
  if (failure !== null)
    return (
      <Page>
        <ErrorNotice
          action={
            <Button small onClick={() => void Promise.all([revisions.refetch(), sittings.refetch()])}>
              Try again
            </Button>
          }
        >
          {asApiError(failure).message}
        </ErrorNotice>
      </Page>
    );
  if (revisions.data === undefined || sittings.data === undefined || answer === undefined)
    return (
      <Page>
        <p role="status" className="text-base text-ink-2">
          Reading the history…
        </p>
      </Page>
    );

  const { summary } = answer;
  const asked = (['from', 'to'] as const).map((field) => {
    const text = valueOf(field);
    return text === '' ? undefined : readPoint(field, text, revisions.data, sequence);
  });
  const problems = asked.flatMap((each) => (each?.ok === false ? [each.problem] : []));
  const [from, to] = asked.map((each) => (each?.ok === true ? each.point : undefined));
  const mayRestore =
    may(membership, 'design.edit') && summary.state !== 'in-review' && summary.archivedAt === null;
  const compare = (before: HistoryPoint, after: HistoryPoint): void =>
    change({ from: writePoint(before), to: writePoint(after) });
  const isComparing = from !== undefined && to !== undefined;

  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-0 flex-1 flex-col outline-none max-md:overflow-y-auto"
    >
      <div className="flex shrink-0 flex-wrap items-end gap-x-20 gap-y-10 border-b-1.5 border-ink bg-panel px-28 py-10 max-sm:px-14">
        <h1 className="min-w-0 flex-1 self-center text-page font-semibold">
          {isComparing ? 'What changed' : 'History'}
        </h1>
        <CellGrid columns={2} className="w-480 max-sm:w-full">
          <PointSelect
            label="From"
            value={from}
            revisions={revisions.data}
            sittings={sittings.data.sittings}
            onChange={(value) => change({ from: value, to: valueOf('to') === '' ? 'now' : valueOf('to') })}
          />
          <PointSelect
            label="To"
            value={to}
            revisions={revisions.data}
            sittings={sittings.data.sittings}
            onChange={(value) => change({ to: value })}
          />
        </CellGrid>
        <div className="flex gap-8">
          {may(membership, 'share.manage') && (
            <Link to={`${designPath(designId)}/shares`} className={buttonClasses({})}>
              Links for guests
            </Link>
          )}
          {isComparing && <Button onClick={() => compare(to, from)}>Swap</Button>}
          {(valueOf('from') !== '' || valueOf('to') !== '') && (
            <Button onClick={() => change({ from: '', to: '' })}>Back to the history</Button>
          )}
        </div>
      </div>
      {problems.map((problem) => (
        <ErrorNotice key={problem} className="m-20 mb-0">
          {problem}
        </ErrorNotice>
      ))}
      {isComparing ? (
        <DifferenceView designId={designId} from={from} to={to} revisions={revisions.data} />
      ) : (
        <div className="min-h-0 flex-1 overflow-y-auto bg-paper px-28 py-20 max-md:overflow-visible max-sm:px-14">
          <div className="max-w-940">
            <Timeline
              summary={summary}
              revision={meta.revision}
              entries={timelineEntries(revisions.data, sittings.data)}
              onCompare={compare}
              onRestore={mayRestore ? setRestoring : undefined}
            />
          </div>
        </div>
      )}
      {restoring !== undefined && (
        <RestoreDialog
          designId={designId}
          point={restoring}
          revisions={revisions.data}
          onClose={() => setRestoring(undefined)}
        />
      )}
    </main>
  );
}

function Page({ children }: { readonly children: ReactNode }) {
  return (
    <main id="main" tabIndex={-1} className="min-h-0 flex-1 overflow-y-auto px-28 py-20 outline-none">
      <h1 className="pb-12 text-page font-semibold">History</h1>
      {children}
    </main>
  );
}
