import type { Comment, Commenter, Thread } from '#contract/comments.ts';
import type { Action } from '#contract/session.ts';
import { authorise } from '../auth/authorise.ts';
import { notFound } from '../errors.ts';
import type { CommentRow, PersonRow } from '../repositories/comments.ts';
import { findComment } from '../repositories/comments.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign } from '../repositories/designs.ts';
import type { Context } from './context.ts';
import { initialsOf } from './describe-session.ts';

/** A comment in which the person may do this; strangers are told that there is no such comment. */
export async function requireCommentFor(
  { database: { knex } }: Context,
  personId: string,
  commentId: string,
  action: Action,
): Promise<CommentRow> {
  const comment = await findComment(knex, commentId);
  const design = comment === null ? null : await findDesign(knex, comment.designId);
  if (comment === null || design === null) throw notFound('comment');
  await authorise(knex, personId, action, design.workspaceId, 'comment');
  return comment;
}

/** Comments of one design as threads, the last begun first. */
export function threadsOf(rows: readonly CommentRow[]): Thread[] {
  const byThread = new Map<string, CommentRow[]>();
  for (const row of rows) {
    const threadId = row.threadId ?? row.id;
    const thread = byThread.get(threadId);
    if (thread === undefined) byThread.set(threadId, [row]);
    else thread.push(row);
  }
  return [...byThread.values()].map(threadOf).reverse();
}

/** The comments of one thread, the first of them first. */
export function threadOf(rows: readonly CommentRow[]): Thread {
  const head = headOf(rows);
  return {
    id: head.id,
    pin: head.pin ?? { kind: 'design' },
    resolvedBy: commenterOf(head.resolvedBy),
    resolvedAt: head.resolvedAt?.toISOString() ?? null,
    comments: [head, ...rows.filter((row) => row !== head)].map(commentOf),
  };
}

/** What a thread is about, in the words of the record. */
export function calledOf(rows: readonly CommentRow[], design: DesignRow): string {
  const { pin } = headOf(rows);
  return pin === null || pin.kind === 'design' ? design.title : pin.called;
}

function headOf(rows: readonly CommentRow[]): CommentRow {
  const head = rows.find(({ threadId }) => threadId === null);
  if (head === undefined) throw new Error('a thread has no first comment');
  return head;
}

function commentOf(row: CommentRow): Comment {
  const { suggestion } = row;
  return {
    id: row.id,
    author: commenterOf(row.author),
    writtenAt: row.writtenAt.toISOString(),
    editedAt: row.editedAt?.toISOString() ?? null,
    deletedAt: row.deletedAt?.toISOString() ?? null,
    body: row.body,
    mentions: row.mentions.map(({ id, name }) => ({ id, name })),
    revision: row.revision,
    suggestion:
      suggestion === null
        ? null
        : {
            ...suggestion,
            appliedBy: commenterOf(suggestion.appliedBy),
            appliedAt: suggestion.appliedAt?.toISOString() ?? null,
          },
  };
}

const commenterOf = (person: PersonRow | null): Commenter | null =>
  person && { id: person.id, name: person.name, initials: initialsOf(person.name) };
