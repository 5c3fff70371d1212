import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { showToast } from '../../components/toast.tsx';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { Column } from '../../components/table-view.ts';
import { roles } from '../../contract/session.ts';
import type { Member } from '../../contract/workspaces.ts';
import { dateAndTime, relativeTime } from '../../lib/format-time.ts';
import { roleWords } from '../../lib/role-words.ts';
import { useNow } from '../../lib/use-now.ts';
import { useChangeRole } from './people-query.ts';

interface PeopleTableProps {
  readonly workspaceId: string;
  readonly people: readonly Member[];
  readonly readerId: string;
  /** The reader may change roles and remove people. */
  readonly manages: boolean;
  readonly onRemove: (member: Member) => void;
}

/** Who is in the workspace: for its owners with what they can change. */
export function PeopleTable({ workspaceId, people, readerId, manages, onRemove }: PeopleTableProps) {
  const now = useNow();
  const changeRole = useChangeRole(workspaceId);
  const view = useTableView('people');
  const columns: readonly Column<Member>[] = [
    {
      key: 'name',
      head: 'Name',
      cell: ({ personId, name }) => (
        <span className="font-medium">
          {name}
          {personId === readerId && <span className="font-normal text-ink-3"> (you)</span>}
        </span>
      ),
      sortBy: ({ name }) => name,
    },
    {
      key: 'role',
      head: 'Role',
      widthPx: 150,
      cell: (member) =>
        manages ? (
          <Menu
            trigger={
              <button
                type="button"
                aria-label={`Role of ${member.name}: ${roleWords[member.role]}`}
                className="inline-flex items-center gap-6 font-medium"
              >
                {roleWords[member.role]}
                <Icon name="chevron-down" size={12} />
              </button>
            }
            groups={[
              {
                choice: {
                  label: 'Role',
                  value: member.role,
                  options: roles.map((role) => ({ value: role, label: roleWords[role] })),
                  onChange: (value) => {
                    const role = roles.find((each) => each === value);
                    if (role === undefined || role === member.role) return;
                    changeRole.mutate(
                      { personId: member.personId, role },
                      {
                        onSuccess: () =>
                          showToast({
                            tone: 'done',
                            text: `${member.name} is ${roleWords[role].toLowerCase()} now.`,
                          }),
                        onError: (error) =>
                          showToast({ tone: 'failed', text: `The role is as it was. ${error.message}` }),
                      },
                    );
                  },
                },
              },
            ]}
          />
        ) : (
          roleWords[member.role]
        ),
      sortBy: ({ role }) => roles.indexOf(role),
      text: ({ role }) => roleWords[role],
    },
    { key: 'email', head: 'E-mail', cell: ({ email }) => email, sortBy: ({ email }) => email },
    ...(manages
      ? [
          {
            key: 'second-step',
            head: 'Two-step sign-in',
            widthPx: 130,
            cell: ({ hasSecondStep }: Member) =>
              hasSecondStep === true ? 'on' : <span className="text-ink-3">off</span>,
            sortBy: ({ hasSecondStep }: Member) => (hasSecondStep === true ? 'on' : 'off'),
          },
        ]
      : []),
    {
      key: 'seen',
      head: 'Last seen',
      widthPx: 120,
      cell: ({ lastSeenAt }) =>
        lastSeenAt === null ? (
          <span className="text-ink-3">never</span>
        ) : (
          <time dateTime={lastSeenAt} title={dateAndTime(new Date(lastSeenAt))} className="whitespace-nowrap">
            {relativeTime(new Date(lastSeenAt), now)}
          </time>
        ),
      sortBy: ({ lastSeenAt }) => lastSeenAt ?? undefined,
      text: ({ lastSeenAt }) => lastSeenAt ?? '',
      highestFirst: true,
    },
    {
      key: 'remove',
      head: manages ? 'Remove' : 'Leave',
      align: 'right',
      widthPx: 90,
      cell: (member) =>
        (manages || member.personId === readerId) && (
          <Button
            small
            aria-label={member.personId === readerId ? 'Leave the workspace' : `Remove ${member.name}`}
            onClick={() => onRemove(member)}
          >
            {member.personId === readerId ? 'Leave…' : 'Remove…'}
          </Button>
        ),
    },
  ];
  return (
    <WorkTable
      caption="People"
      filterLabel="Name, e-mail or role"
      view={view}
      columns={columns}
      rows={people}
      rowKey={({ personId }) => personId}
    />
  );
}
