import { CellGrid } from '../../components/cell.tsx';
import { CommitCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import type { WorkspaceSettings } from '../../contract/workspaces.ts';
import { SettingsSection } from './settings-section.tsx';
import { useChangeSettings } from './settings-query.ts';

const mostCharacters = 80;

/** What the workspace is called. */
export function NameSection({ settings }: { readonly settings: WorkspaceSettings }) {
  const change = useChangeSettings(settings.id);
  return (
    <SettingsSection
      title="Name"
      about="Stands in the bar, on invitations, and as the owner of new drawings."
    >
      <CellGrid>
        <CommitCell
          label="Name of the workspace"
          value={settings.name}
          validate={(text) =>
            text.trim() === ''
              ? 'Name is empty. Type at least one character.'
              : text.trim().length > mostCharacters
                ? `Name has ${text.trim().length} characters. Keep it to ${mostCharacters}.`
                : undefined
          }
          onCommit={(name) =>
            change.mutate(
              { name },
              { onSuccess: () => showToast({ tone: 'done', text: `The workspace is called ${name} now.` }) },
            )
          }
        />
      </CellGrid>
      {change.error !== null && <ErrorNotice className="mt-10">{change.error.message}</ErrorNotice>}
    </SettingsSection>
  );
}
