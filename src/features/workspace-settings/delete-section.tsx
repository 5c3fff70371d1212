import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import type { WorkspaceSettings } from '../../contract/workspaces.ts';
import { DeleteWorkspaceDialog } from './delete-workspace-dialog.tsx';
import { SettingsSection } from './settings-section.tsx';

interface DeleteSectionProps {
  readonly settings: WorkspaceSettings;
  readonly onDeleted: () => void;
}

/** The end of the workspace. */
export function DeleteSection({ settings, onDeleted }: DeleteSectionProps) {
  const [isAsking, setAsking] = useState(false);
  return (
    <SettingsSection
      title="Delete the workspace"
      about="Everything in it goes for good, for everybody. Accounts stay."
    >
      <Button kind="danger" onClick={() => setAsking(true)}>
        Delete the workspace…
      </Button>
      {isAsking && (
        <DeleteWorkspaceDialog settings={settings} onDeleted={onDeleted} onClose={() => setAsking(false)} />
      )}
    </SettingsSection>
  );
}
