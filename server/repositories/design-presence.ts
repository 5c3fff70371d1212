import type { Knex } from 'knex';
import type { PlaceInDesign } from '#contract/live.ts';

export interface PresenceRow {
  readonly connectionId: string;
  readonly personId: string;
  readonly name: string;
  readonly place: PlaceInDesign;
}

/** Notes where somebody is; false where that connection belongs to somebody else. */
export async function putPresence(
  knex: Knex,
  presence: {
    readonly connectionId: string;
    readonly designId: string;
    readonly personId: string;
    readonly place: PlaceInDesign;
  },
  at: Date,
): Promise<boolean> {
  const { connectionId, designId, personId, place } = presence;
  const rows = await knex('design_presence')
    .insert({
      connection_id: connectionId,
      design_id: designId,
      person_id: personId,
      place: JSON.stringify(place),
      seen_at: at,
    })
    .onConflict('connection_id')
    .merge(['place', 'seen_at'])
    .where('design_presence.person_id', personId)
    .where('design_presence.design_id', designId)
    .returning<{ connection_id: string }[]>('connection_id');
  return rows.length > 0;
}

/** Notes that connections are still there. */
export async function touchPresence(knex: Knex, connectionId: string, at: Date): Promise<void> {
  await knex('design_presence').where({ connection_id: connectionId }).update({ seen_at: at });
}

/** Forgets a connection; true when it was there. */
export async function removePresence(knex: Knex, connectionId: string): Promise<boolean> {
  return (await knex('design_presence').where({ connection_id: connectionId }).delete()) > 0;
}

/** Who has a design open and was heard of since, the longest there first. */
export async function listPresence(
  knex: Knex,
  designId: string,
  since: Date,
): Promise<readonly PresenceRow[]> {
  return knex('design_presence')
    .join('people', 'people.id', 'design_presence.person_id')
    .where({ design_id: designId })
    .where('seen_at', '>=', since)
    .orderBy('connection_id')
    .select<PresenceRow[]>({
      connectionId: 'connection_id',
      personId: 'person_id',
      name: 'people.name',
      place: 'place',
    });
}

/** Forgets what ended without a word, such as with its process. */
export async function removeStalePresence(knex: Knex, before: Date): Promise<void> {
  await knex('design_presence').where('seen_at', '<', before).delete();
}
