import { queryOptions, useQuery } from '@tanstack/react-query';
import { Link, Navigate } from 'react-router-dom';
import { buttonClasses } from '../components/button.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { ReadingState } from '../components/reading-state.tsx';
import { firstOwnerStateSchema } from '../contract/workspaces.ts';
import { FirstOwnerForm } from '../features/sign-in/first-owner-form.tsx';
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
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-dvh flex-col p-28 outline-none max-lg:p-12 max-sm:p-0"
    >
      <SheetFrame>
        {query.data === undefined ? (
          <div className="p-28">
            <ReadingState what="The first facts" query={query} />
          </div>
        ) : query.data.isAwaited ? (
          <div className="mt-auto flex items-end justify-between gap-28 max-lg:mt-0 max-lg:flex-col max-lg:items-stretch max-lg:gap-0">
            <div className="max-w-440 p-28 text-base text-ink-2 max-lg:order-2 max-lg:p-14">
              <p>
                Nobody has an account on this server yet. Whoever started it was shown a code: with it the
                first person makes their account and a workspace, and invites everybody else from there.
              </p>
              <p className="mt-10">The code works once. Starting the server again shows it again.</p>
            </div>
            <div className="w-570 shrink-0 border-t-[2.4px] border-l-[2.4px] border-ink max-lg:order-1 max-lg:w-auto max-lg:border-0 max-lg:border-b-[2.4px]">
              <FirstOwnerForm />
            </div>
          </div>
        ) : (
          <div className="m-auto w-full max-w-560 p-28 max-sm:p-14">
            <h1 className="sr-only">First owner</h1>
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
          </div>
        )}
      </SheetFrame>
    </main>
  );
}
