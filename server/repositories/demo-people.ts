import type { Knex } from 'knex';
import type { Role } from '#contract/session.ts';
import { roles } from '#contract/session.ts';

export interface DemoPerson {
  readonly id: string;
  readonly role: Role;
  readonly name: string;
  readonly email: string;
}

/** Who can be signed in as with one click, in the order of the roles; nobody while the demo is off. */
export async function listDemoPeople(knex: Knex): Promise<readonly DemoPerson[]> {
  const people = await knex('demo_people')
    .join('people', 'people.id', 'demo_people.person_id')
    .join('memberships', 'memberships.person_id', 'people.id')
    .select<DemoPerson[]>({ id: 'people.id', role: 'role', name: 'people.name', email: 'email' });
  return people.sort((a, b) => roles.indexOf(a.role) - roles.indexOf(b.role));
}

export async function insertDemoPerson(knex: Knex, personId: string): Promise<void> {
  await knex('demo_people').insert({ person_id: personId });
}
