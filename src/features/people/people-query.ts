import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { memberListSchema, memberSchema } from '../../contract/workspaces.ts';
import type { Role } from '../../contract/session.ts';
import { callApi, callApiForNothing } from '../../lib/api-client.ts';
import { sessionQuery } from '../../lib/session.ts';

const path = (workspaceId: string): string => `/api/workspaces/${workspaceId}/people`;

export const peopleQuery = (workspaceId: string) =>
  queryOptions({
    queryKey: ['people', workspaceId],
    queryFn: ({ signal }) => callApi(memberListSchema, path(workspaceId), { signal }),
    select: ({ people }) => people,
  });

/** A change after which the list is read again, and the reader's own place, which it may have been about. */
function usePeopleChange<Input, Answer>(workspaceId: string, change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: () =>
      Promise.all([
        queryClient.invalidateQueries({ queryKey: peopleQuery(workspaceId).queryKey }),
        queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey }),
      ]),
  });
}

export const useChangeRole = (workspaceId: string) =>
  usePeopleChange(workspaceId, ({ personId, role }: { readonly personId: string; readonly role: Role }) =>
    callApi(memberSchema, `${path(workspaceId)}/${personId}`, { method: 'PATCH', body: { role } }),
  );

export const useRemovePerson = (workspaceId: string) =>
  usePeopleChange(workspaceId, (personId: string) =>
    callApiForNothing(`${path(workspaceId)}/${personId}`, { method: 'DELETE' }),
  );
