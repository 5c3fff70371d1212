import type { Knex } from 'knex';
import type { CommentList, Thread, WriteComment } from '#contract/comments.ts';
import { commentEditableForMinutes } from '#contract/comments.ts';
import type { ActivityAction } from '#contract/activity.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { announce } from '../live/announce.ts';
import { queueMail } from '../mail/queue-mail.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { CommentRow, MemberRow } from '../repositories/comments.ts';
import {
  countComments,
  emptyComment,
  findComment,
  insertComment,
  insertSuggestion,
  listComments,
  removeComment,
  setBody,
  setMentions,
  setResolved,
} from '../repositories/comments.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign } from '../repositories/designs.ts';
import { checkFactsOf } from './check-facts.ts';
import { pinnedTo } from './comment-pins.ts';
import { calledOf, requireCommentFor, threadOf, threadsOf } from './comment-threads.ts';
import { excerptOf, listMentionable, mentionsOf, refuseSecret } from './comment-words.ts';
import type { Context } from './context.ts';
import { initialsOf } from './describe-session.ts';
import { limits } from './limits.ts';
import { onLockedDesign } from './log-edits.ts';
import { loadDocument } from './stored-documents.ts';
import { suggestionFor } from './suggestions.ts';

/** All that was said about a design, and who can be called to it. */
export async function readComments(
  { database: { knex } }: Context,
  personId: string,
  designId: string,
): Promise<CommentList> {
  const design = await findDesign(knex, designId);
  if (design === null) throw notFound('design');
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  const members = await listMentionable(knex, design.workspaceId);
  return {
    threads: threadsOf(await listComments(knex, designId)),
    members: members.map(({ id, name, role }) => ({ id, name, role, initials: initialsOf(name) })),
  };
}

/** Begins a thread or replies in one, with a suggestion where one is given. Who is called gets a mail. */
export function writeComment(
  context: Context,
  personId: string,
  designId: string,
  { body, pin = { kind: 'design' }, replyTo, suggestion }: WriteComment,
): Promise<Thread> {
  refuseSecret(body);
  return onDesign(context, personId, designId, async (trx, design) => {
    if ((await countComments(trx, designId)) >= limits.commentsOfDesign) {
      throw new Refusal(
        'conflict',
        `The design has ${limits.commentsOfDesign} comments, as many as it can have; delete some of your own first.`,
      );
    }
    if (replyTo !== undefined) await requireOpenThread(trx, designId, replyTo);
    const { document } = await loadDocument(context, trx, design);
    const at = context.clock();
    const members = await listMentionable(trx, design.workspaceId);
    const mentioned = mentionsOf(body, members);
    const commentId = await insertComment(trx, {
      designId,
      threadId: replyTo ?? null,
      body,
      pin: replyTo === undefined ? pinnedTo(document, await checkFactsOf(context, trx, design), pin) : null,
      personId,
      at,
    });
    if (suggestion !== undefined)
      await insertSuggestion(trx, commentId, await suggestionFor(context, trx, design, suggestion));
    await setMentions(trx, commentId, mentioned);
    const threadId = replyTo ?? commentId;
    await callPeople(context, trx, { design, threadId, personId, body, members, called: mentioned });
    return changed(context, trx, design, threadId, personId, { action: 'comment.written', commentId });
  });
}

/** Changes the words of a comment of one's own, while it is new. Who is called only now gets a mail. */
export function changeComment(
  context: Context,
  personId: string,
  commentId: string,
  body: string,
): Promise<Thread> {
  refuseSecret(body);
  return onComment(context, personId, commentId, async (trx, design, comment) => {
    requireOwn(comment, personId, 'change');
    const at = context.clock();
    if (at.getTime() - comment.writtenAt.getTime() > commentEditableForMinutes * 60_000) {
      throw new Refusal(
        'conflict',
        `A comment can be changed for ${commentEditableForMinutes} minutes after it was written; write a reply that puts it right.`,
      );
    }
    const members = await listMentionable(trx, design.workspaceId);
    const before = comment.mentions.map(({ id }) => id);
    const mentioned = mentionsOf(body, members, before);
    await setBody(trx, commentId, body, at);
    await setMentions(trx, commentId, mentioned);
    const threadId = comment.threadId ?? comment.id;
    const called = mentioned.filter((id) => !before.includes(id));
    await callPeople(context, trx, { design, threadId, personId, body, members, called });
    return changed(context, trx, design, threadId, personId);
  });
}

/** Takes back a comment of one's own. The first of a thread leaves its place while others' replies hang on it. */
export async function deleteComment(context: Context, personId: string, commentId: string): Promise<void> {
  await onComment(context, personId, commentId, async (trx, design, comment) => {
    requireOwn(comment, personId, 'delete');
    if (comment.suggestion !== null && comment.suggestion.appliedAt !== null) {
      throw new Refusal('conflict', 'The suggestion was applied and stays on record with the design.');
    }
    const threadId = comment.threadId ?? comment.id;
    const others = (await listComments(trx, design.id, threadId)).filter(({ id }) => id !== commentId);
    const [head] = others;
    if (comment.threadId === null && others.length > 0) await emptyComment(trx, commentId, context.clock());
    // With its last reply goes a thread whose first comment was deleted before.
    else if (others.length === 1 && head?.deletedAt != null) await removeComment(trx, threadId);
    else await removeComment(trx, commentId);
    await announce(trx, { designId: design.id, change: 'comments' });
  });
}

/** Says that a thread is dealt with, or takes that back. What is so already stays as it is. */
export function resolveThread(
  context: Context,
  personId: string,
  commentId: string,
  resolved: boolean,
): Promise<Thread> {
  return onComment(context, personId, commentId, async (trx, design, comment) => {
    const threadId = comment.threadId ?? comment.id;
    const head = await findComment(trx, threadId);
    if ((head?.resolvedAt != null) === resolved)
      return threadOf(await listComments(trx, design.id, threadId));
    await setResolved(trx, threadId, resolved ? { personId, at: context.clock() } : null);
    return changed(context, trx, design, threadId, personId, {
      action: resolved ? 'comment.resolved' : 'comment.reopened',
      commentId: threadId,
    });
  });
}

function onDesign<T>(
  context: Context,
  personId: string,
  designId: string,
  work: (trx: Knex.Transaction, design: DesignRow) => Promise<T>,
): Promise<T> {
  return onLockedDesign(context, personId, designId, 'comment.write', async (trx, design) => ({
    saved: null,
    answer: await work(trx, design),
  }));
}

async function onComment<T>(
  context: Context,
  personId: string,
  commentId: string,
  work: (trx: Knex.Transaction, design: DesignRow, comment: CommentRow) => Promise<T>,
): Promise<T> {
  const { designId } = await requireCommentFor(context, personId, commentId, 'comment.write');
  return onDesign(context, personId, designId, async (trx, design) => {
    const comment = await findComment(trx, commentId);
    if (comment === null) throw notFound('comment');
    return work(trx, design, comment);
  });
}

async function requireOpenThread(trx: Knex.Transaction, designId: string, threadId: string): Promise<void> {
  const head = await findComment(trx, threadId);
  if (head === null || head.designId !== designId || head.threadId !== null) throw notFound('comment');
  if (head.resolvedAt !== null)
    throw new Refusal('conflict', 'The thread is resolved; reopen it before you reply.');
}

function requireOwn(comment: CommentRow, personId: string, verb: string): void {
  if (comment.author?.id !== personId)
    throw new Refusal(
      'not-allowed',
      `You can ${verb} comments of your own alone; reply to this one instead.`,
    );
  if (comment.deletedAt !== null) throw new Refusal('conflict', 'The comment is deleted already.');
}

/** Tells browsers, notes what was done, and answers the thread as it is then. */
async function changed(
  context: Context,
  trx: Knex.Transaction,
  design: DesignRow,
  threadId: string,
  personId: string,
  activity?: { readonly action: ActivityAction; readonly commentId: string },
): Promise<Thread> {
  const rows = await listComments(trx, design.id, threadId);
  if (activity !== undefined) {
    await recordActivity(trx, {
      workspaceId: design.workspaceId,
      at: context.clock(),
      action: activity.action,
      personId,
      object: { kind: 'comment', id: activity.commentId, name: calledOf(rows, design) },
      designId: design.id,
    });
  }
  await announce(trx, { designId: design.id, change: 'comments' });
  return threadOf(rows);
}

interface Call {
  readonly design: DesignRow;
  readonly threadId: string;
  readonly personId: string;
  readonly body: string;
  readonly members: readonly MemberRow[];
  readonly called: readonly string[];
}

/** Mails to those who are called, other than oneself. Whoever left the workspace is among the members no more. */
async function callPeople(
  { publicUrl }: Context,
  trx: Knex.Transaction,
  { design, threadId, personId, body, members, called }: Call,
): Promise<void> {
  const by = members.find(({ id }) => id === personId)?.name ?? '';
  for (const { id, name, email } of members) {
    if (id === personId || !called.includes(id)) continue;
    await queueMail(trx, {
      kind: 'mention',
      workspaceId: design.workspaceId,
      to: { email, name, personId: id },
      designTitle: design.title,
      by,
      excerpt: excerptOf(body, members),
      link: `${publicUrl}/designs/${design.id}/review?thread=${threadId}`,
    });
  }
}
