import type { Knex } from 'knex';
import type { Share } from '#contract/shares.ts';

export interface ShareRow extends Share {
  readonly designId: string;
  readonly passphraseHash: string | null;
  readonly makerId: string | null;
}

interface Flat extends Omit<ShareRow, 'madeAt' | 'revokedAt' | 'viewedAt' | 'hasPassphrase'> {
  readonly madeAt: Date;
  readonly revokedAt: Date | null;
  readonly viewedAt: Date | null;
}

function selectShares(knex: Knex): Knex.QueryBuilder {
  return knex('shares')
    .join('revisions', 'revisions.id', 'shares.revision_id')
    .leftJoin('people as maker', 'maker.id', 'shares.made_by')
    .leftJoin('people as revoker', 'revoker.id', 'shares.revoked_by')
    .select({
      id: 'shares.id',
      designId: 'revisions.design_id',
      revisionId: 'revisions.id',
      revisionLabel: 'revisions.label',
      revisionState: 'revisions.state',
      label: 'shares.label',
      passphraseHash: 'shares.passphrase_hash',
      showsAddresses: 'shares.shows_addresses',
      showsFindings: 'shares.shows_findings',
      tellsMaker: 'shares.tells_maker',
      expiresOn: knex.raw("to_char(shares.expires_on, 'YYYY-MM-DD')"),
      makerId: 'shares.made_by',
      madeBy: 'maker.name',
      madeAt: 'shares.made_at',
      revokedBy: 'revoker.name',
      revokedAt: 'shares.revoked_at',
      views: 'shares.views',
      viewedAt: 'shares.viewed_at',
    });
}

function fromFlat({ madeAt, revokedAt, viewedAt, ...row }: Flat): ShareRow {
  return {
    ...row,
    hasPassphrase: row.passphraseHash !== null,
    madeAt: madeAt.toISOString(),
    revokedAt: revokedAt?.toISOString() ?? null,
    viewedAt: viewedAt?.toISOString() ?? null,
  };
}

/** All links to revisions of a design, the newest first. */
export async function listShares(knex: Knex, designId: string): Promise<readonly ShareRow[]> {
  const rows = (await selectShares(knex)
    .where({ 'revisions.design_id': designId })
    .orderBy([{ column: 'shares.made_at', order: 'desc' }, { column: 'shares.id' }])) as Flat[];
  return rows.map(fromFlat);
}

export async function findShare(
  knex: Knex,
  which: { readonly id: string } | { readonly token_hash: Buffer },
): Promise<ShareRow | null> {
  const [[column, value] = []] = Object.entries(which);
  const row = (await selectShares(knex).where(`shares.${column}`, value).first()) as Flat | undefined;
  return row === undefined ? null : fromFlat(row);
}

export async function insertShare(
  trx: Knex.Transaction,
  share: Pick<
    ShareRow,
    | 'revisionId'
    | 'label'
    | 'passphraseHash'
    | 'showsAddresses'
    | 'showsFindings'
    | 'tellsMaker'
    | 'expiresOn'
  > & { readonly tokenHash: Buffer },
  personId: string,
  at: Date,
): Promise<string> {
  const rows = await trx('shares')
    .insert({
      revision_id: share.revisionId,
      label: share.label,
      token_hash: share.tokenHash,
      passphrase_hash: share.passphraseHash,
      shows_addresses: share.showsAddresses,
      shows_findings: share.showsFindings,
      tells_maker: share.tellsMaker,
      expires_on: share.expiresOn,
      made_by: personId,
      made_at: at,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

/** Revokes a share; one that is revoked already stays as it was. */
export async function revokeShare(
  trx: Knex.Transaction,
  id: string,
  personId: string,
  at: Date,
): Promise<boolean> {
  const count = await trx('shares')
    .where({ id })
    .whereNull('revoked_at')
    .update({ revoked_by: personId, revoked_at: at });
  return count > 0;
}

export async function countView(trx: Knex.Transaction, id: string, at: Date): Promise<void> {
  await trx('shares')
    .where({ id })
    .update({ views: trx.raw('views + 1'), viewed_at: at });
}
