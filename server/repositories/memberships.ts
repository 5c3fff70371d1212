import type { Knex } from 'knex';
import type { Role } from '#contract/session.ts';

export interface MembershipRow {
  readonly workspaceId: string;
  readonly workspaceName: string;
  readonly role: Role;
}

export async function findRole(knex: Knex, workspaceId: string, personId: string): Promise<Role | null> {
  const row = await knex('memberships')
    .where({ workspace_id: workspaceId, person_id: personId })
    .first<{ role: Role }>('role');
  return row?.role ?? null;
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
