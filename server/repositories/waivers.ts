import type { Knex } from 'knex';
import type { Severity } from '#engine/rules/finding.ts';

export interface WaiverRow {
  readonly id: string;
  readonly designId: string;
  readonly findingKey: string;
  readonly fingerprint: string;
  readonly rule: string;
  readonly severity: Severity;
  readonly sentence: string;
  readonly reason: string;
  /** The last day on which it holds, such as 2027-03-31. */
  readonly expiresOn: string;
  readonly madeBy: string | null;
  readonly madeAt: string;
  readonly withdrawnBy: string | null;
  readonly withdrawnAt: string | null;
}

interface Flat extends Omit<WaiverRow, 'madeAt' | 'withdrawnAt'> {
  readonly madeAt: Date;
  readonly withdrawnAt: Date | null;
}

function selectWaivers(knex: Knex): Knex.QueryBuilder {
  return knex('waivers')
    .leftJoin('people as maker', 'maker.id', 'waivers.made_by')
    .leftJoin('people as withdrawer', 'withdrawer.id', 'waivers.withdrawn_by')
    .orderBy([{ column: 'waivers.made_at', order: 'desc' }, { column: 'waivers.id' }])
    .select({
      id: 'waivers.id',
      designId: 'waivers.design_id',
      findingKey: 'waivers.finding_key',
      fingerprint: 'waivers.fingerprint',
      rule: 'waivers.rule',
      severity: 'waivers.severity',
      sentence: 'waivers.sentence',
      reason: 'waivers.reason',
      expiresOn: knex.raw("to_char(waivers.expires_on, 'YYYY-MM-DD')"),
      madeBy: 'maker.name',
      madeAt: 'waivers.made_at',
      withdrawnBy: 'withdrawer.name',
      withdrawnAt: 'waivers.withdrawn_at',
    });
}

function fromFlat({ madeAt, withdrawnAt, ...row }: Flat): WaiverRow {
  return { ...row, madeAt: madeAt.toISOString(), withdrawnAt: withdrawnAt?.toISOString() ?? null };
}

/** A design's waivers that nobody withdrew, whether or not they still hold; the newest first. */
export async function listStandingWaivers(knex: Knex, designId: string): Promise<readonly WaiverRow[]> {
  const rows = (await selectWaivers(knex).where({ design_id: designId }).whereNull('withdrawn_at')) as Flat[];
  return rows.map(fromFlat);
}

/** The waivers of a design that were withdrawn, the newest first. */
export async function listWithdrawnWaivers(
  knex: Knex,
  designId: string,
  most: number,
): Promise<readonly WaiverRow[]> {
  const rows = (await selectWaivers(knex)
    .where({ design_id: designId })
    .whereNotNull('withdrawn_at')
    .limit(most)) as Flat[];
  return rows.map(fromFlat);
}

export async function findWaiver(knex: Knex, designId: string, id: string): Promise<WaiverRow | null> {
  const row = (await selectWaivers(knex).where({ design_id: designId, 'waivers.id': id }).first()) as
    Flat | undefined;
  return row === undefined ? null : fromFlat(row);
}

export async function insertWaiver(
  trx: Knex.Transaction,
  waiver: Pick<
    WaiverRow,
    'designId' | 'findingKey' | 'fingerprint' | 'rule' | 'severity' | 'sentence' | 'reason' | 'expiresOn'
  >,
  personId: string,
  at: Date,
): Promise<string> {
  const rows = await trx('waivers')
    .insert({
      design_id: waiver.designId,
      finding_key: waiver.findingKey,
      fingerprint: waiver.fingerprint,
      rule: waiver.rule,
      severity: waiver.severity,
      sentence: waiver.sentence,
      reason: waiver.reason,
      expires_on: waiver.expiresOn,
      made_by: personId,
      made_at: at,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

/** Withdraws the waivers of a design that these words name; one that is withdrawn already stays as it was. */
export async function withdrawWaivers(
  trx: Knex.Transaction,
  designId: string,
  which: { readonly id: string } | { readonly finding_key: string },
  personId: string,
  at: Date,
): Promise<void> {
  await trx('waivers')
    .where({ design_id: designId, ...which })
    .whereNull('withdrawn_at')
    .update({ withdrawn_by: personId, withdrawn_at: at });
}
