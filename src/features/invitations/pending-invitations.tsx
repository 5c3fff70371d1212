import { useQuery } from '@tanstack/react-query';
import { Button } from '../../components/button.tsx';
import { DataTable, type Column } from '../../components/data-table.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Invitation } from '../../contract/invitations.ts';
import { dateAndTime, relativeTime } from '../../lib/format-time.ts';
import { roleWords } from '../../lib/role-words.ts';
import { useNow } from '../../lib/use-now.ts';
import { invitationsQuery, useResend, useTakeBack } from './invitations-query.ts';
import { mailWords } from './mail-words.ts';

/** Who is invited and has not come yet: until when, what became of the mail, once more, or not at all. */
export function PendingInvitations({ workspaceId }: { readonly workspaceId: string }) {
  const query = useQuery(invitationsQuery(workspaceId));
  const now = useNow();
  const resend = useResend(workspaceId);
  const takeBack = useTakeBack(workspaceId);
  if (query.data === undefined) return <ReadingState what="The invitations" query={query} />;
  if (query.data.length === 0) {
    return (
      <p className="border border-dashed border-rule-strong px-14 py-12 text-base text-ink-2">
        Nobody is invited just now. Whoever you invite stands here until they come.
      </p>
    );
  }
  const isBusy = resend.isPending || takeBack.isPending;
  const sendAgain = ({ id, email }: Invitation): void =>
    resend.mutate(id, {
      onSuccess: () =>
        showToast({ tone: 'done', text: `${email} gets another link. The one before leads nowhere now.` }),
      onError: (error) => showToast({ tone: 'failed', text: `Not sent again. ${error.message}` }),
    });
  const end = ({ id, email }: Invitation): void =>
    takeBack.mutate(id, {
      onSuccess: () => showToast({ tone: 'done', text: `The invitation of ${email} is taken back.` }),
      onError: (error) => showToast({ tone: 'failed', text: `Not taken back. ${error.message}` }),
    });
  const columns: readonly Column<Invitation>[] = [
    {
      key: 'email',
      head: 'Invited',
      cell: ({ email, invitedBy, invitedAt }) => (
        <>
          <span className="font-medium whitespace-nowrap">{email}</span>
          <span className="block text-note whitespace-nowrap text-ink-3">
            {relativeTime(new Date(invitedAt), now)}
            {invitedBy !== null && ` by ${invitedBy}`}
          </span>
        </>
      ),
      sortBy: ({ email }) => email,
    },
    {
      key: 'role',
      head: 'As',
      cell: ({ role }) => roleWords[role],
      sortBy: ({ role }) => roleWords[role],
    },
    {
      key: 'until',
      head: 'Until',
      cell: ({ expiresAt }) =>
        new Date(expiresAt) > now ? (
          <time dateTime={expiresAt} className="whitespace-nowrap">
            {dateAndTime(new Date(expiresAt))}
          </time>
        ) : (
          <span className="text-ink-3">ran out</span>
        ),
      sortBy: ({ expiresAt }) => expiresAt,
    },
    {
      key: 'mail',
      head: 'Mail',
      cell: ({ mail }) => {
        const { words, isAmiss } = mailWords(mail, now);
        return (
          <span className="flex items-start gap-6">
            {isAmiss && (
              <span className="mt-2">
                <SeverityShape severity="degrading" size={12} />
              </span>
            )}
            {words}
          </span>
        );
      },
      sortBy: ({ mail }) => mail?.state ?? '',
    },
    {
      key: 'do',
      head: 'Change',
      align: 'right',
      cell: (invitation) => (
        <span className="flex justify-end gap-8">
          <Button
            small
            disabled={isBusy}
            aria-label={`Send the invitation of ${invitation.email} again`}
            onClick={() => sendAgain(invitation)}
          >
            Send again
          </Button>
          <Button
            small
            disabled={isBusy}
            aria-label={`Take the invitation of ${invitation.email} back`}
            onClick={() => end(invitation)}
          >
            Take back
          </Button>
        </span>
      ),
    },
  ];
  return <DataTable caption="Invitations" columns={columns} rows={query.data} rowKey={({ id }) => id} />;
}
