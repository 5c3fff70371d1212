import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import { Button, buttonClasses } from '../components/button.tsx';
import { Mark } from '../components/mark.tsx';
import { Stamp } from '../components/stamp.tsx';
import type { SharedView } from '../contract/shares.ts';
import { sharedQuery, type ShareKey } from '../features/sharing/shared-query.ts';
import { SharedSheet } from '../features/sharing/shared-sheet.tsx';
import { SharedFindings, SharedSummary } from '../features/sharing/shared-summary.tsx';
import { Cautions } from '../features/sign-in/cautions.tsx';
import { EndedLink } from '../features/sign-in/ended-link.tsx';
import { FrontSheet } from '../features/sign-in/front-sheet.tsx';
import { PassphraseForm } from '../features/sign-in/passphrase-form.tsx';
import { asApiError } from '../lib/api-error.ts';
import { dayInWords } from '../lib/format-time.ts';
import { usePageTitle } from '../lib/page-title.ts';

/** /share/:token: what a guest sees of one revision. */
export function SharedPage() {
  const { token = '' } = useParams();
  const [passphrase, setPassphrase] = useState<string>();
  const key: ShareKey = passphrase === undefined ? { token } : { token, passphrase };
  const { data, error, isFetching, refetch } = useQuery(sharedQuery(key));
  const view = data?.isLocked === false ? data.view : undefined;
  usePageTitle(view === undefined ? 'A shared plan' : `${view.title}, revision ${view.revision}`);
  useKeptOutOfIndexes();
  if (view !== undefined) return <Shared view={view} shareKey={key} />;
  const refusal = error === null ? null : asApiError(error);
  if (data?.isLocked === true || passphrase !== undefined)
    return (
      <FrontSheet beside="Whoever shared this plan with you set a passphrase for it. Ask them if you have none.">
        <PassphraseForm
          busy={isFetching}
          refusal={refusal?.message}
          onSubmit={(typed) => (typed === passphrase ? void refetch() : setPassphrase(typed))}
        />
      </FrontSheet>
    );
  if (refusal !== null)
    return (
      <EndedLink
        heading="A shared plan"
        title={
          refusal.code === 'not-found' || refusal.code === 'invalid-request'
            ? 'This link opens nothing any more'
            : 'The plan could not be read'
        }
        action={
          refusal.code === 'not-found' || refusal.code === 'invalid-request' ? (
            <Link to="/wire" className={buttonClasses({})}>
              Work out bytes on the wire
            </Link>
          ) : (
            <Button kind="primary" busy={isFetching} onClick={() => void refetch()}>
              Try again
            </Button>
          )
        }
      >
        {refusal.code === 'not-found' || refusal.code === 'invalid-request'
          ? 'It has ended, was taken back, or is not whole. Ask whoever sent it for a new one.'
          : refusal.message}
      </EndedLink>
    );
  return (
    <main id="main" tabIndex={-1} aria-busy="true" className="p-28 outline-none">
      <p role="status">Opening…</p>
    </main>
  );
}

function Shared({ view, shareKey }: { readonly view: SharedView; readonly shareKey: ShareKey }) {
  const facts = [
    ['For', view.label],
    ['From', view.workspaceName],
    ['Engagement', view.engagementName],
    ['Approved by', view.approvedBy ?? 'nobody yet'],
    ['Date of issue', view.dateOfIssue === null ? '–' : dayInWords(view.dateOfIssue)],
    ['Shown until', dayInWords(view.expiresOn)],
  ] as const;
  return (
    <main
      id="main"
      tabIndex={-1}
      className="mx-auto flex w-full max-w-1240 flex-col gap-20 px-28 py-20 outline-none max-sm:px-14"
    >
      <header className="border-1.5 border-ink bg-field">
        <div className="flex flex-wrap items-center gap-14 border-b border-ink px-14 py-10">
          <Mark width={33} />
          <h1 className="min-w-0 flex-1 text-page font-semibold">{view.title}</h1>
          <Stamp state={stateOf(view.state)} prefix={view.revision} />
        </div>
        <dl className="grid grid-cols-6 max-lg:grid-cols-3 max-sm:grid-cols-2">
          {facts.map(([label, value]) => (
            <div key={label} className="border-r border-rule-2 px-14 py-6 last:border-r-0">
              <dt className="text-label text-ink-3">{label}</dt>
              <dd className="text-base font-semibold">{value}</dd>
            </div>
          ))}
        </dl>
      </header>
      {warnings[view.state] !== undefined && (
        <p role="note" className="border-l-4 border-degr bg-field px-14 py-8 text-base">
          {warnings[view.state]}
        </p>
      )}
      <SharedSheet shareKey={shareKey} title={view.title} sheets={view.sheets} />
      <SharedSummary view={view} />
      {view.findings !== null && <SharedFindings findings={view.findings} />}
      <Cautions />
    </main>
  );
}

const stateOf = (state: SharedView['state']) =>
  state === 'withdrawn' || state === 'sent-back' ? 'draft' : state;

const warnings: { readonly [state in SharedView['state']]?: string } = {
  'in-review': 'This revision is in review: nobody has approved it, and nothing is to be built from it.',
  superseded:
    'This revision was superseded: another has taken its place, and nothing is to be built from it.',
};

/** Asks search engines that follow the link anyhow to forget it. */
function useKeptOutOfIndexes(): void {
  useEffect(() => {
    const robots = document.createElement('meta');
    robots.name = 'robots';
    robots.content = 'noindex, nofollow, noarchive';
    document.head.append(robots);
    return () => robots.remove();
  }, []);
}
