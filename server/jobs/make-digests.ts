import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import { digestHour } from '#contract/mail-settings.ts';
import type { Digest } from '../mail/mail.ts';
import { readMailSettings, settingOfKind } from '../mail/mail-wishes.ts';
import { queueDigest } from '../mail/queue-mail.ts';
import { listPeopleWithDigest, lockDigestItems, moveIntoDigest } from '../repositories/mails.ts';
import { findAccount } from '../repositories/people.ts';

const quarterMs = 15 * 60_000;
const longestSearch = 4 * 26;

/**
 * Makes the mail of the day for everybody for whom it has been seven o'clock since something happened. It may run at any time,
 * and twice: what was told is not told again, and what a run missed comes with the next.
 */
export async function makeDigests(knex: Knex, now: Date): Promise<void> {
  for (const personId of await listPeopleWithDigest(knex)) {
    await knex.transaction(async (trx) => {
      const settings = await readMailSettings(trx, personId);
      const items = await lockDigestItems(trx, personId, lastHour(now, settings.timeZone, digestHour));
      const person = await findAccount(trx, personId);
      if (items.length === 0 || person === null) return;
      // Who wants none of a kind meanwhile is not told of it.
      const wanted = items.filter(({ content }) => settings[settingOfKind[content.kind]] !== 'none');
      const digest: Digest = {
        kind: 'digest',
        to: { personId, name: person.name, email: person.email },
        items: wanted.map(({ content }) => content),
      };
      const id = wanted.length === 0 ? null : randomUUID();
      if (id !== null) await queueDigest(trx, id, digest);
      await moveIntoDigest(
        trx,
        items.map((item) => item.id),
        id,
      );
    });
  }
}

/** The last moment up to `now` at which clocks of a zone showed this hour. Zones differ from UTC by whole quarters of an hour. */
export function lastHour(now: Date, timeZone: string, hour: number): Date {
  const clock = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  });
  const wanted = `${String(hour).padStart(2, '0')}:00`;
  const start = Math.floor(now.getTime() / quarterMs) * quarterMs;
  for (let step = 0; step < longestSearch; step += 1) {
    const moment = new Date(start - step * quarterMs);
    if (clock.format(moment) === wanted) return moment;
  }
  // A day on which the clocks jumped over the hour.
  return new Date(start - longestSearch * quarterMs);
}
