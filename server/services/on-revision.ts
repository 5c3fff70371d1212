import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import type { Revision } from '#contract/revisions.ts';
import type { Action } from '#contract/session.ts';
import type { Issue } from '#engine/model/issue.ts';
import { asIssued, issuePatch } from '#engine/model/issue.ts';
import { notFound } from '../errors.ts';
import { announce } from '../live/announce.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign, setDesignState } from '../repositories/designs.ts';
import { findAccount } from '../repositories/people.ts';
import type { Actor } from '../repositories/revisions.ts';
import { findRevision } from '../repositories/revisions.ts';
import type { Context } from './context.ts';
import type { LoggedResult } from './log-edits.ts';
import { logEdits, onLockedDesign } from './log-edits.ts';
import { openRevision } from './revisions.ts';
import type { StoredDocument } from './stored-documents.ts';
import { loadDocument } from './stored-documents.ts';

export interface HeldRevision {
  readonly revision: Revision;
  readonly design: DesignRow;
  readonly actor: Actor;
  readonly at: Date;
}

/** Works on a revision while nobody else can move it or its design; answers what became of it. */
export async function onRevision(
  context: Context,
  personId: string,
  revisionId: string,
  action: Action,
  work: (trx: Knex.Transaction, held: HeldRevision) => Promise<StoredDocument | null>,
): Promise<Revision> {
  const asked = await openRevision(context.database.knex, personId, revisionId, action);
  return onLockedDesign(context, personId, asked.design.id, action, async (trx, design) => {
    // Read again: it may have moved while this waited for its turn.
    const revision = await findRevision(trx, revisionId);
    if (revision === null) throw notFound('revision');
    const actor = await actorOf(trx, personId);
    const saved = await work(trx, { revision, design, actor, at: context.clock() });
    return { saved, answer: (await findRevision(trx, revisionId)) ?? revision };
  });
}

/** The person as one who acts: the name stays with what they did. */
export async function actorOf(knex: Knex, personId: string): Promise<Actor> {
  const account = await findAccount(knex, personId);
  if (account === null) throw new Error('somebody acts who has no account');
  return { id: account.id, name: account.name };
}

/** Moves a design to a state and lets its title block say so. */
export async function moveDesign(
  context: Context,
  trx: Knex.Transaction,
  actor: Actor,
  design: DesignRow,
  state: DesignRow['state'],
  issue: Issue,
): Promise<LoggedResult<DesignRow>> {
  await setDesignState(trx, design.id, state);
  await announce(trx, { designId: design.id, change: 'state' });
  const { document } = await loadDocument(context, trx, design);
  // What says so already takes no patch.
  const edits =
    asIssued(document, issue) === document ? [] : [{ editId: randomUUID(), patch: issuePatch(issue) }];
  const saved = await logEdits(context, trx, actor.id, design, edits, design.sequence, true);
  return { saved, answer: (await findDesign(trx, design.id)) ?? design };
}
