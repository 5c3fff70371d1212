import { queryOptions, useMutation } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  acceptedInvitationSchema,
  offeredInvitationSchema,
  type acceptInvitationSchema,
} from '../../contract/invitations.ts';
import { callApi } from '../../lib/api-client.ts';

/** What a link invites to. The link is a key: it goes in the body, never in the path. */
export const offeredInvitationQuery = (token: string) =>
  queryOptions({
    queryKey: ['offered-invitation', token],
    queryFn: ({ signal }) =>
      callApi(offeredInvitationSchema, '/api/invitation', { method: 'POST', body: { token }, signal }),
    retry: false,
  });

export const useAcceptInvitation = () =>
  useMutation({
    mutationFn: (body: z.input<typeof acceptInvitationSchema>) =>
      callApi(acceptedInvitationSchema, '/api/invitation/acceptance', { method: 'POST', body }),
  });
