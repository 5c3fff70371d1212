import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { recoveryCodesSchema, secondStepOfferSchema, secondStepStateSchema } from '../../contract/account.ts';
import { callApi, callApiForNothing } from '../../lib/api-client.ts';
import { sessionQuery } from '../../lib/session.ts';

const path = '/api/account/second-step';

export const secondStepQuery = queryOptions({
  queryKey: ['second-step'],
  queryFn: ({ signal }) => callApi(secondStepStateSchema, path, { signal }),
});

/** What shows that it is the person who asks: the password, and a code. */
export interface Proof {
  readonly password: string;
  readonly code: string;
}

/** A secret for an authenticator app. */
export const useOffer = () =>
  useMutation({ mutationFn: () => callApi(secondStepOfferSchema, path, { method: 'POST' }) });

/** A change after which the state and the reader's places are read again. */
function useProved<Answer>(change: (proof: Proof) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    // Not waited for: what shows the recovery codes goes as soon as the state is read again.
    onSuccess: () => {
      void queryClient.invalidateQueries({ queryKey: secondStepQuery.queryKey });
      void queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey });
    },
  });
}

export const useConfirm = () =>
  useProved(
    async (body) => (await callApi(recoveryCodesSchema, path, { method: 'PUT', body })).recoveryCodes,
  );

export const useRenewRecoveryCodes = () =>
  useProved(
    async (body) =>
      (await callApi(recoveryCodesSchema, `${path}/recovery-codes`, { method: 'POST', body })).recoveryCodes,
  );

export const useSwitchOff = () =>
  useProved((body) => callApiForNothing(`${path}/off`, { method: 'POST', body }));
