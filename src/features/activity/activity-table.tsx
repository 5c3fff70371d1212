import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { DataTable, type Column } from '../../components/data-table.tsx';
import type { Activity } from '../../contract/activity.ts';
import { activityNote, activitySentence } from '../../contract/activity-words.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { objectPath } from './object-path.ts';

interface ActivityTableProps {
  readonly workspaceId: string;
  readonly activity: readonly Activity[];
  readonly empty: ReactNode;
}

/** What was done, a line each, the newest on top. */
export function ActivityTable({ workspaceId, activity, empty }: ActivityTableProps) {
  const columns: readonly Column<Activity>[] = [
    {
      key: 'when',
      head: 'When',
      widthPx: 100,
      cell: ({ at }) => (
        <time dateTime={at} className="whitespace-nowrap text-ink-2 max-sm:whitespace-normal">
          {dateAndTime(new Date(at))}
        </time>
      ),
    },
    {
      key: 'what',
      head: 'What was done',
      cell: (each) => <Sentence workspaceId={workspaceId} activity={each} />,
    },
  ];
  return (
    <DataTable caption="Activity" columns={columns} rows={activity} rowKey={({ id }) => id} empty={empty} />
  );
}

function Sentence({ workspaceId, activity }: { readonly workspaceId: string; readonly activity: Activity }) {
  const { before, object, after } = activitySentence(activity);
  const path = objectPath(workspaceId, activity);
  const note = activityNote(activity);
  return (
    <>
      {before}
      {path === undefined ? (
        <span className="font-medium">{object}</span>
      ) : (
        <Link to={path} className="font-medium text-blue underline">
          {object}
        </Link>
      )}
      {after}
      {note !== '' && <span className="block text-note text-ink-2">{note}</span>}
    </>
  );
}
