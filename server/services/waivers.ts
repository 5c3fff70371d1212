import type { Knex } from 'knex';
import type { Waive, Waiver } from '#contract/waivers.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { DesignRow, OpenCounts } from '../repositories/designs.ts';
import { findDesign, lockDesign, setOpenCounts } from '../repositories/designs.ts';
import type { WaiverRow } from '../repositories/waivers.ts';
import {
  findWaiver,
  insertWaiver,
  listStandingWaivers,
  listWithdrawnWaivers,
  withdrawWaivers,
} from '../repositories/waivers.ts';
import { checkFactsOf, dayOf, findingsBy } from './check-facts.ts';
import type { Context } from './context.ts';
import { countOpen } from './design-summary.ts';
import { limits } from './limits.ts';
import { refuseArchived } from './design-states.ts';
import { loadDocument } from './stored-documents.ts';

/** A design's waivers, the newest first: all that stand, and those that were withdrawn last. */
export async function readWaivers(context: Context, personId: string, designId: string): Promise<Waiver[]> {
  const { knex } = context.database;
  const design = await findDesign(knex, designId);
  if (design === null) throw notFound('design');
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  const standing = await listStandingWaivers(knex, designId);
  const withdrawn = await listWithdrawnWaivers(knex, designId, limits.withdrawnWaivers);
  return [...standing, ...withdrawn].sort((a, b) => (a.madeAt < b.madeAt ? 1 : -1)).map(waiverOf);
}

/** Accepts a finding for a time. It must be the finding that the person looked at: same key, same values. */
export function waiveFinding(
  context: Context,
  personId: string,
  designId: string,
  { findingKey, fingerprint, reason, expiresOn }: Waive,
): Promise<Waiver> {
  const at = context.clock();
  refuseExpiry(expiresOn, at);
  return onDesign(context, personId, designId, async (trx, design) => {
    const { document } = await loadDocument(context, trx, design);
    const { open, covered } = findingsBy(document, await checkFactsOf(context, trx, design));
    const finding = [...open, ...covered.map((each) => each.finding)].find(({ key }) => key === findingKey);
    if (finding === undefined) {
      throw new Refusal(
        'conflict',
        'The design has no such finding now, so there is nothing to waive; read the findings again.',
        {
          details: [
            { path: 'findingKey', value: findingKey.slice(0, 80), expected: 'expected the key of a finding' },
          ],
        },
      );
    }
    if (finding.fingerprint !== fingerprint) {
      throw new Refusal(
        'conflict',
        `The finding has changed since you looked at it: ${finding.sentence}. Look again before you waive it.`,
        {
          details: [{ path: 'fingerprint', value: fingerprint, expected: `expected ${finding.fingerprint}` }],
        },
      );
    }
    await withdrawWaivers(trx, designId, { finding_key: findingKey }, personId, at);
    const { rule, severity, sentence } = finding;
    const id = await insertWaiver(
      trx,
      { designId, findingKey, fingerprint, rule, severity, sentence, reason, expiresOn },
      personId,
      at,
    );
    await recordActivity(trx, {
      workspaceId: design.workspaceId,
      at,
      action: 'finding.waived',
      personId,
      object: { kind: 'waiver', id, name: sentence },
      designId,
      details: { design: design.title, reason, expiresOn },
    });
    return id;
  });
}

/** Takes a waiver back; it stays on record. One that was withdrawn before stays as it is. */
export function withdrawWaiver(
  context: Context,
  personId: string,
  designId: string,
  waiverId: string,
): Promise<Waiver> {
  return onDesign(context, personId, designId, async (trx, design) => {
    const waiver = await findWaiver(trx, designId, waiverId);
    if (waiver === null) throw notFound('waiver');
    if (waiver.withdrawnAt !== null) return waiverId;
    const at = context.clock();
    await withdrawWaivers(trx, designId, { id: waiverId }, personId, at);
    await recordActivity(trx, {
      workspaceId: design.workspaceId,
      at,
      action: 'waiver.withdrawn',
      personId,
      object: { kind: 'waiver', id: waiverId, name: waiver.sentence },
      designId,
      details: { design: design.title },
    });
    return waiverId;
  });
}

/** Changes waivers while nobody saves, and counts anew; answers the waiver that `work` names. */
async function onDesign(
  context: Context,
  personId: string,
  designId: string,
  work: (trx: Knex.Transaction, design: DesignRow) => Promise<string>,
): Promise<Waiver> {
  return context.database.knex.transaction(async (trx) => {
    const design = await lockDesign(trx, designId);
    if (design === null) throw notFound('design');
    await authorise(trx, personId, 'finding.waive', design.workspaceId, 'design');
    refuseArchived(design);
    const waiverId = await work(trx, design);
    const waiver = await findWaiver(trx, designId, waiverId);
    if (waiver === null) throw notFound('waiver');
    await recount(context, trx, design);
    return waiverOf(waiver);
  });
}

/** Notes beside a design how many of its findings are open today. */
async function recount(context: Context, trx: Knex.Transaction, design: DesignRow): Promise<OpenCounts> {
  const { document } = await loadDocument(context, trx, design);
  const open = countOpen(document, await checkFactsOf(context, trx, design));
  await setOpenCounts(trx, design.id, open);
  return open;
}

/** Designs as they were listed, those whose waivers ended meanwhile counted anew. */
export async function withCurrentCounts(
  context: Context,
  designs: readonly DesignRow[],
): Promise<readonly DesignRow[]> {
  const today = dayOf(context.clock());
  const ended = designs
    .filter(({ countsUntil }) => countsUntil !== null && countsUntil < today)
    .slice(0, limits.recountedAtOnce);
  const counted = new Map<string, OpenCounts>();
  for (const { id } of ended)
    await context.database.knex.transaction(async (trx) => {
      const design = await lockDesign(trx, id);
      if (design !== null) counted.set(id, await recount(context, trx, design));
    });
  return designs.map((design) => ({ ...design, ...counted.get(design.id) }));
}

function refuseExpiry(expiresOn: string, now: Date): void {
  const today = dayOf(now);
  const inAYear = new Date(now);
  inAYear.setUTCFullYear(now.getUTCFullYear() + 1);
  const last = dayOf(inAYear);
  if (expiresOn >= today && expiresOn <= last) return;
  const expected = `expected a day from ${today} to ${last}`;
  throw new Refusal(
    'invalid-request',
    `'expiresOn' is ${expiresOn}: ${expected}; a waiver ends within a year, so that somebody looks again.`,
    { details: [{ path: 'expiresOn', value: expiresOn, expected }] },
  );
}

export function waiverOf({ designId: _, ...waiver }: WaiverRow): Waiver {
  return waiver;
}
