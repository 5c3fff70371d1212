import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { ReadingState } from '../components/reading-state.tsx';
import { showToast } from '../components/toast.tsx';
import type { Member } from '../contract/workspaces.ts';
import { MainBar } from '../features/account/main-bar.tsx';
import { InviteDialog } from '../features/invitations/invite-dialog.tsx';
import { PendingInvitations } from '../features/invitations/pending-invitations.tsx';
import { PeopleTable } from '../features/people/people-table.tsx';
import { peopleQuery } from '../features/people/people-query.ts';
import { RemovePersonDialog } from '../features/people/remove-person-dialog.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership, useSession } from '../lib/session.ts';
import { rememberWorkspace } from '../lib/workspace-path.ts';
import { NotFoundPage } from './not-found-page.tsx';

/** /workspaces/:workspaceId/people: who is in the workspace, with which role. */
export function PeoplePage() {
  usePageTitle('People');
  const { workspaceId = '' } = useParams();
  const membership = useMembership(workspaceId);
  const readerId = useSession()?.person?.id ?? '';
  const navigate = useNavigate();
  const [isInviting, setInviting] = useState(false);
  const [leaving, setLeaving] = useState<Member>();
  const query = useQuery({ ...peopleQuery(workspaceId), enabled: membership !== undefined });
  useEffect(() => {
    if (membership !== undefined) rememberWorkspace(workspaceId);
  }, [membership, workspaceId]);
  if (membership === undefined) return <NotFoundPage />;
  const manages = may(membership, 'people.manage');
  return (
    <>
      <MainBar workspaceId={workspaceId} />
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 py-12">
          <h1 className="text-page font-semibold">People</h1>
          {manages && (
            <Button kind="primary" className="ml-auto" onClick={() => setInviting(true)}>
              Invite…
            </Button>
          )}
        </div>
        <p className="mb-14 max-w-720 text-base text-ink-2">
          {manages
            ? 'Who is in this workspace, with which role. Whoever is removed loses access at once; what they did stays, under their name.'
            : 'Who is in this workspace. Its owners change roles, invite and remove people.'}
        </p>
        {query.data === undefined ? (
          <ReadingState what="The people" query={query} />
        ) : (
          <PeopleTable
            workspaceId={workspaceId}
            people={query.data}
            readerId={readerId}
            manages={manages}
            onRemove={setLeaving}
          />
        )}
        {manages && (
          <section aria-labelledby="invitations" className="mt-28">
            <h2 id="invitations" className="mb-10 text-section font-semibold">
              Invitations
            </h2>
            <PendingInvitations workspaceId={workspaceId} />
          </section>
        )}
      </main>
      {isInviting && <InviteDialog workspaceId={workspaceId} onClose={() => setInviting(false)} />}
      {leaving !== undefined && (
        <RemovePersonDialog
          workspaceId={workspaceId}
          workspaceName={membership.workspaceName}
          member={leaving}
          isReader={leaving.personId === readerId}
          onGone={() => {
            setLeaving(undefined);
            if (leaving.personId === readerId) void navigate('/');
            showToast({
              tone: 'done',
              text:
                leaving.personId === readerId
                  ? `You have left ${membership.workspaceName}.`
                  : `${leaving.name} is removed.`,
            });
          }}
          onClose={() => setLeaving(undefined)}
        />
      )}
    </>
  );
}
