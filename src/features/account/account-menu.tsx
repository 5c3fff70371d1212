import { useState } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { Icon } from '../../components/icon.tsx';
import { Menu, type MenuGroup } from '../../components/menu.tsx';
import { PersonTag } from '../../components/person-tag.tsx';
import { showToast } from '../../components/toast.tsx';
import { roleWords } from '../../lib/role-words.ts';
import { may, useCurrentWorkspaceId, useSession, useSignOut } from '../../lib/session.ts';
import { chooseTheme, themeChoices, useThemeChoice } from '../../lib/theme.ts';
import { engagementsPath, mailboxPath } from '../../lib/workspace-path.ts';
import { NewWorkspaceDialog } from './new-workspace-dialog.tsx';

const themeWords = { paper: 'Paper', slate: 'Slate', system: 'As the system' } as const;

/** Who is signed in, and what concerns them rather than a design: theme, account, workspace, signing out. */
export function AccountMenu() {
  const session = useSession();
  const [isStarting, setStarting] = useState(false);
  const themeChoice = useThemeChoice();
  const signOut = useSignOut();
  const navigate = useNavigate();
  const current = useCurrentWorkspaceId();
  const { workspaceId = current } = useParams();
  if (session === undefined || session.person === null) return null;
  const { person, memberships } = session;
  const membership = memberships.find((each) => each.workspaceId === workspaceId) ?? memberships[0];
  const groups: MenuGroup[] = [
    {
      choice: {
        label: 'Theme',
        value: themeChoice,
        options: themeChoices.map((value) => ({ value, label: themeWords[value] })),
        onChange: (value) => {
          const choice = themeChoices.find((each) => each === value);
          if (choice !== undefined) chooseTheme(choice);
        },
      },
    },
    {
      actions: [
        { label: 'Reference of checks', onSelect: () => void navigate('/checks') },
        { label: 'HTTP API', onSelect: () => void navigate('/http-api') },
        { label: 'Account', onSelect: () => void navigate('/account/password') },
        ...(membership !== undefined && may(membership, 'people.manage')
          ? [{ label: 'Mailbox', onSelect: () => void navigate(mailboxPath(membership.workspaceId)) }]
          : []),
        {
          label: 'Sign out',
          onSelect: () =>
            signOut.mutate(undefined, {
              onError: (error) => showToast({ tone: 'failed', text: `Not signed out. ${error.message}` }),
            }),
        },
      ],
    },
  ];
  groups.unshift({ actions: [{ label: 'New workspace…', onSelect: () => setStarting(true) }] });
  if (memberships.length > 1) {
    groups.unshift({
      choice: {
        label: 'Workspace',
        value: membership?.workspaceId ?? '',
        options: memberships.map((each) => ({ value: each.workspaceId, label: each.workspaceName })),
        onChange: (value) => void navigate(engagementsPath(value)),
      },
    });
  }
  return (
    <>
      <Menu
        align="end"
        groups={groups}
        heading={
          <>
            <p className="text-value font-semibold text-ink">{person.name}</p>
            <p className="text-note text-ink-2">{person.email}</p>
            {membership !== undefined && (
              <p className="text-note text-ink-2">
                {roleWords[membership.role]} in {membership.workspaceName}
              </p>
            )}
          </>
        }
        trigger={
          <button
            type="button"
            className="inline-flex h-30 items-center gap-4 text-ink-2"
            aria-label={`Account of ${person.name}`}
          >
            <PersonTag initials={person.initials} name={person.name} />
            <Icon name="chevron-down" size={12} />
          </button>
        }
      />
      {isStarting && <NewWorkspaceDialog onClose={() => setStarting(false)} />}
    </>
  );
}
