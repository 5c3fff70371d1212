import type { RequestHandler } from 'express';
import { setLastSeen } from '../repositories/people.ts';
import type { Context } from '../services/context.ts';

const everyMs = 5 * 60 * 1000;

/** Notes that people were here, for those who look after a workspace: every few minutes at most, and no answer waits for it. */
export function lastSeen({ database, clock }: Context): RequestHandler {
  const notedMs = new Map<string, number>();
  return (req, _res, next) => {
    next();
    const personId = req.user?.id;
    const now = clock();
    if (personId === undefined || now.getTime() - (notedMs.get(personId) ?? 0) < everyMs) return;
    notedMs.set(personId, now.getTime());
    database.inBackground(() => setLastSeen(database.knex, personId, now));
  };
}
