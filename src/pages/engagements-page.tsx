import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useParams } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { CheckBox } from '../components/check-box.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { SearchField } from '../components/search-field.tsx';
import type { DesignSummary, Engagement } from '../contract/designs.ts';
import { MainBar } from '../features/account/main-bar.tsx';
import { EngagementDialog } from '../features/engagements/engagement-dialog.tsx';
import { EngagementRow } from '../features/engagements/engagement-row.tsx';
import { engagementsQuery } from '../features/engagements/engagements-query.ts';
import { FaultsWaiting } from '../features/engagements/faults-waiting.tsx';
import { filterEngagements, isDesignState } from '../features/engagements/filter-engagements.ts';
import { NewDesignDialog } from '../features/engagements/new-design-dialog.tsx';
import { NoEngagements } from '../features/engagements/no-engagements.tsx';
import { RenameDesignDialog } from '../features/engagements/rename-design-dialog.tsx';
import { StateFilter } from '../features/engagements/state-filter.tsx';
import { useArchiving } from '../features/engagements/use-archiving.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { useKeptFocus } from '../lib/use-kept-focus.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { rememberWorkspace } from '../lib/workspace-path.ts';
import { NotFoundPage } from './not-found-page.tsx';

type OpenDialog =
  | { readonly kind: 'engagement'; readonly engagement?: Engagement }
  | { readonly kind: 'new-design'; readonly engagementId?: string; readonly copyOf?: DesignSummary }
  | { readonly kind: 'rename'; readonly design: DesignSummary };

/** /workspaces/:workspaceId/engagements?state=…&q=…&archived=1: the customers' pieces of work and their designs. */
export function EngagementsPage() {
  usePageTitle('Engagements');
  const { workspaceId = '' } = useParams();
  const membership = useMembership(workspaceId);
  const { valueOf, change } = useSearchValues();
  const [dialog, setDialog] = useState<OpenDialog>();
  const { archiveEngagement, archiveDesign, deleteDesign } = useArchiving();
  const asked = valueOf('state');
  const state = isDesignState(asked) ? asked : null;
  const words = valueOf('q');
  const showArchived = valueOf('archived') === '1';
  const { data, error, refetch, isFetching } = useQuery({
    ...engagementsQuery(workspaceId, showArchived),
    enabled: membership !== undefined,
  });
  useKeptFocus(data);
  useEffect(() => {
    if (membership !== undefined) rememberWorkspace(workspaceId);
  }, [membership, workspaceId]);

  if (membership === undefined) return <NotFoundPage />;
  const engagements = data ?? [];
  const shown = filterEngagements(engagements, { state, words });
  const open = engagements.filter(({ archivedAt }) => archivedAt === null);
  const closeDialog = (): void => setDialog(undefined);
  const search = { label: 'Design or number', value: words, onChange: (q: string) => change({ q }) };

  return (
    <>
      <MainBar workspaceId={workspaceId}>
        <div className="ml-auto flex w-232 items-center border-l border-rule-2 pl-12 max-lg:hidden">
          <SearchField {...search} className="flex-1" />
        </div>
      </MainBar>
      <div className="flex min-h-0 flex-1 max-lg:flex-col max-lg:overflow-y-auto">
        <main
          id="main"
          tabIndex={-1}
          className="min-w-0 flex-1 overflow-y-auto px-28 outline-none max-lg:overflow-visible max-sm:px-14"
        >
          <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 py-12">
            <h1 className="text-page font-semibold">Engagements</h1>
            <StateFilter
              engagements={engagements}
              value={state}
              onChange={(chosen) => change({ state: chosen ?? '' })}
            />
            <CheckBox
              checked={showArchived}
              onChange={(event) => change({ archived: event.target.checked ? '1' : '' })}
            >
              Show archived
            </CheckBox>
            <SearchField {...search} className="w-full lg:hidden" />
            <div className="ml-auto flex gap-8 max-sm:ml-0">
              {may(membership, 'engagement.create') && (
                <Button onClick={() => setDialog({ kind: 'engagement' })}>New engagement</Button>
              )}
              {may(membership, 'design.create') && open.length > 0 && (
                <Button kind="primary" onClick={() => setDialog({ kind: 'new-design' })}>
                  New design
                </Button>
              )}
            </div>
          </div>
          {error !== null && (
            <ErrorNotice
              className="mb-16"
              action={
                <Button small busy={isFetching} onClick={() => void refetch()}>
                  Try again
                </Button>
              }
            >
              The engagements could not be read. {error.message}
            </ErrorNotice>
          )}
          {data === undefined && error === null && (
            <p role="status" className="border-t border-ink py-16 text-ink-2">
              Reading the engagements…
            </p>
          )}
          {shown.map((engagement) => (
            <EngagementRow
              key={engagement.id}
              engagement={engagement}
              membership={membership}
              onNewDesign={({ id }) => setDialog({ kind: 'new-design', engagementId: id })}
              onCopyDesign={(copyOf, { id }) => setDialog({ kind: 'new-design', engagementId: id, copyOf })}
              onEditEngagement={(each) => setDialog({ kind: 'engagement', engagement: each })}
              onRenameDesign={(design) => setDialog({ kind: 'rename', design })}
              onArchiveEngagement={archiveEngagement}
              onArchiveDesign={archiveDesign}
              onDeleteDesign={deleteDesign}
            />
          ))}
          {data !== undefined && shown.length === 0 && (
            <NoEngagements
              filtered={engagements.length > 0}
              mayCreate={may(membership, 'engagement.create')}
              onCreate={() => setDialog({ kind: 'engagement' })}
              onClearFilter={() => change({ state: '', q: '' })}
            />
          )}
        </main>
        <FaultsWaiting engagements={engagements} canOpen={may(membership, 'design.read')} />
      </div>
      {dialog?.kind === 'engagement' && (
        <EngagementDialog workspaceId={workspaceId} engagement={dialog.engagement} onClose={closeDialog} />
      )}
      {dialog?.kind === 'new-design' && (
        <NewDesignDialog
          engagements={open}
          engagementId={dialog.engagementId}
          copyOf={dialog.copyOf}
          onClose={closeDialog}
        />
      )}
      {dialog?.kind === 'rename' && <RenameDesignDialog design={dialog.design} onClose={closeDialog} />}
    </>
  );
}
