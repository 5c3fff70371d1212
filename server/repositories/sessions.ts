import type { Knex } from 'knex';

/** A session that somebody is signed in with. */
export interface SessionRow {
  /** Names it to its owner; `sid` opens it and never leaves the server. */
  readonly id: string;
  readonly sid: string;
  readonly expire: Date;
  readonly sess: {
    readonly cookie: { readonly originalMaxAge: number | null };
    readonly about?: { readonly startedAt: string; readonly address: string; readonly userAgent: string };
  };
}

function ofPerson(knex: Knex, personId: string) {
  return knex('sessions').whereRaw("sess #>> '{passport,user,id}' = ?", [personId]);
}

/** A person's sessions that have not run out. */
export function listSessions(knex: Knex, personId: string, now: Date): Promise<SessionRow[]> {
  return ofPerson(knex, personId)
    .where('expire', '>', now)
    .orderBy('expire', 'desc')
    .select<SessionRow[]>(['id', 'sid', 'expire', 'sess']);
}

/** Ends every session of a person but one. */
export async function deleteOtherSessions(knex: Knex, personId: string, keptId: string): Promise<void> {
  await ofPerson(knex, personId).whereNot({ sid: keptId }).delete();
}

export async function deleteAllSessions(knex: Knex, personId: string): Promise<void> {
  await ofPerson(knex, personId).delete();
}

/** Ends one session of a person by the name it has to them; false where there is none such. */
export async function deleteSession(knex: Knex, personId: string, id: string): Promise<boolean> {
  return (await ofPerson(knex, personId).where({ id }).delete()) === 1;
}

/** Whether a session is still there: neither ended, revoked nor run out. */
export async function isSessionStanding(knex: Knex, sid: string, now: Date): Promise<boolean> {
  return (await knex('sessions').where({ sid }).where('expire', '>', now).first('sid')) !== undefined;
}
