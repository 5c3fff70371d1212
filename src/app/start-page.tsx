import { useState } from 'react';
import { Navigate } from 'react-router-dom';
import { useCurrentWorkspaceId, useSignOut } from '../lib/session.ts';
import { Button } from '../components/button.tsx';
import { EmptyState, UncabledPicture } from '../components/empty-state.tsx';
import { NewWorkspaceDialog } from '../features/account/new-workspace-dialog.tsx';
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
  const [isStarting, setStarting] = useState(false);
  return (
    <main id="main" tabIndex={-1} className="mx-auto w-full max-w-560 p-28 pt-60 outline-none max-sm:px-14">
      <h1 className="sr-only">No workspace</h1>
      <EmptyState
        className="bg-paper"
        picture={<UncabledPicture />}
        title="You are in no workspace"
        action={
          <>
            <Button kind="primary" onClick={() => setStarting(true)}>
              New workspace
            </Button>
            <Button busy={signOut.isPending} onClick={() => signOut.mutate()}>
              Sign out
            </Button>
          </>
        }
      >
        A workspace holds a team’s engagements and designs. Start one of your own, or ask an owner to invite
        you to theirs and follow the link in the mail.
      </EmptyState>
      {isStarting && <NewWorkspaceDialog onClose={() => setStarting(false)} />}
    </main>
  );
}
