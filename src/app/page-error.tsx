import { useEffect } from 'react';
import { Link, useRouteError } from 'react-router-dom';
import { Button, buttonClasses } from '../components/button.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** In place of a page that failed; the bar and the other pages still work. */
export function PageError() {
  usePageTitle('This page failed');
  const error = useRouteError();
  useEffect(() => console.error(error), [error]);
  return (
    <main id="main" tabIndex={-1} className="mx-auto flex w-full max-w-560 flex-col gap-14 p-28 outline-none">
      <h1 className="text-page font-semibold">This page failed</h1>
      <ErrorNotice>
        {isMissingPart(error)
          ? 'A part of this page could not be loaded. The server may have been updated, or the network was away for a moment: load the page again.'
          : `${messageOf(error)} What was saved is safe. Load the page again; if it fails once more, tell whoever runs this server.`}
      </ErrorNotice>
      <div className="flex gap-8">
        <Button kind="primary" onClick={() => window.location.reload()}>
          Load again
        </Button>
        <Link to="/" className={buttonClasses()}>
          To the start
        </Link>
      </div>
    </main>
  );
}

// Browsers word a failed import() differently; all of them speak of the module.
const isMissingPart = (error: unknown): boolean =>
  error instanceof TypeError && /import|module/i.test(error.message);

function messageOf(error: unknown): string {
  const message = error instanceof Error ? error.message : String(error);
  return /[.!?]$/.test(message) ? message : `${message}.`;
}
