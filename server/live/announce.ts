import type { Knex } from 'knex';

/** The channel of PostgreSQL on which processes tell one another what changed. */
export const liveChannel = 'longpatch';

/** What changed of a design, as one word; who listens reads the rest from the database. */
export type DesignChange = 'patches' | 'waivers' | 'comments' | 'state' | 'shares' | 'presence';

export interface Announcement {
  readonly designId: string;
  readonly change: DesignChange;
  /** With `patches`: the number of the last one. */
  readonly sequence?: number;
}

/**
 * Tells every process that a design changed, once the transaction is committed. Numbers only, never contents: PostgreSQL
 * takes at most 8,000 bytes in one notification (its manual, NOTIFY).
 */
export async function announce(trx: Knex, announcement: Announcement): Promise<void> {
  await trx.raw('select pg_notify(?, ?)', [liveChannel, JSON.stringify(announcement)]);
}

/** Somebody's place in a workspace changed: another role, or none any more. */
export interface PlaceAnnouncement {
  readonly workspaceId: string;
  readonly personId: string;
}

/** Tells every process, once the transaction is committed, to ask again what a person may see in a workspace. */
export async function announcePlace(trx: Knex, { workspaceId, personId }: PlaceAnnouncement): Promise<void> {
  await trx.raw('select pg_notify(?, ?)', [
    liveChannel,
    JSON.stringify({ change: 'place', workspaceId, personId }),
  ]);
}
