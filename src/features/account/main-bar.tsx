import type { ReactNode } from 'react';
import { BarContents, BarNav } from '../../components/bar.tsx';
import { may, useCurrentWorkspaceId, useMembership } from '../../lib/session.ts';
import {
  activityPath,
  engagementsPath,
  peoplePath,
  profilesPath,
  settingsPath,
} from '../../lib/workspace-path.ts';
import { WorkspaceCell } from './workspace-cell.tsx';

interface MainBarProps {
  /** The workspace that the page belongs to; without it the one last shown. */
  readonly workspaceId?: string;
  /** Stands at the right. */
  readonly children?: ReactNode;
}

/** What the bar shows on every page that is not one design's. */
export function MainBar({ workspaceId, children }: MainBarProps) {
  const current = useCurrentWorkspaceId();
  const here = workspaceId ?? current;
  const membership = useMembership(here ?? undefined);
  return (
    <BarContents>
      {here !== null && (
        <>
          <WorkspaceCell workspaceId={here} />
          <BarNav
            label="Main"
            destinations={[
              { to: engagementsPath(here), label: 'Engagements' },
              { to: profilesPath(here), label: 'Equipment' },
              { to: peoplePath(here), label: 'People' },
              ...(may(membership, 'activity.read') ? [{ to: activityPath(here), label: 'Activity' }] : []),
              ...(may(membership, 'workspace.manage') ? [{ to: settingsPath(here), label: 'Settings' }] : []),
              { to: '/checks', label: 'Checks' },
              { to: '/wire', label: 'Wire' },
            ]}
          />
        </>
      )}
      {children}
    </BarContents>
  );
}
