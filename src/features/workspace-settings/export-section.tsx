import { buttonClasses } from '../../components/button.tsx';
import type { WorkspaceSettings } from '../../contract/workspaces.ts';
import { SettingsSection } from './settings-section.tsx';

/** Takes everything of the workspace along as a file. */
export function ExportSection({ settings }: { readonly settings: WorkspaceSettings }) {
  return (
    <SettingsSection
      title="Take everything along"
      about="One JSON file: people with their roles, every design with its edits, revisions, waivers and comments, shares, pools, equipment and activity. No password and no link that opens anything is in it."
    >
      <a href={`/api/workspaces/${settings.id}/export`} download="workspace.json" className={buttonClasses()}>
        Download the workspace
      </a>
      <p className="mt-8 text-base text-ink-2">
        It holds customers’ addresses: keep it where such plans belong. The activity says who took it.
      </p>
    </SettingsSection>
  );
}
