import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { workspacePoolsSchema, type putPoolsSchema } from '../contract/numbering.ts';
import { callApi } from './api-client.ts';

const poolsPath = (workspaceId: string): string => `/api/workspaces/${encodeURIComponent(workspaceId)}/pools`;

export const poolsQuery = (workspaceId: string) =>
  queryOptions({
    queryKey: ['pools', workspaceId],
    queryFn: ({ signal }) => callApi(workspacePoolsSchema, poolsPath(workspaceId), { signal }),
  });

/** Sets a workspace's pools; whatever was worked out from them is read again. */
export const usePutPools = (workspaceId: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof putPoolsSchema>) =>
      callApi(workspacePoolsSchema, poolsPath(workspaceId), { method: 'PUT', body }),
    onSuccess: async (pools) => {
      queryClient.setQueryData(poolsQuery(workspaceId).queryKey, pools);
      await queryClient.invalidateQueries({ queryKey: ['design-context'] });
    },
  });
};
