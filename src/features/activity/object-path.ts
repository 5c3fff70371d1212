import type { Activity } from '../../contract/activity.ts';
import {
  designPath,
  engagementsPath,
  peoplePath,
  profilesPath,
  revisionPath,
} from '../../lib/workspace-path.ts';

/** Where what was done something to can be seen; undefined where it is no more, or has no page of its own. */
export function objectPath(
  workspaceId: string,
  { object: { kind, id, isThere }, design }: Pick<Activity, 'object' | 'design'>,
): string | undefined {
  if (!isThere) return undefined;
  const onDesign = (tail: string) => (design === null ? undefined : `${designPath(design.id)}${tail}`);
  switch (kind) {
    case 'engagement':
      return engagementsPath(workspaceId);
    case 'profile':
      return profilesPath(workspaceId);
    case 'person':
      return peoplePath(workspaceId);
    case 'workspace':
      return undefined;
    case 'revision':
      return design === null || id === null ? undefined : revisionPath(design.id, id);
    case 'comment':
      return onDesign('/review');
    case 'waiver':
      return onDesign('/checks');
    case 'design':
    case 'share':
      return onDesign('');
  }
}
