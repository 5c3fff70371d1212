import { useQuery } from '@tanstack/react-query';
import { DataTable, type Column } from '../../components/data-table.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import type { KeptMail } from '../../contract/mailbox.ts';
import { dateAndTime, relativeTime } from '../../lib/format-time.ts';
import { useNow } from '../../lib/use-now.ts';
import { mailboxQuery } from './mailbox-query.ts';
import { OpenedMail, type MailLook } from './opened-mail.tsx';

interface MailboxDeskProps {
  readonly workspaceId: string;
  /** The open mail's id; '' opens the newest. */
  readonly asked: string;
  readonly look: MailLook;
  readonly onOpen: (id: string) => void;
  readonly onLook: (look: MailLook) => void;
}

/** Mails that were kept instead of delivered, and the one that is open. */
export function MailboxDesk({ workspaceId, asked, look, onOpen, onLook }: MailboxDeskProps) {
  const query = useQuery(mailboxQuery(workspaceId));
  const now = useNow();
  if (query.data === undefined) return <ReadingState what="The kept mails" query={query} />;
  const { isKeeping, mails } = query.data;
  const open = mails.find(({ id }) => id === asked) ?? mails[0];
  if (open === undefined) {
    return isKeeping ? (
      <EmptyState title="No mail yet">
        Invite somebody, ask for a review or mention a colleague: the mail stands here within seconds, and its
        links work.
      </EmptyState>
    ) : (
      <EmptyState title="Mails go to the mail server">
        This server hands its mails to the mail server that <code>SMTP_URL</code> names, so none is kept here.
      </EmptyState>
    );
  }
  const columns: readonly Column<KeptMail>[] = [
    {
      key: 'subject',
      head: 'Subject',
      cell: ({ subject, to }) => (
        <>
          <span className="block font-medium">{subject}</span>
          <span className="block text-note break-all text-ink-3">to {to}</span>
        </>
      ),
      sortBy: ({ subject }) => subject,
    },
    {
      key: 'kept',
      head: 'Kept',
      align: 'right',
      cell: ({ keptAt }) => (
        <time dateTime={keptAt} title={dateAndTime(new Date(keptAt))} className="whitespace-nowrap">
          {relativeTime(new Date(keptAt), now)}
        </time>
      ),
      sortBy: ({ keptAt }) => keptAt,
      highestFirst: true,
    },
  ];
  return (
    <div className="grid grid-cols-[minmax(300px,420px)_minmax(0,1fr)] items-start gap-28 max-lg:grid-cols-1">
      <DataTable
        caption="Kept mails"
        columns={columns}
        rows={mails}
        rowKey={({ id }) => id}
        selectedKey={open.id}
        onSelect={({ id }) => onOpen(id)}
        className="max-h-[calc(100dvh-220px)] max-lg:max-h-320"
      />
      <OpenedMail key={open.id} workspaceId={workspaceId} mail={open} look={look} onLook={onLook} />
    </div>
  );
}
