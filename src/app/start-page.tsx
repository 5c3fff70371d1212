import { Navigate } from 'react-router-dom';
import { useCurrentWorkspaceId, useSignOut } from '../lib/session.ts';
import { Button } from '../components/button.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { engagementsPath } from '../lib/workspace-path.ts';
import { usePageTitle } from '../lib/page-title.ts';

/** '/': the engagements of the workspace last worked in. */
export function StartPage() {
  const workspaceId = useCurrentWorkspaceId();
  return workspaceId === null ? <NoWorkspace /> : <Navigate to={engagementsPath(workspaceId)} replace />;
}

function NoWorkspace() {
  usePageTitle('No workspace');
  const signOut = useSignOut();
  return (
    <main id="main" tabIndex={-1} className="mx-auto w-full max-w-460 p-28 outline-none">
      <EmptyState
        title="You are in no workspace"
        action={
          <Button busy={signOut.isPending} onClick={() => signOut.mutate()}>
            Sign out
          </Button>
        }
      >
        Engagements and designs belong to a workspace. Ask its owner to take you in, then load this page
        again.
      </EmptyState>
    </main>
  );
}
