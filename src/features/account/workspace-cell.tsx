import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { BarCell } from '../../components/bar.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { useSession } from '../../lib/session.ts';
import { engagementsPath } from '../../lib/workspace-path.ts';
import { NewWorkspaceDialog } from './new-workspace-dialog.tsx';

/** The bar's cell that says which workspace this is, and leads to the reader's others and to a new one. */
export function WorkspaceCell({ workspaceId }: { readonly workspaceId: string }) {
  const navigate = useNavigate();
  const [isStarting, setStarting] = useState(false);
  const memberships = useSession()?.memberships ?? [];
  const here = memberships.find((membership) => membership.workspaceId === workspaceId);
  if (here === undefined) return null;
  return (
    <BarCell label="Workspace" className="max-md:hidden">
      <Menu
        groups={[
          {
            choice: {
              label: 'Workspace',
              value: workspaceId,
              options: memberships.map((each) => ({ value: each.workspaceId, label: each.workspaceName })),
              onChange: (value) => void navigate(engagementsPath(value)),
            },
          },
          { actions: [{ label: 'New workspace…', onSelect: () => setStarting(true) }] },
        ]}
        trigger={
          <button type="button" className="inline-flex items-center gap-8 font-semibold">
            <span className="max-w-200 truncate">{here.workspaceName}</span>
            <Icon name="chevron-down" size={13} />
          </button>
        }
      />
      {isStarting && <NewWorkspaceDialog onClose={() => setStarting(false)} />}
    </BarCell>
  );
}
