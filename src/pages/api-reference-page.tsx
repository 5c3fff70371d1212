import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { useLocation } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { SearchField } from '../components/search-field.tsx';
import { MainBar } from '../features/account/main-bar.tsx';
import { apiDocumentQuery, descriptionPath, topicsOf } from '../features/api-reference/api-document.ts';
import { ApiTopics } from '../features/api-reference/api-topics.tsx';
import { asApiError } from '../lib/api-error.ts';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';

/** /http-api?q=…#operation: every route of the server, for whoever scripts it. */
export function ApiReferencePage() {
  usePageTitle('HTTP API');
  const { valueOf, change } = useSearchValues();
  const { hash } = useLocation();
  const words = valueOf('q');
  const answer = useQuery(apiDocumentQuery);
  const isThere = answer.data !== undefined;
  useEffect(() => {
    const asked = isThere && hash !== '' ? document.getElementById(hash.slice(1)) : null;
    asked?.querySelector('details')?.setAttribute('open', '');
    asked?.scrollIntoView({ block: 'start' });
  }, [hash, isThere]);
  const topics = answer.data === undefined ? [] : topicsOf(answer.data, words);
  return (
    <>
      <MainBar />
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 py-12">
          <h1 className="text-page font-semibold">HTTP API</h1>
          <SearchField
            label="Word, path or method"
            value={words}
            onChange={(q) => change({ q })}
            className="ml-auto w-276 max-sm:w-full"
          />
        </div>
        <p className="mb-14 max-w-720 text-base text-ink-2">
          Scripts send a personal token, made in your account, as <code>Authorization: Bearer</code>. It may
          never do more than you may. All of this stands, by the OpenAPI Specification, at{' '}
          <a href={descriptionPath} className="underline">
            {descriptionPath}
          </a>
          .
        </p>
        {answer.error !== null && (
          <ErrorNotice
            action={
              <Button small onClick={() => void answer.refetch()}>
                Try again
              </Button>
            }
          >
            {asApiError(answer.error).message}
          </ErrorNotice>
        )}
        {answer.isPending && <p role="status">Loading…</p>}
        {isThere && topics.length === 0 && (
          <EmptyState
            title="No route speaks of this"
            action={<Button onClick={() => change({ q: '' })}>Show all routes</Button>}
          >
            Try a word such as waivers, or a method such as PATCH.
          </EmptyState>
        )}
        <ApiTopics topics={topics} origin={location.origin} />
      </main>
    </>
  );
}
