import type { Knex } from 'knex';
import type { CreateShare, Share } from '#contract/shares.ts';
import { longestShareDays } from '#contract/shares.ts';
import { authorise } from '../auth/authorise.ts';
import { newLinkToken } from '../auth/link-tokens.ts';
import { hashPassword } from '../auth/passwords.ts';
import { Refusal, notFound } from '../errors.ts';
import { announce } from '../live/announce.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign } from '../repositories/designs.ts';
import { findRevision } from '../repositories/revisions.ts';
import type { ShareRow } from '../repositories/shares.ts';
import { findShare, insertShare, listShares, revokeShare } from '../repositories/shares.ts';
import { dayOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { requireDesign } from './designs.ts';

const dayMs = 24 * 60 * 60_000;
const shareable = ['in-review', 'approved', 'built'] as const;

/** Links to a design's revisions, the newest first. */
export async function readShares(context: Context, personId: string, designId: string): Promise<Share[]> {
  const { knex } = context.database;
  const { workspaceId } = await requireDesign(context, designId);
  await authorise(knex, personId, 'share.manage', workspaceId, 'design');
  return (await listShares(knex, designId)).map(shareOf);
}

/** Makes a link that shows a revision to whoever has it. */
export async function createShare(
  context: Context,
  personId: string,
  designId: string,
  wanted: CreateShare,
): Promise<{ readonly link: string; readonly share: Share }> {
  const { database, clock, publicUrl } = context;
  const at = clock();
  refuseExpiry(wanted.expiresOn, at);
  const { token, hash } = newLinkToken();
  const passphraseHash = wanted.passphrase === undefined ? null : await hashPassword(wanted.passphrase);
  return database.knex.transaction(async (trx) => {
    const design = await findDesign(trx, designId);
    if (design === null) throw notFound('design');
    await authorise(trx, personId, 'share.manage', design.workspaceId, 'design');
    const revision = await findRevision(trx, wanted.revisionId);
    if (revision?.designId !== designId) throw notFound('revision');
    if (!shareable.some((state) => state === revision.state)) {
      throw new Refusal(
        'conflict',
        `Revision ${revision.label} is ${revision.state}, which nobody outside is to see; share one that is in review, approved or built.`,
      );
    }
    const { label, showsAddresses, showsFindings, tellsMaker = false, expiresOn, revisionId } = wanted;
    const words = { revisionId, label, showsAddresses, showsFindings, tellsMaker, expiresOn };
    const id = await insertShare(trx, { ...words, passphraseHash, tokenHash: hash }, personId, at);
    const share = await requireShare(trx, id);
    await record(trx, share, design, 'share.created', personId, at);
    return { link: `${publicUrl}/share/${token}`, share: shareOf(share) };
  });
}

/** Ends a link; it stays on record. */
export async function endShare(context: Context, personId: string, shareId: string): Promise<Share> {
  const { database, clock } = context;
  return database.knex.transaction(async (trx) => {
    const share = await requireShare(trx, shareId);
    const design = await findDesign(trx, share.designId);
    if (design === null) throw notFound('share');
    await authorise(trx, personId, 'share.manage', design.workspaceId, 'share');
    const at = clock();
    if (await revokeShare(trx, shareId, personId, at))
      await record(trx, share, design, 'share.revoked', personId, at);
    return shareOf(await requireShare(trx, shareId));
  });
}

async function record(
  trx: Knex.Transaction,
  share: ShareRow,
  design: DesignRow,
  action: 'share.created' | 'share.revoked',
  personId: string,
  at: Date,
): Promise<void> {
  await recordActivity(trx, {
    workspaceId: design.workspaceId,
    at,
    action,
    personId,
    object: { kind: 'share', id: share.id, name: share.label },
    designId: design.id,
    details: { design: design.title, revision: share.revisionLabel },
  });
  await announce(trx, { designId: design.id, change: 'shares' });
}

async function requireShare(trx: Knex.Transaction, id: string): Promise<ShareRow> {
  const share = await findShare(trx, { id });
  if (share === null) throw notFound('share');
  return share;
}

function refuseExpiry(expiresOn: string, now: Date): void {
  const first = dayOf(now);
  const last = dayOf(new Date(now.getTime() + longestShareDays * dayMs));
  if (expiresOn >= first && expiresOn <= last) return;
  const expected = `expected a day from ${first} to ${last}`;
  throw new Refusal('invalid-request', `'expiresOn' is ${expiresOn}: ${expected}.`, {
    details: [{ path: 'expiresOn', value: expiresOn, expected }],
  });
}

function shareOf({ designId: _, passphraseHash: __, makerId: ___, ...share }: ShareRow): Share {
  return share;
}
