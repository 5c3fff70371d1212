import { Link, useLocation } from 'react-router-dom';
import { buttonClasses } from '../components/button.tsx';
import { EmptyState, UncabledPicture } from '../components/empty-state.tsx';
import { MainBar } from '../features/account/main-bar.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** Any address that leads nowhere. */
export function NotFoundPage() {
  usePageTitle('Nothing here');
  const { pathname } = useLocation();
  return (
    <>
      <MainBar />
      <main id="main" tabIndex={-1} className="mx-auto w-full max-w-560 p-28 pt-60 outline-none">
        <h1 className="sr-only">Nothing here</h1>
        <EmptyState
          className="bg-paper"
          picture={<UncabledPicture />}
          title="Nothing is plugged in here"
          action={
            <Link to="/" className={buttonClasses({ kind: 'primary' })}>
              To the engagements
            </Link>
          }
        >
          There is no page at <span className="font-medium break-all text-ink">{pathname}</span>. The link may
          have been copied in part, or what it led to has gone.
        </EmptyState>
      </main>
    </>
  );
}
