import type { Knex } from 'knex';
import type { Role } from '#contract/session.ts';
import { roles } from '#contract/session.ts';

export interface DemoPerson {
  readonly id: string;
  readonly role: Role;
  readonly name: string;
  readonly email: string;
}

/** Who can be signed in as with one click, one for each role, in the order of the roles; nobody while the demo is off. */
export async function listDemoPeople(knex: Knex): Promise<readonly DemoPerson[]> {
  const people = await knex('demo_people')
    .join('people', 'people.id', 'demo_people.person_id')
    .join('memberships', (join) =>
      join
        .on('memberships.person_id', 'people.id')
        .andOn('memberships.workspace_id', 'demo_people.workspace_id'),
    )
    .orderBy(['people.created_at', 'people.id'])
    .select<DemoPerson[]>({ id: 'people.id', role: 'role', name: 'people.name', email: 'email' });
  return roles.flatMap((role) => people.find((person) => person.role === role) ?? []);
}

export async function isDemoPerson(knex: Knex, personId: string): Promise<boolean> {
  return (await knex('demo_people').where({ person_id: personId }).first('person_id')) !== undefined;
}

/** Puts a member of a workspace among those who can be signed in as with one click. */
export async function insertDemoPerson(knex: Knex, personId: string, workspaceId: string): Promise<void> {
  await knex('demo_people').insert({ person_id: personId, workspace_id: workspaceId });
}
