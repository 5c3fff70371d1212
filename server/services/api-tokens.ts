import { createHash, randomBytes } from 'node:crypto';
import type { ApiToken, TokenScope } from '#contract/account.ts';
import { authorise } from '../auth/authorise.ts';
import type { TokenLimits } from '../auth/token-limits.ts';
import { Refusal, notFound } from '../errors.ts';
import type { ApiTokenRow } from '../repositories/api-tokens.ts';
import {
  countWorkingTokens,
  findToken,
  findTokenByHash,
  insertToken,
  listTokens,
  revokeToken,
  setTokenUsed,
} from '../repositories/api-tokens.ts';
import type { Account } from '../repositories/people.ts';
import { findAccount } from '../repositories/people.ts';
import { announcePlacesOf } from './announce-places.ts';
import { dayOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { limits } from './limits.ts';

const secretBytes = 32;
const marker = 'lp_';
const shownCharacters = marker.length + 6;
const dayMs = 24 * 60 * 60 * 1000;
const endedShownForMs = 30 * dayMs;
const noteUseEveryMs = 60_000;

/** The person's tokens, the newest first; ended ones for a month. */
export async function readTokens({ database, clock }: Context, personId: string): Promise<ApiToken[]> {
  const since = new Date(clock().getTime() - endedShownForMs);
  return (await listTokens(database.knex, personId, since)).map(tokenOf);
}

/** Makes a token. Its secret is in this answer alone. */
export async function createToken(
  { database: { knex }, clock }: Context,
  personId: string,
  wanted: {
    readonly name: string;
    readonly scope: TokenScope;
    readonly workspaceId: string | null;
    readonly expiresOn: string;
  },
): Promise<{ readonly secret: string; readonly token: ApiToken }> {
  const now = clock();
  const { name, scope, workspaceId, expiresOn } = wanted;
  refuseExpiry(expiresOn, now);
  if (workspaceId !== null) await authorise(knex, personId, 'workspace.read', workspaceId, 'workspace');
  if ((await countWorkingTokens(knex, personId, now)) >= limits.tokens) {
    throw new Refusal('conflict', `You have ${limits.tokens} tokens already; revoke one that you don't use.`);
  }
  const secret = marker + randomBytes(secretBytes).toString('base64url');
  const id = await insertToken(knex, {
    personId,
    name,
    scope,
    workspaceId,
    prefix: secret.slice(0, shownCharacters),
    hash: hashOf(secret),
    createdAt: now,
    // To the end of its last day.
    expiresAt: new Date(Date.parse(`${expiresOn}T00:00:00Z`) + dayMs),
  });
  const made = await findToken(knex, personId, id);
  if (made === null) throw new Error('a token went as it was made');
  return { secret, token: tokenOf(made) };
}

/** Ends a token for good. */
export async function endToken(
  { database: { knex }, clock }: Context,
  personId: string,
  id: string,
): Promise<ApiToken> {
  await revokeToken(knex, personId, id, clock());
  await announcePlacesOf(knex, personId);
  const token = await findToken(knex, personId, id);
  if (token === null) throw notFound('token');
  return tokenOf(token);
}

export type TokenHolder =
  | { readonly ok: true; readonly account: Account; readonly limits: TokenLimits }
  | { readonly ok: false; readonly message: string };

/** Whose token this is, and what it leaves of their rights; or why it is worth nothing. */
export async function holderOfToken(context: Context, secret: string): Promise<TokenHolder> {
  const { database, clock } = context;
  const { knex } = database;
  const now = clock();
  const token = await findTokenByHash(knex, hashOf(secret));
  const account = token === null ? null : await findAccount(knex, token.personId);
  if (token === null || account === null) {
    return refused('This token is not known here; check that it was copied whole, or make a new one.');
  }
  if (token.revokedAt !== null) {
    return refused(
      `This token was revoked on ${dayOf(token.revokedAt)}; make a new one under Account, Tokens.`,
    );
  }
  if (token.expiresAt <= now) {
    const lastDay = dayOf(new Date(token.expiresAt.getTime() - 1));
    return refused(`This token ended with ${lastDay}; make a new one under Account, Tokens.`);
  }
  const lastNote = token.lastUsedAt?.getTime() ?? 0;
  if (now.getTime() - lastNote > noteUseEveryMs) await setTokenUsed(knex, token.id, now);
  const { id: tokenId, scope, workspaceId } = token;
  return { ok: true, account, limits: { tokenId, scope, workspaceId } };
}

const refused = (message: string): TokenHolder => ({ ok: false, message });

function refuseExpiry(expiresOn: string, now: Date): void {
  const today = dayOf(now);
  const inAYear = new Date(now);
  inAYear.setUTCFullYear(now.getUTCFullYear() + 1);
  const last = dayOf(inAYear);
  if (expiresOn >= today && expiresOn <= last) return;
  const expected = `expected a day from ${today} to ${last}`;
  throw new Refusal('invalid-request', `'expiresOn' is ${expiresOn}: ${expected}.`, {
    details: [{ path: 'expiresOn', value: expiresOn, expected }],
  });
}

// A random value of 256 bits needs no slow hash: nobody finds it by trying.
function hashOf(secret: string): Buffer {
  return createHash('sha256').update(secret).digest();
}

function tokenOf({ personId: _, workspaceId: __, ...row }: ApiTokenRow): ApiToken {
  return {
    ...row,
    createdAt: row.createdAt.toISOString(),
    expiresAt: row.expiresAt.toISOString(),
    lastUsedAt: row.lastUsedAt?.toISOString() ?? null,
    revokedAt: row.revokedAt?.toISOString() ?? null,
  };
}
