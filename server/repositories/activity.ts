import type { Knex } from 'knex';
import type { Activity, ActivityAction, ActivityFilter, ActivityObjectKind } from '#contract/activity.ts';

export interface NewActivity {
  readonly workspaceId: string;
  readonly at: Date;
  readonly action: ActivityAction;
  /** Null for what a guest or the server did. */
  readonly personId: string | null;
  readonly object: { readonly kind: ActivityObjectKind; readonly id: string | null; readonly name: string };
  /** The design that it concerns, where there is one. */
  readonly designId?: string;
  /** Values that belong to the sentence, such as a role before and after; never secrets. */
  readonly details?: Readonly<Record<string, string>>;
}

/** Notes what somebody did, in the transaction in which it was done. */
export async function recordActivity(knex: Knex, activity: NewActivity): Promise<void> {
  const { workspaceId, at, action, personId, object, designId, details } = activity;
  await knex('activity').insert({
    workspace_id: workspaceId,
    at,
    action,
    person_id: personId,
    person_name: personId === null ? null : knex('people').where({ id: personId }).select('name'),
    object_kind: object.kind,
    object_id: object.id,
    object_name: object.name,
    design_id: designId ?? null,
    details: JSON.stringify(details ?? {}),
  });
}

interface Flat {
  readonly id: string;
  readonly doneAt: Date;
  readonly action: ActivityAction;
  readonly personId: string | null;
  readonly personName: string | null;
  readonly objectKind: ActivityObjectKind;
  readonly objectId: string | null;
  readonly objectName: string;
  readonly isThere: boolean;
  readonly designId: string | null;
  readonly designTitle: string | null;
  readonly details: Readonly<Record<string, string>>;
}

// What hangs on a design is there as long as it is; the rest is looked up.
const isThere = `case activity.object_kind
  when 'engagement' then exists (select from engagements where id = activity.object_id)
  when 'profile' then exists (select from equipment_profiles where id = activity.object_id)
  when 'person' then exists (select from memberships
    where workspace_id = activity.workspace_id and person_id = activity.object_id)
  when 'comment' then exists (select from comments where id = activity.object_id)
  when 'workspace' then true
  else designs.id is not null end`;

/** What was done in a workspace, the newest first: `count` at most, older than `before` where that is given. */
export async function listActivity(
  knex: Knex,
  workspaceId: string,
  { person, action, design, from, to }: ActivityFilter,
  { before, count }: { readonly before?: string | undefined; readonly count: number },
): Promise<readonly Activity[]> {
  const query = knex('activity')
    .leftJoin('designs', 'designs.id', 'activity.design_id')
    .where({ 'activity.workspace_id': workspaceId })
    .orderBy('activity.id', 'desc')
    .limit(count);
  if (before !== undefined) query.where('activity.id', '<', before);
  if (person !== undefined) query.where({ 'activity.person_id': person });
  if (action !== undefined) query.where({ 'activity.action': action });
  if (design !== undefined) query.where({ 'activity.design_id': design });
  if (from !== undefined) query.where('activity.at', '>=', `${from}T00:00:00Z`);
  if (to !== undefined)
    query.whereRaw("activity.at < ?::timestamptz + interval '1 day'", [`${to}T00:00:00Z`]);
  const rows = (await query.select({
    id: 'activity.id',
    doneAt: 'activity.at',
    action: 'activity.action',
    personId: 'activity.person_id',
    personName: 'activity.person_name',
    objectKind: 'activity.object_kind',
    objectId: 'activity.object_id',
    objectName: 'activity.object_name',
    isThere: knex.raw(isThere),
    designId: 'designs.id',
    designTitle: 'designs.title',
    details: 'activity.details',
  })) as Flat[];
  return rows.map(activityOf);
}

function activityOf(row: Flat): Activity {
  return {
    id: row.id,
    at: row.doneAt.toISOString(),
    action: row.action,
    person: row.personId === null ? null : { id: row.personId, name: row.personName ?? 'Somebody' },
    object: { kind: row.objectKind, id: row.objectId, name: row.objectName, isThere: row.isThere },
    design:
      row.designId === null || row.designTitle === null ? null : { id: row.designId, title: row.designTitle },
    details: row.details,
  };
}

export interface Choice {
  readonly id: string;
  readonly name: string;
}

/** Everybody who did something in a workspace, by name as it was last. */
export async function listActors(knex: Knex, workspaceId: string): Promise<readonly Choice[]> {
  const { rows } = await knex.raw<{ rows: Choice[] }>(
    `select id, name from (
       select distinct on (person_id) person_id as id, person_name as name from activity
       where workspace_id = ? and person_id is not null order by person_id, activity.id desc) as actors
     order by name, id`,
    [workspaceId],
  );
  return rows;
}

/** Every design that something was done with, by its title today or, where it is gone, as it was last told of. */
export async function listActedOn(knex: Knex, workspaceId: string): Promise<readonly Choice[]> {
  const { rows } = await knex.raw<{ rows: Choice[] }>(
    `select id, name from (
       select distinct on (design_id) design_id as id, coalesce(designs.title, object_name) as name
       from activity left join designs on designs.id = design_id
       where workspace_id = ? and design_id is not null
       order by design_id, object_kind in ('design', 'revision') desc, activity.id desc) as told
     order by name, id`,
    [workspaceId],
  );
  return rows;
}
