import { useQuery } from '@tanstack/react-query';
import { createContext, use, type ReactNode } from 'react';
import type { EquipmentProfile } from '../contract/profiles.ts';
import { useDesignPlace } from './design-place.tsx';
import { profilesQuery } from './profiles-query.ts';

const none: readonly EquipmentProfile[] = [];
const WorkspaceProfilesContext = createContext(none);

/** Reads the equipment profiles of the workspace that keeps the open design, for whoever offers them. */
export function WorkspaceProfilesProvider({ children }: { readonly children: ReactNode }) {
  const { workspaceId } = useDesignPlace();
  const { data = none } = useQuery(profilesQuery(workspaceId));
  return <WorkspaceProfilesContext value={data}>{children}</WorkspaceProfilesContext>;
}

/** The profiles of the workspace; none while they are read, and where no server keeps the design. */
export const useWorkspaceProfiles = (): readonly EquipmentProfile[] => use(WorkspaceProfilesContext);
