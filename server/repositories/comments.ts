import type { Knex } from 'knex';
import type { Pin } from '#contract/comments.ts';
import type { Role } from '#contract/session.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';

export interface PersonRow {
  readonly id: string;
  readonly name: string;
}

export interface SuggestionRow {
  readonly patch: MergePatch;
  readonly before: MergePatch;
  readonly baseSequence: number;
  readonly appliedBy: PersonRow | null;
  readonly appliedAt: Date | null;
  readonly appliedSequence: number | null;
}

export interface CommentRow {
  readonly id: string;
  readonly designId: string;
  /** Null for the first of a thread. */
  readonly threadId: string | null;
  readonly author: PersonRow | null;
  readonly writtenAt: Date;
  readonly editedAt: Date | null;
  readonly deletedAt: Date | null;
  readonly body: string;
  readonly revision: { readonly id: string; readonly label: string } | null;
  /** Null: the design as a whole. */
  readonly pin: Pin | null;
  readonly resolvedBy: PersonRow | null;
  readonly resolvedAt: Date | null;
  readonly mentions: readonly PersonRow[];
  readonly suggestion: SuggestionRow | null;
}

interface Flat {
  readonly id: string;
  readonly designId: string;
  readonly threadId: string | null;
  readonly authorId: string | null;
  readonly authorName: string | null;
  readonly writtenAt: Date;
  readonly editedAt: Date | null;
  readonly deletedAt: Date | null;
  readonly body: string;
  readonly revisionId: string | null;
  readonly revisionLabel: string | null;
  readonly pin: Pin | null;
  readonly resolverId: string | null;
  readonly resolverName: string | null;
  readonly resolvedAt: Date | null;
  readonly patch: MergePatch | null;
  readonly before: MergePatch | null;
  readonly baseSequence: number | null;
  readonly applierId: string | null;
  readonly applierName: string | null;
  readonly appliedAt: Date | null;
  readonly appliedSequence: number | null;
  readonly mentions: readonly PersonRow[];
}

function selectComments(knex: Knex): Knex.QueryBuilder {
  return knex('comments')
    .leftJoin('people as author', 'author.id', 'comments.written_by')
    .leftJoin('people as resolver', 'resolver.id', 'comments.resolved_by')
    .leftJoin('revisions', 'revisions.id', 'comments.revision_id')
    .leftJoin('suggestions', 'suggestions.comment_id', 'comments.id')
    .leftJoin('people as applier', 'applier.id', 'suggestions.applied_by')
    .select({
      id: 'comments.id',
      designId: 'comments.design_id',
      threadId: 'comments.thread_id',
      authorId: 'author.id',
      authorName: 'author.name',
      writtenAt: 'comments.written_at',
      editedAt: 'comments.edited_at',
      deletedAt: 'comments.deleted_at',
      body: 'comments.body',
      revisionId: 'revisions.id',
      revisionLabel: 'revisions.label',
      pin: 'comments.pin',
      resolverId: 'resolver.id',
      resolverName: 'resolver.name',
      resolvedAt: 'comments.resolved_at',
      patch: 'suggestions.patch',
      before: 'suggestions.before',
      baseSequence: 'suggestions.base_sequence',
      applierId: 'applier.id',
      applierName: 'applier.name',
      appliedAt: 'suggestions.applied_at',
      appliedSequence: 'suggestions.applied_sequence',
      mentions: knex.raw(`coalesce(
        (select json_agg(json_build_object('id', p.id, 'name', p.name) order by p.name, p.id)
          from comment_mentions m join people p on p.id = m.person_id where m.comment_id = comments.id), '[]')`),
    });
}

const personOf = (id: string | null, name: string | null): PersonRow | null =>
  id === null || name === null ? null : { id, name };

function fromFlat(row: Flat): CommentRow {
  return {
    id: row.id,
    designId: row.designId,
    threadId: row.threadId,
    author: personOf(row.authorId, row.authorName),
    writtenAt: row.writtenAt,
    editedAt: row.editedAt,
    deletedAt: row.deletedAt,
    body: row.body,
    revision:
      row.revisionId === null || row.revisionLabel === null
        ? null
        : { id: row.revisionId, label: row.revisionLabel },
    pin: row.pin,
    resolvedBy: personOf(row.resolverId, row.resolverName),
    resolvedAt: row.resolvedAt,
    mentions: row.mentions,
    suggestion:
      row.patch === null || row.before === null || row.baseSequence === null
        ? null
        : {
            patch: row.patch,
            before: row.before,
            baseSequence: row.baseSequence,
            appliedBy: personOf(row.applierId, row.applierName),
            appliedAt: row.appliedAt,
            appliedSequence: row.appliedSequence,
          },
  };
}

/** All comments of a design in the order in which they were written, or those of one thread. */
export async function listComments(
  knex: Knex,
  designId: string,
  threadId?: string,
): Promise<readonly CommentRow[]> {
  const query = selectComments(knex).where({ 'comments.design_id': designId }).orderBy('comments.number');
  if (threadId !== undefined)
    query.andWhere((only) =>
      only.where({ 'comments.id': threadId }).orWhere({ 'comments.thread_id': threadId }),
    );
  return ((await query) as Flat[]).map(fromFlat);
}

export async function findComment(knex: Knex, id: string): Promise<CommentRow | null> {
  const row = (await selectComments(knex).where({ 'comments.id': id }).first()) as Flat | undefined;
  return row === undefined ? null : fromFlat(row);
}

export async function countComments(knex: Knex, designId: string): Promise<number> {
  const [row] = await knex('comments').where({ design_id: designId }).count<{ count: string }[]>();
  return Number(row?.count ?? 0);
}

export interface NewComment {
  readonly designId: string;
  readonly threadId: string | null;
  readonly body: string;
  readonly pin: Pin | null;
  readonly personId: string;
  readonly at: Date;
}

/** Keeps a comment; it belongs to the revision that is in review, if one is. */
export async function insertComment(knex: Knex, comment: NewComment): Promise<string> {
  const rows = await knex('comments')
    .insert({
      design_id: comment.designId,
      thread_id: comment.threadId,
      written_by: comment.personId,
      written_at: comment.at,
      body: comment.body,
      pin: comment.pin === null ? null : JSON.stringify(comment.pin),
      revision_id: knex('revisions').where({ design_id: comment.designId, state: 'in-review' }).select('id'),
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

export async function insertSuggestion(
  knex: Knex,
  commentId: string,
  { patch, before, baseSequence }: Pick<SuggestionRow, 'patch' | 'before' | 'baseSequence'>,
): Promise<void> {
  await knex('suggestions').insert({
    comment_id: commentId,
    patch: JSON.stringify(patch),
    before: JSON.stringify(before),
    base_sequence: baseSequence,
  });
}

/** The people of a comment become exactly these. */
export async function setMentions(
  knex: Knex,
  commentId: string,
  personIds: readonly string[],
): Promise<void> {
  await knex('comment_mentions').where({ comment_id: commentId }).whereNotIn('person_id', personIds).delete();
  if (personIds.length === 0) return;
  await knex('comment_mentions')
    .insert(personIds.map((id) => ({ comment_id: commentId, person_id: id })))
    .onConflict()
    .ignore();
}

export async function setBody(knex: Knex, commentId: string, body: string, at: Date): Promise<void> {
  await knex('comments').where({ id: commentId }).update({ body, edited_at: at });
}

/** Takes the words and all that hung on them, and leaves the place. */
export async function emptyComment(knex: Knex, commentId: string, at: Date): Promise<void> {
  await knex('comments').where({ id: commentId }).update({ body: '', deleted_at: at });
  await knex('comment_mentions').where({ comment_id: commentId }).delete();
  await knex('suggestions').where({ comment_id: commentId }).delete();
}

/** Removes a comment; with the first of a thread the thread goes. */
export async function removeComment(knex: Knex, commentId: string): Promise<void> {
  await knex('comments').where({ id: commentId }).delete();
}

export async function setResolved(
  knex: Knex,
  threadId: string,
  by: { readonly personId: string; readonly at: Date } | null,
): Promise<void> {
  await knex('comments')
    .where({ id: threadId })
    .update({ resolved_by: by?.personId ?? null, resolved_at: by?.at ?? null });
}

export async function setApplied(
  knex: Knex,
  commentId: string,
  personId: string,
  at: Date,
  sequence: number,
): Promise<void> {
  await knex('suggestions')
    .where({ comment_id: commentId })
    .update({ applied_by: personId, applied_at: at, applied_sequence: sequence });
}

export interface MemberRow {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
}

/** A workspace's members whose role is one of these, by name. */
export function listMembersOf(
  knex: Knex,
  workspaceId: string,
  roles: readonly Role[],
): Promise<readonly MemberRow[]> {
  return knex('memberships')
    .join('people', 'people.id', 'memberships.person_id')
    .where({ workspace_id: workspaceId })
    .whereIn('role', roles)
    .orderBy(['people.name', 'people.id'])
    .select<MemberRow[]>({
      id: 'people.id',
      name: 'people.name',
      email: 'people.email',
      role: 'memberships.role',
    });
}
