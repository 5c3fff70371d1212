import { useEffect } from 'react';
import { useParams } from 'react-router-dom';
import { EmptyState } from '../components/empty-state.tsx';
import { MainBar } from '../features/account/main-bar.tsx';
import { ActivityDesk } from '../features/activity/activity-desk.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { rememberWorkspace } from '../lib/workspace-path.ts';
import { NotFoundPage } from './not-found-page.tsx';

/** /workspaces/:workspaceId/activity: who did what in the workspace, and when. */
export function ActivityPage() {
  usePageTitle('Activity');
  const { workspaceId = '' } = useParams();
  const membership = useMembership(workspaceId);
  useEffect(() => {
    if (membership !== undefined) rememberWorkspace(workspaceId);
  }, [membership, workspaceId]);
  if (membership === undefined) return <NotFoundPage />;
  return (
    <>
      <MainBar workspaceId={workspaceId} />
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <div className="flex min-h-62 items-center py-12">
          <h1 className="text-page font-semibold">Activity</h1>
        </div>
        <p className="mb-14 max-w-720 text-base text-ink-2">
          Who did what in this workspace, and when. Nothing here can be changed, and it stays when a design or
          a person is gone.
        </p>
        {may(membership, 'activity.read') ? (
          <ActivityDesk workspaceId={workspaceId} />
        ) : (
          <EmptyState title="For owners, architects and reviewers">
            Your role sees designs and their revisions; what people did is for those who draw, check and run
            the workspace.
          </EmptyState>
        )}
      </main>
    </>
  );
}
