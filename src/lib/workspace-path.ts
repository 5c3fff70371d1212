const storageKey = 'longpatch.workspace';

export const engagementsPath = (workspaceId: string): string => `/workspaces/${workspaceId}/engagements`;

export const profilesPath = (workspaceId: string): string => `/workspaces/${workspaceId}/profiles`;

export const peoplePath = (workspaceId: string): string => `/workspaces/${workspaceId}/people`;

export const activityPath = (workspaceId: string): string => `/workspaces/${workspaceId}/activity`;

export const mailboxPath = (workspaceId: string): string => `/workspaces/${workspaceId}/mailbox`;

export const settingsPath = (workspaceId: string): string => `/workspaces/${workspaceId}/settings`;

export const designPath = (designId: string): string => `/designs/${designId}`;

export const revisionPath = (designId: string, revisionId: string): string =>
  `/designs/${designId}/revisions/${revisionId}`;

/** The workspace that this browser last showed. */
export function rememberedWorkspace(): string | null {
  try {
    return window.localStorage.getItem(storageKey);
  } catch {
    return null;
  }
}

export function rememberWorkspace(workspaceId: string): void {
  try {
    window.localStorage.setItem(storageKey, workspaceId);
  } catch {
    // Without storage the first workspace is the start.
  }
}
