import type { Knex } from 'knex';
import { mentionedIn, mentionToken } from '#contract/comments.ts';
import { roles } from '#contract/session.ts';
import { pastedSecret } from '#engine/model/pasted-secret.ts';
import { permits } from '../auth/permissions.ts';
import { Refusal } from '../errors.ts';
import type { MemberRow } from '../repositories/comments.ts';
import { listMembersOf } from '../repositories/comments.ts';

const mostMentions = 20;
const excerptCharacters = 240;

/** Roles that can open what they are called to. */
const readers = roles.filter((role) => permits(role, 'design.read'));

/** Whom a comment in this workspace may call: its members who can open designs, by name. */
export function listMentionable(knex: Knex, workspaceId: string): Promise<readonly MemberRow[]> {
  return listMembersOf(knex, workspaceId, readers);
}

/** Refuses words that hold what looks like a key: many read them, and nothing takes a key back that was read. */
export function refuseSecret(body: string): void {
  const secret = pastedSecret(body);
  if (secret === undefined) return;
  throw new Refusal(
    'invalid-request',
    `'body' holds what looks like a key or a password, ${secret.length} characters long. Comments keep none: write the name under which your vault keeps it, and change the key if it was real.`,
    {
      details: [
        { path: 'body', value: 'not shown', expected: 'expected the name of a key rather than the key' },
      ],
    },
  );
}

/**
 * The ids of those whom the words call. All are members who can open the design; `before` are those that an earlier wording
 * called, who may have left since.
 */
export function mentionsOf(
  body: string,
  members: readonly MemberRow[],
  before: readonly string[] = [],
): readonly string[] {
  const mentioned = mentionedIn(body);
  if (mentioned.length > mostMentions) {
    throw new Refusal(
      'invalid-request',
      `'body' mentions ${mentioned.length} people: expected at most ${mostMentions}.`,
      {
        details: [
          {
            path: 'body',
            value: `${mentioned.length} people`,
            expected: `expected at most ${mostMentions} people`,
          },
        ],
      },
    );
  }
  const stranger = mentioned.find(
    (id) => !before.includes(id) && !members.some((member) => member.id === id),
  );
  if (stranger !== undefined) {
    throw new Refusal(
      'invalid-request',
      `'body' mentions ${stranger}, who is no member of the workspace that can open designs; choose one of the list.`,
      {
        details: [
          {
            path: 'body',
            value: stranger,
            expected: 'expected members of the workspace who can open designs',
          },
        ],
      },
    );
  }
  return mentioned;
}

/** The words for a mail: with names, and not all of them. */
export function excerptOf(body: string, members: readonly MemberRow[]): string {
  const named = members.reduce((text, { id, name }) => text.replaceAll(mentionToken(id), `@${name}`), body);
  return named.length > excerptCharacters ? `${named.slice(0, excerptCharacters - 1)}…` : named;
}
