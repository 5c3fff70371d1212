import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { sessionListSchema } from '../../contract/account.ts';
import { callApi, callApiForNothing } from '../../lib/api-client.ts';

const path = '/api/account/sessions';

export const sessionsQuery = queryOptions({
  queryKey: ['sessions'],
  queryFn: ({ signal }) => callApi(sessionListSchema, path, { signal }),
  select: ({ sessions }) => sessions,
});

/** Ends one session, or without an id all but the reader's own. */
export function useEndSessions() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (id: string | undefined) =>
      callApiForNothing(id === undefined ? path : `${path}/${id}`, { method: 'DELETE' }),
    onSettled: () => queryClient.invalidateQueries({ queryKey: sessionsQuery.queryKey }),
  });
}
