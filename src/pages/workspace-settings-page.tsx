import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { EmptyState } from '../components/empty-state.tsx';
import { ReadingState } from '../components/reading-state.tsx';
import { showToast } from '../components/toast.tsx';
import { MainBar } from '../features/account/main-bar.tsx';
import { DeleteSection } from '../features/workspace-settings/delete-section.tsx';
import { ExportSection } from '../features/workspace-settings/export-section.tsx';
import { NameSection } from '../features/workspace-settings/name-section.tsx';
import { settingsQuery } from '../features/workspace-settings/settings-query.ts';
import { TwoStepSection } from '../features/workspace-settings/two-step-section.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { rememberWorkspace } from '../lib/workspace-path.ts';
import { NotFoundPage } from './not-found-page.tsx';

/** /workspaces/:workspaceId/settings: what owners set for their workspace. */
export function WorkspaceSettingsPage() {
  usePageTitle('Workspace settings');
  const { workspaceId = '' } = useParams();
  const membership = useMembership(workspaceId);
  const navigate = useNavigate();
  const manages = may(membership, 'workspace.manage');
  const query = useQuery({ ...settingsQuery(workspaceId), enabled: manages });
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
          <h1 className="text-page font-semibold">Workspace settings</h1>
        </div>
        {!manages ? (
          <EmptyState title="For owners">
            Owners of {membership.workspaceName} set its name and who gets in how; its page People says who
            they are.
          </EmptyState>
        ) : query.data === undefined ? (
          <ReadingState what="The settings" query={query} />
        ) : (
          <>
            <NameSection settings={query.data} />
            <TwoStepSection settings={query.data} />
            <ExportSection settings={query.data} />
            <DeleteSection
              settings={query.data}
              onDeleted={() => {
                void navigate('/');
                showToast({ tone: 'done', text: `${query.data.name} is deleted.` });
              }}
            />
          </>
        )}
      </main>
    </>
  );
}
