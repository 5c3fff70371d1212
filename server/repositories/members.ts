import type { Knex } from 'knex';
import type { Role } from '#contract/session.ts';

/** Somebody in a workspace. */
export interface MemberRow {
  readonly personId: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  readonly hasSecondStep: boolean;
  readonly lastSeenAt: Date | null;
}

function selectMembers(knex: Knex, workspaceId: string): Knex.QueryBuilder {
  return knex('memberships')
    .join('people', 'people.id', 'memberships.person_id')
    .leftJoin('second_steps', 'second_steps.person_id', 'people.id')
    .where({ workspace_id: workspaceId })
    .orderBy(['people.name', 'people.id'])
    .select({
      personId: 'people.id',
      name: 'people.name',
      email: 'email',
      role: 'role',
      hasSecondStep: knex.raw('confirmed_at is not null'),
      lastSeenAt: 'last_seen_at',
    });
}

/** The people of a workspace by name. */
export async function listMembers(knex: Knex, workspaceId: string): Promise<readonly MemberRow[]> {
  return (await selectMembers(knex, workspaceId)) as MemberRow[];
}

export async function findMember(
  knex: Knex,
  workspaceId: string,
  personId: string,
): Promise<MemberRow | null> {
  const [row] = (await selectMembers(knex, workspaceId).where({ 'people.id': personId })) as MemberRow[];
  return row ?? null;
}

export async function setRole(
  trx: Knex.Transaction,
  workspaceId: string,
  personId: string,
  role: Role,
): Promise<void> {
  await trx('memberships').where({ workspace_id: workspaceId, person_id: personId }).update({ role });
}

/** Takes somebody out of a workspace, and with them the tokens that were made for it. */
export async function deleteMembership(
  trx: Knex.Transaction,
  workspaceId: string,
  personId: string,
): Promise<void> {
  await trx('memberships').where({ workspace_id: workspaceId, person_id: personId }).delete();
  await trx('api_tokens').where({ workspace_id: workspaceId, person_id: personId }).delete();
}

export async function countOwners(knex: Knex, workspaceId: string): Promise<number> {
  const rows = await knex('memberships')
    .where({ workspace_id: workspaceId, role: 'owner' })
    .count<{ count: string }[]>({ count: '*' });
  return Number(rows[0]?.count ?? 0);
}

/** How a person stands in each of their workspaces beside the others there. */
export interface Standing {
  readonly workspaceId: string;
  readonly workspaceName: string;
  readonly others: number;
  readonly isLastOwner: boolean;
}

export async function listStandings(knex: Knex, personId: string): Promise<readonly Standing[]> {
  const { rows } = await knex.raw<{ rows: Standing[] }>(
    `select workspaces.id as "workspaceId", workspaces.name as "workspaceName",
       (select count(*)::int from memberships as others
         where others.workspace_id = workspaces.id and others.person_id <> mine.person_id) as others,
       mine.role = 'owner' and not exists (select from memberships as others
         where others.workspace_id = workspaces.id and others.person_id <> mine.person_id
           and others.role = 'owner') as "isLastOwner"
     from memberships as mine join workspaces on workspaces.id = mine.workspace_id
     where mine.person_id = ? order by workspaces.name, workspaces.id`,
    [personId],
  );
  return rows;
}
