import { queryOptions, useMutation, useQuery, useQueryClient, type QueryClient } from '@tanstack/react-query';
import type { Action, Membership, Role, Session, SignIn } from '../contract/session.ts';
import type { FirstOwner } from '../contract/workspaces.ts';
import { callApiForNothing, fetchSession } from './api-client.ts';
import { rememberedWorkspace } from './workspace-path.ts';

export const sessionQuery = queryOptions({
  queryKey: ['session'],
  queryFn: ({ signal }) => fetchSession(signal),
  staleTime: Infinity,
});

const leftKey = ['left'];

/**
 * Whether the reader has signed out. Whoever signs in next has then nothing to do with where this reader was; a session
 * that merely ended leads back there.
 */
export const hasLeft = (queryClient: QueryClient): boolean => queryClient.getQueryData(leftKey) === true;

/** The session once it is known; screens behind the sign-in can rely on it. */
export function useSession(): Session | undefined {
  return useQuery(sessionQuery).data;
}

/** The reader's place in a workspace, if they have one. */
export function useMembership(workspaceId: string | undefined): Membership | undefined {
  return useSession()?.memberships.find((membership) => membership.workspaceId === workspaceId);
}

/** The workspace of pages that belong to none: the one last shown, else the reader's first. */
export function useCurrentWorkspaceId(): string | null {
  const memberships = useSession()?.memberships ?? [];
  const remembered = rememberedWorkspace();
  const here = memberships.find(({ workspaceId }) => workspaceId === remembered) ?? memberships[0];
  return here?.workspaceId ?? null;
}

/** Whether the reader may do this in the workspace. The server decides; this only hides what it would refuse. */
export function may(membership: Membership | undefined, action: Action): boolean {
  return membership?.actions.includes(action) ?? false;
}

export function useSignIn() {
  const takeOver = useTakeOver();
  return useMutation({
    mutationFn: (credentials: SignIn) =>
      callApiForNothing('/api/session', { method: 'POST', body: credentials }),
    onSuccess: takeOver,
  });
}

/** The code that follows a right password. */
export function useSecondStep() {
  const takeOver = useTakeOver();
  return useMutation({
    mutationFn: (code: string) =>
      callApiForNothing('/api/session/second-step', { method: 'POST', body: { code } }),
    onSuccess: takeOver,
  });
}

/** Makes the first person of an empty server, who is then signed in. */
export function useBecomeFirstOwner() {
  const takeOver = useTakeOver();
  return useMutation({
    mutationFn: (wanted: FirstOwner) =>
      callApiForNothing('/api/first-owner', { method: 'POST', body: wanted }),
    onSuccess: takeOver,
  });
}

/** Deletes the reader's account, who is then signed out. */
export function useDeleteAccount() {
  const queryClient = useQueryClient();
  const takeOver = useTakeOver();
  return useMutation({
    mutationFn: (proof: { readonly password: string; readonly code?: string }) =>
      callApiForNothing('/api/account/deletion', { method: 'POST', body: proof }),
    onSuccess: () => {
      const taken = takeOver();
      queryClient.setQueryData(leftKey, true);
      return taken;
    },
  });
}

/** Reads the session again: the reader's places or rights have changed. */
export function useRefreshSession(): () => Promise<void> {
  const queryClient = useQueryClient();
  return () => queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey });
}

export function useDemoSignIn() {
  const takeOver = useTakeOver();
  return useMutation({
    mutationFn: (role: Role) => callApiForNothing('/api/session/demo', { method: 'POST', body: { role } }),
    onSuccess: takeOver,
  });
}

export function useSignOut() {
  const queryClient = useQueryClient();
  const takeOver = useTakeOver();
  return useMutation({
    mutationFn: () => callApiForNothing('/api/session', { method: 'DELETE' }),
    onSuccess: () => {
      const taken = takeOver();
      queryClient.setQueryData(leftKey, true);
      return taken;
    },
  });
}

/** What one person was shown is never shown to the next: everything cached goes, then the new session is read. */
function useTakeOver(): () => Promise<void> {
  const queryClient = useQueryClient();
  return async () => {
    queryClient.removeQueries({ predicate: (query) => query.queryKey[0] !== 'session' });
    await queryClient.fetchQuery({ ...sessionQuery, staleTime: 0 });
  };
}
