import Papa from 'papaparse';
import type { Activity, ActivityFilter, ActivityPage } from '#contract/activity.ts';
import { activityPageSize } from '#contract/activity.ts';
import { activityNote, sentenceText } from '#contract/activity-words.ts';
import { authorise } from '../auth/authorise.ts';
import { listActedOn, listActivity, listActors } from '../repositories/activity.ts';
import type { Context } from './context.ts';
import { limits } from './limits.ts';

/** What was done in a workspace, the newest first, one page at a time. */
export async function readActivity(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
  { before, ...filter }: ActivityFilter & { readonly before?: string | undefined },
): Promise<ActivityPage> {
  await authorise(knex, personId, 'activity.read', workspaceId, 'workspace');
  // One more than a page shows whether there is another.
  const [found, people, designs] = await Promise.all([
    listActivity(knex, workspaceId, filter, { before, count: activityPageSize + 1 }),
    listActors(knex, workspaceId),
    listActedOn(knex, workspaceId),
  ]);
  const activity = found.slice(0, activityPageSize);
  return {
    activity,
    next: found.length > activityPageSize ? (activity.at(-1)?.id ?? null) : null,
    people: [...people],
    designs: [...designs],
  };
}

const rowsAtOnce = 1000;

/** The same as CSV, in pieces; the newest rows where there are more than one file takes, and then its last line says so. */
export async function activityAsCsv(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
  filter: ActivityFilter,
): Promise<AsyncIterable<string>> {
  await authorise(knex, personId, 'activity.read', workspaceId, 'workspace');
  return pieces();

  async function* pieces(): AsyncGenerator<string> {
    yield csvLines([['When (UTC)', 'Who', 'What', 'Note', 'Design', 'Action']]);
    let before: string | undefined;
    for (let written = 0; written < limits.activityRowsOfCsv; written += rowsAtOnce) {
      const rows = await listActivity(knex, workspaceId, filter, { before, count: rowsAtOnce });
      if (rows.length > 0) yield csvLines(rows.map(recordOf));
      if (rows.length < rowsAtOnce) return;
      before = rows.at(-1)?.id;
    }
    const [left] = await listActivity(knex, workspaceId, filter, { before, count: 1 });
    if (left !== undefined)
      yield csvLines([[`Only the newest ${limits.activityRowsOfCsv}; ask for the days up to ${left.at}.`]]);
  }
}

const recordOf = (activity: Activity): string[] => [
  activity.at,
  activity.person?.name ?? '',
  sentenceText(activity),
  activityNote(activity),
  activity.design?.title ?? activity.details['design'] ?? '',
  activity.action,
];

/** As RFC 4180 has them; what a spreadsheet would take for a formula gets an apostrophe before it (common practice, no source). */
const csvLines = (records: string[][]): string =>
  `${Papa.unparse(records, { newline: '\r\n', escapeFormulae: true })}\r\n`;
