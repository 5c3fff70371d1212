import type { Knex } from 'knex';
import type { Revision } from '#contract/revisions.ts';
import { permits } from '../auth/permissions.ts';
import { queueMail } from '../mail/queue-mail.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { listMembers } from '../repositories/members.ts';
import { findAccount } from '../repositories/people.ts';
import type { Actor } from '../repositories/revisions.ts';
import type { Context } from './context.ts';

/** Tells those who may decide that a review was asked for; not the one who asked. */
export async function mailReviewAsked(
  { publicUrl }: Context,
  trx: Knex.Transaction,
  { id, workspaceId, title }: DesignRow,
  by: Actor,
  message: string,
): Promise<void> {
  for (const { personId, name, email, role } of await listMembers(trx, workspaceId)) {
    if (personId === by.id || !permits(role, 'review.decide')) continue;
    await queueMail(trx, {
      kind: 'review-asked',
      workspaceId,
      to: { personId, name, email },
      designTitle: title,
      by: by.name,
      message,
      link: `${publicUrl}/designs/${id}`,
    });
  }
}

/** Tells the one who asked what was decided, unless they decided it themselves or are gone. */
export async function mailDecision(
  { publicUrl }: Context,
  trx: Knex.Transaction,
  kind: 'approved' | 'sent-back',
  { id, workspaceId, title }: DesignRow,
  { askedBy }: Revision,
  by: Actor,
  message: string,
): Promise<void> {
  if (askedBy.id === null || askedBy.id === by.id) return;
  const asker = await findAccount(trx, askedBy.id);
  if (asker === null) return;
  await queueMail(trx, {
    kind,
    workspaceId,
    to: { email: asker.email, name: asker.name, personId: asker.id },
    designTitle: title,
    by: by.name,
    message,
    link: `${publicUrl}/designs/${id}`,
  });
}
