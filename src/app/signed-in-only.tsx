import { useQuery, useQueryClient } from '@tanstack/react-query';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { signInPath } from '../lib/return-path.ts';
import { hasLeft, sessionQuery } from '../lib/session.ts';

/** Shows what is inside to people who are signed in, and leads everybody else to the sign-in and back. */
export function SignedInOnly() {
  const { data: session, error, refetch, isFetching } = useQuery(sessionQuery);
  const queryClient = useQueryClient();
  const { pathname, search, hash } = useLocation();
  if (session === undefined && error !== null) {
    return (
      <main id="main" tabIndex={-1} className="mx-auto max-w-560 p-28 outline-none">
        <ErrorNotice
          action={
            <Button small busy={isFetching} onClick={() => void refetch()}>
              Try again
            </Button>
          }
        >
          {error.message}
        </ErrorNotice>
      </main>
    );
  }
  if (session === undefined) return null;
  if (session.person === null) {
    const back = hasLeft(queryClient) ? '/' : `${pathname}${search}${hash}`;
    return <Navigate to={signInPath(back)} replace />;
  }
  return <Outlet />;
}
