import { useQuery } from '@tanstack/react-query';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { Button, buttonClasses } from '../components/button.tsx';
import { showToast } from '../components/toast.tsx';
import { EndedLink } from '../features/sign-in/ended-link.tsx';
import { FrontSheet } from '../features/sign-in/front-sheet.tsx';
import { InvitationForm } from '../features/sign-in/invitation-form.tsx';
import { offeredInvitationQuery } from '../features/sign-in/invitation-query.ts';
import { asApiError } from '../lib/api-error.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { sessionQuery, useRefreshSession } from '../lib/session.ts';
import { engagementsPath } from '../lib/workspace-path.ts';

/** /invitation/:token: what the link invites to, and the way in. */
export function InvitationPage() {
  usePageTitle('Invitation');
  const { token = '' } = useParams();
  const navigate = useNavigate();
  const { data: session } = useQuery(sessionQuery);
  const { data: offered, error, isFetching, refetch } = useQuery(offeredInvitationQuery(token));
  const refreshSession = useRefreshSession();
  if (error !== null && offered === undefined) {
    const isOver = asApiError(error).code === 'not-found';
    return (
      <EndedLink
        heading="Invitation"
        title={isOver ? 'This invitation holds no longer' : 'The invitation could not be read'}
        action={
          isOver ? (
            <Link to="/sign-in" className={buttonClasses({ kind: 'primary' })}>
              Sign in
            </Link>
          ) : (
            <Button kind="primary" busy={isFetching} onClick={() => void refetch()}>
              Try again
            </Button>
          )
        }
      >
        {isOver
          ? 'It was used, taken back or sent again, or is older than seven days. Ask whoever invited you for a new one; if it was you who used it, sign in.'
          : error.message}
      </EndedLink>
    );
  }
  if (offered === undefined || session === undefined) return null;
  const onJoined = async (workspaceId: string): Promise<void> => {
    await refreshSession();
    showToast({ tone: 'done', text: `You are in ${offered.workspaceName} now, as ${offered.role}.` });
    await navigate(engagementsPath(workspaceId), { replace: true });
  };
  return (
    <FrontSheet beside="A workspace holds a team’s engagements, designs, pools of numbers and measured equipment. What you may do in it comes with your role.">
      <InvitationForm
        token={token}
        offered={offered}
        reader={session.person}
        onJoined={(workspaceId) => void onJoined(workspaceId)}
      />
    </FrontSheet>
  );
}
