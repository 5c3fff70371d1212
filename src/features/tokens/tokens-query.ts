import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  apiTokenListSchema,
  apiTokenSchema,
  createdApiTokenSchema,
  type createApiTokenSchema,
} from '../../contract/account.ts';
import { callApi } from '../../lib/api-client.ts';

const path = '/api/account/tokens';

export const tokensQuery = queryOptions({
  queryKey: ['api-tokens'],
  queryFn: ({ signal }) => callApi(apiTokenListSchema, path, { signal }),
  select: ({ tokens }) => tokens,
});

function useTokenChange<Input, Answer>(change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () => queryClient.invalidateQueries({ queryKey: tokensQuery.queryKey }),
  });
}

export const useCreateToken = () =>
  useTokenChange((body: z.input<typeof createApiTokenSchema>) =>
    callApi(createdApiTokenSchema, path, { method: 'POST', body }),
  );

export const useRevokeToken = () =>
  useTokenChange((id: string) => callApi(apiTokenSchema, `${path}/${id}`, { method: 'DELETE' }));
