import type { Knex } from 'knex';
import type { Role } from '#contract/session.ts';

export interface MembershipRow {
  readonly workspaceId: string;
  readonly workspaceName: string;
  readonly role: Role;
  readonly requiresSecondStep: boolean;
}

/** A person's place in a workspace. */
export interface Place {
  readonly role: Role;
  /** The workspace asks for two-step sign-in, and the person has none. */
  readonly lacksSecondStep: boolean;
}

export async function findPlace(knex: Knex, workspaceId: string, personId: string): Promise<Place | null> {
  const row = (await knex('memberships')
    .join('workspaces', 'workspaces.id', 'memberships.workspace_id')
    .leftJoin('second_steps', 'second_steps.person_id', 'memberships.person_id')
    .where({ workspace_id: workspaceId, 'memberships.person_id': personId })
    .select({
      role: 'role',
      lacksSecondStep: knex.raw('requires_second_step and confirmed_at is null'),
    })
    .first()) as Place | undefined;
  return row ?? null;
}

/** A person's workspaces by name. */
export function listMemberships(knex: Knex, personId: string): Promise<MembershipRow[]> {
  return knex('memberships')
    .join('workspaces', 'workspaces.id', 'memberships.workspace_id')
    .where({ person_id: personId })
    .orderBy(['workspaces.name', 'workspaces.id'])
    .select<MembershipRow[]>({
      workspaceId: 'workspaces.id',
      workspaceName: 'workspaces.name',
      role: 'role',
      requiresSecondStep: 'requires_second_step',
    });
}

export async function insertWorkspace(knex: Knex, name: string): Promise<string> {
  const rows = await knex('workspaces').insert({ name }).returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

export async function insertMembership(
  knex: Knex,
  workspaceId: string,
  personId: string,
  role: Role,
): Promise<void> {
  await knex('memberships').insert({ workspace_id: workspaceId, person_id: personId, role });
}
