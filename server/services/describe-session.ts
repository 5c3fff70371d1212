import type { Membership, Person, Session } from '#contract/session.ts';
import { permissions } from '../auth/permissions.ts';
import { listDemoPeople } from '../repositories/demo-people.ts';
import { listMemberships } from '../repositories/memberships.ts';
import type { Account } from '../repositories/people.ts';
import type { Context } from './context.ts';

/** Who is signed in, where they may do what, and who the demo offers. */
export async function describeSession(
  { database }: Context,
  account: Account | null,
): Promise<Omit<Session, 'csrfToken'>> {
  const [memberships, demo] = await Promise.all([
    account === null ? [] : listMemberships(database.knex, account.id),
    listDemoPeople(database.knex),
  ]);
  return {
    person: account === null ? null : personOf(account),
    memberships: memberships.map((row): Membership => ({ ...row, actions: [...permissions[row.role]] })),
    demo: demo.map(({ role, name, email }) => ({ role, name, email })),
  };
}

function personOf({ id, name, email }: Account): Person {
  const words = name.split(/\s+/).filter((word) => word !== '');
  const letters = words.length > 1 ? [words[0], words.at(-1)] : words;
  return {
    id,
    name,
    email,
    initials: letters
      .map((word) => [...(word ?? '')][0] ?? '')
      .join('')
      .toUpperCase(),
  };
}
