import { queryOptions, useQuery } from '@tanstack/react-query';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { Button, buttonClasses } from '../components/button.tsx';
import { showToast } from '../components/toast.tsx';
import { openedResetSchema } from '../contract/password-reset.ts';
import { EndedLink } from '../features/sign-in/ended-link.tsx';
import { FrontSheet } from '../features/sign-in/front-sheet.tsx';
import { NewPasswordForm } from '../features/sign-in/new-password-form.tsx';
import { callApi } from '../lib/api-client.ts';
import { asApiError } from '../lib/api-error.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { useRefreshSession } from '../lib/session.ts';

const openedResetQuery = (token: string) =>
  queryOptions({
    queryKey: ['opened-reset', token],
    queryFn: ({ signal }) =>
      callApi(openedResetSchema, '/api/password-reset/link', { method: 'POST', body: { token }, signal }),
    retry: false,
  });

/** /reset/:token: sets a new password by the link of a mail. */
export function NewPasswordPage() {
  usePageTitle('New password');
  const { token = '' } = useParams();
  const navigate = useNavigate();
  const { data, error, isFetching, refetch } = useQuery(openedResetQuery(token));
  const refreshSession = useRefreshSession();
  if (error !== null && data === undefined) {
    const isOver = asApiError(error).code === 'not-found';
    return (
      <EndedLink
        heading="New password"
        title={isOver ? 'This link holds no longer' : 'The link could not be read'}
        action={
          isOver ? (
            <Link to="/reset" className={buttonClasses({ kind: 'primary' })}>
              Ask for another
            </Link>
          ) : (
            <Button kind="primary" busy={isFetching} onClick={() => void refetch()}>
              Try again
            </Button>
          )
        }
      >
        {isOver ? 'It was used, or is older than an hour.' : error.message}
      </EndedLink>
    );
  }
  if (data === undefined) return null;
  const onSet = async (): Promise<void> => {
    // This browser may have been signed in: that is over, too.
    await refreshSession();
    showToast({ tone: 'done', text: 'Your new password is set. Sign in with it.' });
    await navigate('/sign-in', { replace: true });
  };
  return (
    <FrontSheet>
      <NewPasswordForm token={token} email={data.email} onSet={() => void onSet()} />
    </FrontSheet>
  );
}
