import type { Person, Session } from '#contract/session.ts';
import { listDemoPeople } from '../repositories/demo-people.ts';
import type { Account } from '../repositories/people.ts';
import type { Context } from './context.ts';
import { readMemberships } from './workspaces.ts';

/** Who is signed in, where they may do what, and who the demo offers. */
export async function describeSession(
  context: Context,
  account: Account | null,
): Promise<Omit<Session, 'csrfToken' | 'secondStepAsked'>> {
  const [memberships, demo] = await Promise.all([
    account === null ? [] : readMemberships(context, account.id),
    listDemoPeople(context.database.knex),
  ]);
  return {
    person: account === null ? null : personOf(account),
    memberships,
    demo: demo.map(({ role, name, email }) => ({ role, name, email })),
  };
}

function personOf({ id, name, email }: Account): Person {
  return { id, name, email, initials: initialsOf(name) };
}

/** The first letters of a person's first and last name; what stands in brackets is none. */
export function initialsOf(name: string): string {
  const words = name.split(/\s+/).filter((word) => word !== '' && !word.startsWith('('));
  const letters = words.length > 1 ? [words[0], words.at(-1)] : words;
  return letters
    .map((word) => [...(word ?? '')][0] ?? '')
    .join('')
    .toUpperCase();
}
