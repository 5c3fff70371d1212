import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { invitationListSchema, invitationSchema, type inviteSchema } from '../../contract/invitations.ts';
import { callApi, callApiForNothing } from '../../lib/api-client.ts';

const pathOf = (workspaceId: string) => `/api/workspaces/${workspaceId}/invitations`;
const waitingMs = 5_000;

/** Who is invited and has not come yet; read again now and then while a mail is on its way. */
export const invitationsQuery = (workspaceId: string) =>
  queryOptions({
    queryKey: ['invitations', workspaceId],
    queryFn: ({ signal }) => callApi(invitationListSchema, pathOf(workspaceId), { signal }),
    select: ({ invitations }) => invitations,
    refetchInterval: ({ state }) =>
      state.data?.invitations.some(({ mail }) => mail?.state === 'waiting') === true ? waitingMs : false,
  });

function useInvitationChange<Input, Answer>(workspaceId: string, change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    // What was refused may be refused because the list is old.
    onSettled: () => queryClient.invalidateQueries({ queryKey: invitationsQuery(workspaceId).queryKey }),
  });
}

export const useInvite = (workspaceId: string) =>
  useInvitationChange(workspaceId, (body: z.input<typeof inviteSchema>) =>
    callApi(invitationSchema, pathOf(workspaceId), { method: 'POST', body }),
  );

export const useResend = (workspaceId: string) =>
  useInvitationChange(workspaceId, (id: string) =>
    callApi(invitationSchema, `${pathOf(workspaceId)}/${id}/mail`, { method: 'POST' }),
  );

export const useTakeBack = (workspaceId: string) =>
  useInvitationChange(workspaceId, (id: string) =>
    callApiForNothing(`${pathOf(workspaceId)}/${id}`, { method: 'DELETE' }),
  );
