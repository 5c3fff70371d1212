import { useQuery } from '@tanstack/react-query';
import { Button } from '../../components/button.tsx';
import { DataTable, type Column } from '../../components/data-table.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { showToast } from '../../components/toast.tsx';
import type { SignedInSession } from '../../contract/account.ts';
import { dateAndTime, relativeTime } from '../../lib/format-time.ts';
import { useNow } from '../../lib/use-now.ts';
import { deviceWords } from './device-words.ts';
import { sessionsQuery, useEndSessions } from './sessions-query.ts';

/** Where the reader is signed in, and the end of any of it. */
export function SessionsDesk() {
  const query = useQuery(sessionsQuery);
  const now = useNow();
  const end = useEndSessions();
  const finish = (id: string | undefined, done: string): void =>
    end.mutate(id, {
      onSuccess: () => showToast({ tone: 'done', text: done }),
      onError: (error) => showToast({ tone: 'failed', text: `Not ended. ${error.message}` }),
    });
  if (query.data === undefined) return <ReadingState what="Your sessions" query={query} />;
  const others = query.data.filter(({ isThisOne }) => !isThisOne).length;
  const columns: readonly Column<SignedInSession>[] = [
    {
      key: 'device',
      head: 'Device',
      cell: ({ userAgent, isThisOne, isKept }) => (
        <>
          <span className="font-medium">
            {deviceWords(userAgent)}
            {isThisOne && <span className="font-semibold text-ok"> (this one)</span>}
            {isKept && <span className="text-ink-2">, kept signed in</span>}
          </span>
          {userAgent !== '' && (
            <span className="block max-w-440 truncate text-note text-ink-3" title={userAgent}>
              {userAgent}
            </span>
          )}
        </>
      ),
    },
    { key: 'address', head: 'Address', cell: ({ address }) => address || 'unknown' },
    {
      key: 'started',
      head: 'Signed in',
      cell: ({ startedAt }) =>
        startedAt === null ? 'unknown' : <Moment time={new Date(startedAt)} now={now} />,
    },
    {
      key: 'used',
      head: 'Last used',
      cell: ({ lastUsedAt }) => <Moment time={new Date(lastUsedAt)} now={now} />,
    },
    {
      key: 'end',
      head: 'End',
      align: 'right',
      cell: (session) =>
        !session.isThisOne && (
          <Button
            small
            aria-label={`End the session of the ${deviceWords(session.userAgent).toLowerCase()} at ${session.address}`}
            disabled={end.isPending}
            onClick={() => finish(session.id, 'The session is ended.')}
          >
            End
          </Button>
        ),
    },
  ];
  return (
    <div className="flex flex-col gap-14">
      <DataTable caption="Your sessions" columns={columns} rows={query.data} rowKey={({ id }) => id} />
      <div>
        <Button
          kind="danger"
          disabled={others === 0}
          busy={end.isPending}
          onClick={() => finish(undefined, 'All your other sessions are ended.')}
        >
          End all others
        </Button>
        {others === 0 && <p className="mt-6 text-note text-ink-3">You are signed in nowhere else.</p>}
      </div>
    </div>
  );
}

const Moment = ({ time, now }: { readonly time: Date; readonly now: Date }) => (
  <time dateTime={time.toISOString()} title={dateAndTime(time)} className="whitespace-nowrap">
    {relativeTime(time, now)}
  </time>
);
