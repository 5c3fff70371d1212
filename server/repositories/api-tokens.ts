import type { Knex } from 'knex';
import type { TokenScope } from '#contract/account.ts';

export interface ApiTokenRow {
  readonly id: string;
  readonly personId: string;
  readonly name: string;
  readonly prefix: string;
  readonly scope: TokenScope;
  readonly workspaceId: string | null;
  readonly workspaceName: string | null;
  readonly createdAt: Date;
  readonly expiresAt: Date;
  readonly lastUsedAt: Date | null;
  readonly revokedAt: Date | null;
}

function selectTokens(knex: Knex) {
  return knex('api_tokens')
    .leftJoin('workspaces', 'workspaces.id', 'api_tokens.workspace_id')
    .orderBy([{ column: 'api_tokens.created_at', order: 'desc' }, { column: 'api_tokens.id' }])
    .select<ApiTokenRow[]>({
      id: 'api_tokens.id',
      personId: 'person_id',
      name: 'api_tokens.name',
      prefix: 'prefix',
      scope: 'scope',
      workspaceId: 'workspace_id',
      workspaceName: 'workspaces.name',
      createdAt: 'api_tokens.created_at',
      expiresAt: 'expires_at',
      lastUsedAt: 'last_used_at',
      revokedAt: 'revoked_at',
    });
}

/** A person's tokens, the newest first; those that ended before `since` are left out. */
export function listTokens(knex: Knex, personId: string, since: Date): Promise<ApiTokenRow[]> {
  return selectTokens(knex)
    .where({ person_id: personId })
    .where('expires_at', '>', since)
    .where((query) => query.whereNull('revoked_at').orWhere('revoked_at', '>', since));
}

export async function findToken(knex: Knex, personId: string, id: string): Promise<ApiTokenRow | null> {
  const [row] = await selectTokens(knex).where({ person_id: personId, 'api_tokens.id': id });
  return row ?? null;
}

export async function findTokenByHash(knex: Knex, hash: Buffer): Promise<ApiTokenRow | null> {
  const [row] = await selectTokens(knex).where({ token_hash: hash });
  return row ?? null;
}

/** Whether a token works at this moment. */
export async function isTokenStanding(knex: Knex, id: string, now: Date): Promise<boolean> {
  const standing = knex('api_tokens').where({ id }).whereNull('revoked_at').where('expires_at', '>', now);
  return (await standing.first('id')) !== undefined;
}

/** How many tokens of a person work at this moment. */
export async function countWorkingTokens(knex: Knex, personId: string, now: Date): Promise<number> {
  const rows = await knex('api_tokens')
    .where({ person_id: personId })
    .whereNull('revoked_at')
    .where('expires_at', '>', now)
    .count<{ count: string }[]>({ count: '*' });
  return Number(rows[0]?.count ?? 0);
}

export async function insertToken(
  knex: Knex,
  token: Pick<
    ApiTokenRow,
    'personId' | 'name' | 'prefix' | 'scope' | 'workspaceId' | 'createdAt' | 'expiresAt'
  > & { readonly hash: Buffer },
): Promise<string> {
  const rows = await knex('api_tokens')
    .insert({
      person_id: token.personId,
      name: token.name,
      prefix: token.prefix,
      token_hash: token.hash,
      scope: token.scope,
      workspace_id: token.workspaceId,
      created_at: token.createdAt,
      expires_at: token.expiresAt,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

/** One that was revoked before stays as it is. */
export async function revokeToken(knex: Knex, personId: string, id: string, at: Date): Promise<void> {
  await knex('api_tokens')
    .where({ person_id: personId, id })
    .whereNull('revoked_at')
    .update({ revoked_at: at });
}

export async function setTokenUsed(knex: Knex, id: string, at: Date): Promise<void> {
  await knex('api_tokens').where({ id }).update({ last_used_at: at });
}

export async function deleteTokens(knex: Knex, personId: string): Promise<void> {
  await knex('api_tokens').where({ person_id: personId }).delete();
}
