import { queryOptions } from '@tanstack/react-query';
import { mailboxSchema, openedMailSchema } from '../../contract/mailbox.ts';
import { callApi } from '../../lib/api-client.ts';

const pathOf = (workspaceId: string) => `/api/workspaces/${workspaceId}/mailbox`;
const lookedForMs = 3_000;

/** The mails that were kept; looked for again and again, as a mailbox is. */
export const mailboxQuery = (workspaceId: string) =>
  queryOptions({
    queryKey: ['mailbox', workspaceId],
    queryFn: ({ signal }) => callApi(mailboxSchema, pathOf(workspaceId), { signal }),
    refetchInterval: ({ state }) => (state.data?.isKeeping === false ? false : lookedForMs),
  });

/** A kept mail stays as it is. */
export const keptMailQuery = (workspaceId: string, mailId: string) =>
  queryOptions({
    queryKey: ['mailbox', workspaceId, mailId],
    queryFn: ({ signal }) => callApi(openedMailSchema, `${pathOf(workspaceId)}/${mailId}`, { signal }),
    staleTime: Infinity,
  });

/** The mail's HTML as a page of its own, under a policy that lets it neither run nor load anything. */
export const mailPagePath = (workspaceId: string, mailId: string): string =>
  `${pathOf(workspaceId)}/${mailId}/page`;
