import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import {
  equipmentProfileSchema,
  profileListSchema,
  type changeProfileSchema,
  type createProfileSchema,
  type EquipmentProfile,
} from '../contract/profiles.ts';
import { callApi } from '../lib/api-client.ts';

const profilesPath = (workspaceId: string): string =>
  `/api/workspaces/${encodeURIComponent(workspaceId)}/profiles`;

/** A workspace's equipment profiles by name, archived ones too. */
export const profilesQuery = (workspaceId: string) =>
  queryOptions({
    queryKey: ['profiles', workspaceId],
    queryFn: ({ signal }) => callApi(profileListSchema, profilesPath(workspaceId), { signal }),
    select: ({ profiles }) => profiles,
  });

/** A change after which a workspace's profiles are read again. */
function useProfilesChange<Input>(workspaceId: string, change: (input: Input) => Promise<EquipmentProfile>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: () => queryClient.invalidateQueries({ queryKey: profilesQuery(workspaceId).queryKey }),
  });
}

export const useCreateProfile = (workspaceId: string) =>
  useProfilesChange(workspaceId, (body: z.input<typeof createProfileSchema>) =>
    callApi(equipmentProfileSchema, profilesPath(workspaceId), { method: 'POST', body }),
  );

export const useChangeProfile = (workspaceId: string) =>
  useProfilesChange(
    workspaceId,
    ({ id, ...body }: z.input<typeof changeProfileSchema> & { readonly id: string }) =>
      callApi(equipmentProfileSchema, `/api/profiles/${encodeURIComponent(id)}`, { method: 'PATCH', body }),
  );
