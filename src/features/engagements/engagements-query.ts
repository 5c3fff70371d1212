import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  designSummarySchema,
  engagementListSchema,
  engagementSchema,
  type changeDesignSchema,
  type changeEngagementSchema,
  type createEngagementSchema,
  type CreateDesign,
} from '../../contract/designs.ts';
import { callApi } from '../../lib/api-client.ts';

const engagementsKey = 'engagements';

export const engagementsQuery = (workspaceId: string, archived: boolean) =>
  queryOptions({
    queryKey: [engagementsKey, workspaceId, { archived }],
    queryFn: ({ signal }) =>
      callApi(engagementListSchema, `/api/workspaces/${workspaceId}/engagements?archived=${archived}`, {
        signal,
      }),
    select: ({ engagements }) => engagements,
  });

/** A change after which the lists are read again. */
function useListChange<Input, Answer>(change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () => queryClient.invalidateQueries({ queryKey: [engagementsKey] }),
  });
}

export const useCreateEngagement = (workspaceId: string) =>
  useListChange((body: z.input<typeof createEngagementSchema>) =>
    callApi(engagementSchema, `/api/workspaces/${workspaceId}/engagements`, { method: 'POST', body }),
  );

export const useChangeEngagement = () =>
  useListChange(({ id, ...body }: z.input<typeof changeEngagementSchema> & { readonly id: string }) =>
    callApi(engagementSchema, `/api/engagements/${id}`, { method: 'PATCH', body }),
  );

export const useCreateDesign = () =>
  useListChange(({ engagementId, ...body }: CreateDesign & { readonly engagementId: string }) =>
    callApi(designSummarySchema, `/api/engagements/${engagementId}/designs`, { method: 'POST', body }),
  );

export const useChangeDesign = () =>
  useListChange(({ id, ...body }: z.input<typeof changeDesignSchema> & { readonly id: string }) =>
    callApi(designSummarySchema, `/api/designs/${id}`, { method: 'PATCH', body }),
  );
