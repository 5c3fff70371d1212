import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { DataTable, type Column } from '../../components/data-table.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { showToast } from '../../components/toast.tsx';
import type { ApiToken } from '../../contract/account.ts';
import { dateAndTime, dayByUtc, dayInWords, relativeTime } from '../../lib/format-time.ts';
import { useSession } from '../../lib/session.ts';
import { useNow } from '../../lib/use-now.ts';
import { NewTokenDialog } from './new-token-dialog.tsx';
import { TokenShown } from './token-shown.tsx';
import { tokensQuery, useRevokeToken } from './tokens-query.ts';

const scopeWords = { read: 'Read', write: 'Read and write' } as const;

/** The reader's tokens for scripts: what each is for, what became of it, a new one, the end of any. */
export function TokensDesk() {
  const query = useQuery(tokensQuery);
  const now = useNow();
  const memberships = useSession()?.memberships ?? [];
  const revoke = useRevokeToken();
  const [isMaking, setMaking] = useState(false);
  const [secret, setSecret] = useState<string>();
  if (query.data === undefined) return <ReadingState what="Your tokens" query={query} />;
  const end = ({ id, name }: ApiToken): void =>
    revoke.mutate(id, {
      onSuccess: () =>
        showToast({ tone: 'done', text: `${name} is revoked. What uses it is refused from now on.` }),
      onError: (error) => showToast({ tone: 'failed', text: `Not revoked. ${error.message}` }),
    });
  const make = (
    <Button kind="primary" onClick={() => setMaking(true)}>
      New token
    </Button>
  );
  const columns: readonly Column<ApiToken>[] = [
    {
      key: 'name',
      head: 'Token',
      cell: ({ name, prefix }) => (
        <>
          <span className="font-medium">{name}</span>
          <span className="block text-note text-ink-3">{prefix}…</span>
        </>
      ),
      sortBy: ({ name }) => name,
    },
    { key: 'scope', head: 'May', cell: ({ scope }) => scopeWords[scope], sortBy: ({ scope }) => scope },
    {
      key: 'workspace',
      head: 'In',
      cell: ({ workspaceName }) => workspaceName ?? 'All workspaces',
      sortBy: ({ workspaceName }) => workspaceName ?? '',
    },
    {
      key: 'used',
      head: 'Last used',
      cell: ({ lastUsedAt }) =>
        lastUsedAt === null ? (
          <span className="text-ink-3">never</span>
        ) : (
          <time dateTime={lastUsedAt} title={dateAndTime(new Date(lastUsedAt))} className="whitespace-nowrap">
            {relativeTime(new Date(lastUsedAt), now)}
          </time>
        ),
      sortBy: ({ lastUsedAt }) => lastUsedAt ?? undefined,
      highestFirst: true,
    },
    {
      key: 'state',
      head: 'Until',
      cell: (token) => <Ending token={token} now={now} />,
      sortBy: ({ expiresAt }) => expiresAt,
    },
    {
      key: 'end',
      head: 'Revoke',
      align: 'right',
      cell: (token) =>
        isWorking(token, now) && (
          <Button
            small
            aria-label={`Revoke ${token.name}`}
            disabled={revoke.isPending}
            onClick={() => end(token)}
          >
            Revoke
          </Button>
        ),
    },
  ];
  return (
    <div className="flex flex-col gap-14">
      {secret !== undefined && <TokenShown secret={secret} onKept={() => setSecret(undefined)} />}
      {query.data.length === 0 ? (
        <EmptyState title="No token yet" action={make}>
          A token lets a script do what you may: check every design at night, fetch sheets as PDF, keep an
          inventory in step.
        </EmptyState>
      ) : (
        <>
          <div>{make}</div>
          <DataTable caption="Your API tokens" columns={columns} rows={query.data} rowKey={({ id }) => id} />
        </>
      )}
      {isMaking && (
        <NewTokenDialog
          memberships={memberships}
          now={now}
          onMade={(made) => {
            setMaking(false);
            setSecret(made);
          }}
          onClose={() => setMaking(false)}
        />
      )}
    </div>
  );
}

const isWorking = ({ revokedAt, expiresAt }: ApiToken, now: Date): boolean =>
  revokedAt === null && new Date(expiresAt) > now;

function Ending({ token, now }: { readonly token: ApiToken; readonly now: Date }) {
  // Kept as the moment at which its last day is over.
  const lastDay = dayInWords(dayByUtc(new Date(Date.parse(token.expiresAt) - 1)));
  if (token.revokedAt !== null)
    return <span className="text-ink-3">revoked {dayInWords(token.revokedAt.slice(0, 10))}</span>;
  if (!isWorking(token, now)) return <span className="text-ink-3">ended with {lastDay}</span>;
  return <span className="whitespace-nowrap">{lastDay}</span>;
}
