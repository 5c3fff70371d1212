import { useNavigate } from 'react-router-dom';
import { BarCell } from '../../components/bar.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { useSession } from '../../lib/session.ts';
import { engagementsPath } from '../../lib/workspace-path.ts';

/** The bar's cell that says which workspace this is, and leads to the reader's others where there are any. */
export function WorkspaceCell({ workspaceId }: { readonly workspaceId: string }) {
  const navigate = useNavigate();
  const memberships = useSession()?.memberships ?? [];
  const here = memberships.find((membership) => membership.workspaceId === workspaceId);
  if (here === undefined) return null;
  return (
    <BarCell label="Workspace" className="max-md:hidden">
      {memberships.length === 1 ? (
        here.workspaceName
      ) : (
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
          ]}
          trigger={
            <button type="button" className="inline-flex items-center gap-8 font-semibold">
              {here.workspaceName}
              <Icon name="chevron-down" size={13} />
            </button>
          }
        />
      )}
    </BarCell>
  );
}
