import type { Knex } from 'knex';
import type { Profile } from '#engine/model/underlay.ts';

export interface ProfileRow {
  readonly id: string;
  readonly workspaceId: string;
  readonly profile: Profile;
  readonly changedAt: Date;
  /** The person's name. */
  readonly changedBy: string | null;
  readonly archivedAt: Date | null;
}

function selectProfiles(knex: Knex): Knex.QueryBuilder {
  return knex('equipment_profiles').leftJoin('people', 'people.id', 'equipment_profiles.changed_by').select({
    id: 'equipment_profiles.id',
    workspaceId: 'workspace_id',
    profile: 'profile',
    changedAt: 'changed_at',
    changedBy: 'people.name',
    archivedAt: 'archived_at',
  });
}

/** A workspace's profiles by name. */
export async function listProfiles(knex: Knex, workspaceId: string): Promise<readonly ProfileRow[]> {
  return (await selectProfiles(knex)
    .where({ workspace_id: workspaceId })
    .orderByRaw('lower(equipment_profiles.name), equipment_profiles.id')) as ProfileRow[];
}

export async function findProfile(knex: Knex, id: string): Promise<ProfileRow | null> {
  const row = (await selectProfiles(knex).where({ 'equipment_profiles.id': id }).first()) as
    ProfileRow | undefined;
  return row ?? null;
}

export async function insertProfile(
  knex: Knex,
  workspaceId: string,
  profile: Profile,
  personId: string | null,
  at: Date,
): Promise<string> {
  const rows = await knex('equipment_profiles')
    .insert({
      workspace_id: workspaceId,
      ...profileColumns(profile),
      created_at: at,
      changed_at: at,
      changed_by: personId,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

export async function updateProfile(
  knex: Knex,
  id: string,
  change: {
    readonly profile?: Profile;
    readonly archivedAt?: Date | null;
    readonly personId: string;
    readonly at: Date;
  },
): Promise<void> {
  await knex('equipment_profiles')
    .where({ id })
    .update({
      ...(change.profile === undefined
        ? {}
        : { ...profileColumns(change.profile), changed_at: change.at, changed_by: change.personId }),
      ...(change.archivedAt === undefined ? {} : { archived_at: change.archivedAt }),
    });
}

/** Holds a workspace's profiles against others who add or rename until the transaction ends. */
export async function lockProfiles(trx: Knex.Transaction, workspaceId: string): Promise<void> {
  await trx.raw('select pg_advisory_xact_lock(hashtext(?))', [`equipment_profiles ${workspaceId}`]);
}

export interface ProfileUseRow {
  readonly copyId: string;
  readonly designId: string;
  readonly title: string;
  readonly digest: string;
  readonly devices: number;
}

/** Which designs of a workspace hold copies of profiles, the last changed first; those put away left out. */
export async function listProfileUses(knex: Knex, workspaceId: string): Promise<readonly ProfileUseRow[]> {
  return (await knex('designs')
    .join('engagements', 'engagements.id', 'designs.engagement_id')
    .joinRaw('cross join lateral jsonb_each(designs.profile_copies) as copy(id, said)')
    .where({ workspace_id: workspaceId })
    .whereNull('designs.archived_at')
    .whereNull('engagements.archived_at')
    .orderBy([{ column: 'designs.changed_at', order: 'desc' }, { column: 'designs.id' }])
    .select({
      copyId: 'copy.id',
      designId: 'designs.id',
      title: 'designs.title',
      digest: knex.raw("copy.said ->> 'digest'"),
      devices: knex.raw("(copy.said ->> 'devices')::integer"),
    })) as ProfileUseRow[];
}

function profileColumns(profile: Profile) {
  return { name: profile.name, profile: JSON.stringify(profile) };
}
