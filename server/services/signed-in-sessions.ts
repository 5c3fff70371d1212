import type { SignedInSession } from '#contract/account.ts';
import { idleSeconds } from '../auth/sessions.ts';
import { notFound } from '../errors.ts';
import type { SessionRow } from '../repositories/sessions.ts';
import { deleteOtherSessions, deleteSession, listSessions } from '../repositories/sessions.ts';
import { announcePlacesOf } from './announce-places.ts';
import type { Context } from './context.ts';

/** Where the person is signed in, the last used first. */
export async function readSessions(
  { database, clock }: Context,
  personId: string,
  thisSessionId: string,
): Promise<SignedInSession[]> {
  const rows = await listSessions(database.knex, personId, clock());
  return rows
    .map((row) => sessionOf(row, thisSessionId))
    .sort((a, b) => (a.lastUsedAt < b.lastUsedAt ? 1 : -1));
}

export async function endOneSession(
  { database }: Context,
  personId: string,
  sessionId: string,
): Promise<void> {
  if (!(await deleteSession(database.knex, personId, sessionId))) throw notFound('session');
  await announcePlacesOf(database.knex, personId);
}

export async function endOtherSessions(
  { database }: Context,
  personId: string,
  thisSessionId: string,
): Promise<void> {
  await deleteOtherSessions(database.knex, personId, thisSessionId);
  await announcePlacesOf(database.knex, personId);
}

function sessionOf({ id, sid, expire, sess }: SessionRow, thisSessionId: string): SignedInSession {
  const keptForMs = sess.cookie.originalMaxAge;
  return {
    id,
    isThisOne: sid === thisSessionId,
    userAgent: sess.about?.userAgent ?? '',
    address: sess.about?.address ?? '',
    startedAt: sess.about?.startedAt ?? null,
    // Every use puts the end off by the same time.
    lastUsedAt: new Date(expire.getTime() - (keptForMs ?? idleSeconds * 1000)).toISOString(),
    isKept: keptForMs !== null,
  };
}
