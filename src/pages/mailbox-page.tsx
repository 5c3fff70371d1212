import { useEffect } from 'react';
import { useParams } from 'react-router-dom';
import { MainBar } from '../features/account/main-bar.tsx';
import { MailboxDesk } from '../features/mailbox/mailbox-desk.tsx';
import { mailLooks } from '../features/mailbox/opened-mail.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { rememberWorkspace } from '../lib/workspace-path.ts';
import { NotFoundPage } from './not-found-page.tsx';

/** /workspaces/:workspaceId/mailbox?mail=…&as=…: mails that were kept because no mail server is configured. */
export function MailboxPage() {
  usePageTitle('Mailbox');
  const { workspaceId = '' } = useParams();
  const membership = useMembership(workspaceId);
  const { valueOf, change } = useSearchValues();
  useEffect(() => {
    if (membership !== undefined) rememberWorkspace(workspaceId);
  }, [membership, workspaceId]);
  if (!may(membership, 'people.manage')) return <NotFoundPage />;
  return (
    <>
      <MainBar workspaceId={workspaceId} />
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <h1 className="pt-16 pb-6 text-page font-semibold">Mailbox</h1>
        <p className="mb-14 max-w-720 text-base text-ink-2">
          No mail server is needed to try Longpatch out: a local one keeps every mail here instead of
          delivering it. Owners of the workspace see what concerns it, and links for a new password only of
          people whose every workspace they own.
        </p>
        <MailboxDesk
          workspaceId={workspaceId}
          asked={valueOf('mail')}
          look={mailLooks.find((each) => each === valueOf('as')) ?? 'page'}
          onOpen={(mail) => change({ mail })}
          onLook={(look) => change({ as: look === 'page' ? '' : look })}
        />
      </main>
    </>
  );
}
