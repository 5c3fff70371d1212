import type { Knex } from 'knex';
import type { EquipmentProfile } from '#contract/profiles.ts';
import { copyIdOf } from '#contract/profiles.ts';
import type { Profile } from '#engine/model/underlay.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { ProfileRow, ProfileUseRow } from '../repositories/equipment-profiles.ts';
import {
  findProfile,
  insertProfile,
  listProfileUses,
  listProfiles,
  lockProfiles,
  updateProfile,
} from '../repositories/equipment-profiles.ts';
import type { Context } from './context.ts';
import { digestOf } from './design-summary.ts';
import { limits } from './limits.ts';

/** A workspace's equipment profiles by name, with the designs that hold copies of them. */
export async function readProfiles(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
): Promise<EquipmentProfile[]> {
  await authorise(knex, personId, 'workspace.read', workspaceId, 'workspace');
  const [profiles, uses] = await Promise.all([
    listProfiles(knex, workspaceId),
    listProfileUses(knex, workspaceId),
  ]);
  return profiles.map((row) => equipmentProfileOf(row, uses));
}

export async function createProfile(
  { database, clock }: Context,
  personId: string,
  workspaceId: string,
  profile: Profile,
): Promise<EquipmentProfile> {
  return database.knex.transaction(async (trx) => {
    await authorise(trx, personId, 'profile.edit', workspaceId, 'workspace');
    await lockProfiles(trx, workspaceId);
    const others = await listProfiles(trx, workspaceId);
    refuseTakenName(profile.name, others);
    if (others.length >= limits.profiles) {
      throw new Refusal(
        'too-large',
        `The workspace has ${others.length} equipment profiles, expected at most ${limits.profiles}; change one that nobody uses instead.`,
      );
    }
    const at = clock();
    const id = await insertProfile(trx, workspaceId, profile, personId, at);
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'profile.changed',
      personId,
      object: { kind: 'profile', id, name: profile.name },
      details: { made: 'yes' },
    });
    return describe(trx, id);
  });
}

/** Changes what a profile says, archives or restores it. Copies in designs stay as they are. */
export async function changeProfile(
  { database, clock }: Context,
  personId: string,
  profileId: string,
  change: { readonly profile?: Profile; readonly basedOn?: string; readonly archived?: boolean },
): Promise<EquipmentProfile> {
  return database.knex.transaction(async (trx) => {
    const { workspaceId } = await requireProfile(trx, profileId);
    await authorise(trx, personId, 'profile.edit', workspaceId, 'equipment profile');
    await lockProfiles(trx, workspaceId);
    const before = await requireProfile(trx, profileId);
    if (change.basedOn !== undefined && change.basedOn !== before.changedAt.toISOString()) {
      throw new Refusal(
        'conflict',
        `${before.changedBy ?? 'Somebody'} has changed this profile since you read it; read it again, then make your change.`,
      );
    }
    const isArchived = change.archived ?? before.archivedAt !== null;
    if (!isArchived) {
      const others = (await listProfiles(trx, workspaceId)).filter(({ id }) => id !== profileId);
      refuseTakenName((change.profile ?? before.profile).name, others);
    }
    const at = clock();
    await updateProfile(trx, profileId, {
      ...(change.profile === undefined ? {} : { profile: change.profile }),
      ...(isArchived === (before.archivedAt !== null) ? {} : { archivedAt: isArchived ? at : null }),
      personId,
      at,
    });
    const isPutAway = isArchived !== (before.archivedAt !== null);
    const isChanged = change.profile !== undefined && digestOf(change.profile) !== digestOf(before.profile);
    if (isPutAway || isChanged)
      await recordActivity(trx, {
        workspaceId,
        at,
        action: 'profile.changed',
        personId,
        object: { kind: 'profile', id: profileId, name: (change.profile ?? before.profile).name },
        details: isPutAway ? { archived: isArchived ? 'yes' : 'no' } : {},
      });
    return describe(trx, profileId);
  });
}

async function describe(trx: Knex.Transaction, profileId: string): Promise<EquipmentProfile> {
  const row = await requireProfile(trx, profileId);
  return equipmentProfileOf(row, await listProfileUses(trx, row.workspaceId));
}

async function requireProfile(knex: Knex, profileId: string): Promise<ProfileRow> {
  const row = await findProfile(knex, profileId);
  if (row === null) throw notFound('equipment profile');
  return row;
}

function refuseTakenName(name: string, others: readonly ProfileRow[]): void {
  const isTaken = others.some(
    ({ profile, archivedAt }) => archivedAt === null && profile.name.toLowerCase() === name.toLowerCase(),
  );
  if (!isTaken) return;
  throw new Refusal('conflict', `There is a profile called '${name}' already; give this one another name.`, {
    details: [{ path: 'profile.name', value: name, expected: 'expected a name that no other profile has' }],
  });
}

function equipmentProfileOf(row: ProfileRow, uses: readonly ProfileUseRow[]): EquipmentProfile {
  const copyId = copyIdOf(row.id);
  const digest = digestOf(row.profile);
  return {
    id: row.id,
    profile: row.profile,
    changedAt: row.changedAt.toISOString(),
    changedBy: row.changedBy,
    archivedAt: row.archivedAt?.toISOString() ?? null,
    usedIn: uses
      .filter((use) => use.copyId === copyId)
      .map((use) => ({
        designId: use.designId,
        title: use.title,
        devices: use.devices,
        current: use.digest === digest,
      })),
  };
}
