import { queryOptions, useQuery } from '@tanstack/react-query';
import { Link, Navigate } from 'react-router-dom';
import { buttonClasses } from '../components/button.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { ReadingState } from '../components/reading-state.tsx';
import { firstOwnerStateSchema } from '../contract/workspaces.ts';
import { FirstOwnerForm } from '../features/sign-in/first-owner-form.tsx';
import { FrontSheet } from '../features/sign-in/front-sheet.tsx';
import { SheetFrame } from '../features/sign-in/sheet-frame.tsx';
import { callApi } from '../lib/api-client.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { sessionQuery } from '../lib/session.ts';

const firstOwnerQuery = queryOptions({
  queryKey: ['first-owner'],
  queryFn: ({ signal }) => callApi(firstOwnerStateSchema, '/api/first-owner', { signal }),
});

/** /first-owner: where an empty server gets its first person, with the code that it printed. */
export function FirstOwnerPage() {
  usePageTitle('First owner');
  const { data: session } = useQuery(sessionQuery);
  const query = useQuery(firstOwnerQuery);
  if (session !== undefined && session.person !== null) return <Navigate to="/" replace />;
  if (query.data?.isAwaited === true) {
    return (
      <FrontSheet
        beside={
          <>
            <p>
              Nobody has an account on this server yet. Whoever started it was shown a code: with it the first
              person makes their account and a workspace, and invites everybody else from there.
            </p>
            <p className="mt-10">The code works once. Until then starting the server again shows it again.</p>
          </>
        }
      >
        <FirstOwnerForm />
      </FrontSheet>
    );
  }
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-dvh flex-col p-28 outline-none max-lg:p-12 max-sm:p-0"
    >
      <SheetFrame>
        <div className="m-auto w-full max-w-560 p-28 max-sm:p-14">
          <h1 className="sr-only">First owner</h1>
          {query.data === undefined ? (
            <ReadingState what="The first facts" query={query} />
          ) : (
            <EmptyState
              title="The first owner is here already"
              action={
                <Link to="/sign-in" className={buttonClasses({ kind: 'primary' })}>
                  Sign in
                </Link>
              }
            >
              Sign in with your account, or ask an owner of a workspace to invite you.
            </EmptyState>
          )}
        </div>
      </SheetFrame>
    </main>
  );
}
