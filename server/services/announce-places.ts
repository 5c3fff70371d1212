import type { Knex } from 'knex';
import { announcePlace } from '../live/announce.ts';
import { listMembers } from '../repositories/members.ts';
import { listMemberships } from '../repositories/memberships.ts';

/** Has every process ask again what a person may see anywhere: a session or a token of theirs ended. */
export async function announcePlacesOf(knex: Knex, personId: string): Promise<void> {
  for (const { workspaceId } of await listMemberships(knex, personId))
    await announcePlace(knex, { workspaceId, personId });
}

/** Has every process ask again what anybody may see in a workspace. */
export async function announcePlacesIn(knex: Knex, workspaceId: string): Promise<void> {
  for (const { personId } of await listMembers(knex, workspaceId))
    await announcePlace(knex, { workspaceId, personId });
}
