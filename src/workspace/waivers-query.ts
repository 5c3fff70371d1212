import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { waiverListSchema, waiverSchema, type Waive, type Waiver } from '../contract/waivers.ts';
import { callApi } from '../lib/api-client.ts';

const waiversPath = (designId: string): string => `/api/designs/${encodeURIComponent(designId)}/waivers`;

export const waiversQuery = (designId: string) =>
  queryOptions({
    queryKey: ['waivers', designId],
    queryFn: ({ signal }) => callApi(waiverListSchema, waiversPath(designId), { signal }),
    select: ({ waivers }) => waivers,
  });

/** A change after which a design's waivers are read again; lists show counts, so they are, too. */
function useWaiverChange<Input>(designId: string, change: (input: Input) => Promise<Waiver>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: async () => {
      await queryClient.invalidateQueries({ queryKey: waiversQuery(designId).queryKey });
      await queryClient.invalidateQueries({ queryKey: ['engagements'] });
    },
  });
}

export const useWaive = (designId: string) =>
  useWaiverChange(designId, (body: Waive) =>
    callApi(waiverSchema, waiversPath(designId), { method: 'POST', body }),
  );

export const useWithdrawWaiver = (designId: string) =>
  useWaiverChange(designId, (waiverId: string) =>
    callApi(waiverSchema, `${waiversPath(designId)}/${encodeURIComponent(waiverId)}`, { method: 'DELETE' }),
  );
