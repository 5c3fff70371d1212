import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { createdShareSchema, shareListSchema, shareSchema, type CreateShare } from '../../contract/shares.ts';
import { callApi } from '../../lib/api-client.ts';

const pathOf = (designId: string): string => `/api/designs/${encodeURIComponent(designId)}/shares`;

/** Links to a design's revisions, the newest first. */
export const sharesQuery = (designId: string) =>
  queryOptions({
    queryKey: ['shares', designId],
    queryFn: ({ signal }) => callApi(shareListSchema, pathOf(designId), { signal }),
    select: ({ shares }) => shares,
  });

function useShareChange<Input, Answer>(designId: string, change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: () => queryClient.invalidateQueries({ queryKey: sharesQuery(designId).queryKey }),
  });
}

export const useCreateShare = (designId: string) =>
  useShareChange(designId, (body: CreateShare) =>
    callApi(createdShareSchema, pathOf(designId), { method: 'POST', body }),
  );

export const useRevokeShare = (designId: string) =>
  useShareChange(designId, (shareId: string) =>
    callApi(shareSchema, `/api/shares/${encodeURIComponent(shareId)}`, { method: 'DELETE' }),
  );
