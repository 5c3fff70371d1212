import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { workspaceSettingsSchema, type changeWorkspaceSchema } from '../../contract/workspaces.ts';
import type { DeleteWorkspace } from '../../contract/workspace-export.ts';
import { callApi, callApiForNothing } from '../../lib/api-client.ts';
import { sessionQuery } from '../../lib/session.ts';

const path = (workspaceId: string): string => `/api/workspaces/${workspaceId}`;

export const settingsQuery = (workspaceId: string) =>
  queryOptions({
    queryKey: ['workspace-settings', workspaceId],
    queryFn: ({ signal }) => callApi(workspaceSettingsSchema, path(workspaceId), { signal }),
  });

export function useChangeSettings(workspaceId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof changeWorkspaceSchema>) =>
      callApi(workspaceSettingsSchema, path(workspaceId), { method: 'PATCH', body }),
    onSuccess: (settings) => {
      queryClient.setQueryData(settingsQuery(workspaceId).queryKey, settings);
      return queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey });
    },
  });
}

/** Deletes the workspace; the reader's places are read again. */
export function useDeleteWorkspace(workspaceId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: DeleteWorkspace) =>
      callApiForNothing(`${path(workspaceId)}/deletion`, { method: 'POST', body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey }),
  });
}
