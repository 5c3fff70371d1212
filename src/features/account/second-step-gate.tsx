import { useEffect, useState, type ReactNode } from 'react';
import { Link, useLocation, useParams } from 'react-router-dom';
import { buttonClasses } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { onSecondStepRequired } from '../../lib/api-client.ts';
import { usePageTitle } from '../../lib/page-title.ts';
import { useRefreshSession, useSession } from '../../lib/session.ts';
import { MainBar } from './main-bar.tsx';

/** Shows what is inside, and in its place the way to two-step sign-in where a workspace asks the reader for it. */
export function SecondStepGate({ children }: { readonly children: ReactNode }) {
  const { workspaceId } = useParams();
  const { pathname, search } = useLocation();
  const refreshSession = useRefreshSession();
  /** Where the server refused: a page of a design doesn't say in its address whose it is. */
  const [refusedAt, setRefusedAt] = useState<string>();
  useEffect(
    () =>
      onSecondStepRequired(() => {
        setRefusedAt(pathname);
        void refreshSession();
      }),
    [pathname, refreshSession],
  );
  const shut = (useSession()?.memberships ?? []).filter(({ needsSecondStep }) => needsSecondStep);
  const here = shut.find((membership) => membership.workspaceId === workspaceId);
  const isRefused = refusedAt === pathname && shut.length > 0;
  if (here === undefined && !isRefused) return children;
  return <AskedFor workspaceName={here?.workspaceName} returnTo={`${pathname}${search}`} />;
}

function AskedFor({
  workspaceName,
  returnTo,
}: {
  readonly workspaceName: string | undefined;
  readonly returnTo: string;
}) {
  usePageTitle('Two-step sign-in is asked for');
  return (
    <>
      <MainBar />
      <main id="main" tabIndex={-1} className="mx-auto w-full max-w-560 p-28 pt-60 outline-none max-sm:px-14">
        <h1 className="sr-only">Two-step sign-in is asked for</h1>
        <EmptyState
          className="bg-paper"
          title={`${workspaceName ?? 'This workspace'} asks for two-step sign-in`}
          action={
            <Link
              to={`/account/two-step?return=${encodeURIComponent(returnTo)}`}
              className={buttonClasses({ kind: 'primary' })}
            >
              Set it up
            </Link>
          }
        >
          Its owners want a code from an authenticator app besides the password. Setting it up takes a minute;
          what is in here opens at once afterwards.
        </EmptyState>
      </main>
    </>
  );
}
