import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import type { Counts, DesignSummary } from '#contract/designs.ts';
import type { DesignNumbers } from '#engine/numbering/numbering-context.ts';

/** A design without its document, and where it belongs. */
export interface DesignRow {
  readonly id: string;
  readonly engagementId: string;
  readonly engagementName: string;
  readonly engagementArchivedAt: Date | null;
  readonly workspaceId: string;
  readonly state: DesignSummary['state'];
  readonly sequence: number;
  readonly title: string;
  readonly identification: string | null;
  readonly revision: string | null;
  readonly counts: Counts;
  /** The last day on which the counts hold, such as 2027-03-31; null where no day ends them. */
  readonly countsUntil: string | null;
  readonly changedAt: Date;
  /** The name of whoever changed it last. */
  readonly changedBy: string | null;
  readonly archivedAt: Date | null;
  readonly deletedAt: Date | null;
  /** The revision to build from: approved or built, and not superseded. */
  readonly issued: IssuedRevision | null;
}

export type IssuedRevision = NonNullable<DesignSummary['issued']>;

/** How many findings no waiver covers, and the last day on which that is so. */
export interface OpenCounts {
  readonly counts: Counts;
  readonly countsUntil: string | null;
}

/** Which of the workspace's profiles a document holds copies of, by the copy's id. */
export interface ProfileCopies {
  readonly [copyId: string]: { readonly digest: string; readonly devices: number };
}

/** What is read of a document, kept beside it so that no list needs documents. */
export interface DocumentSummary extends OpenCounts {
  readonly title: string;
  readonly identification: string | null;
  readonly revision: string | null;
  readonly numbers: DesignNumbers;
  readonly profileCopies: ProfileCopies;
}

interface Flat extends Omit<DesignRow, 'counts' | 'issued'>, Counts {
  readonly issuedId: IssuedRevision['id'] | null;
  readonly issuedLabel: IssuedRevision['label'];
  readonly issuedState: IssuedRevision['state'];
}

function selectDesigns(knex: Knex): Knex.QueryBuilder {
  return knex('designs')
    .join('engagements', 'engagements.id', 'designs.engagement_id')
    .leftJoin('people', 'people.id', 'designs.changed_by')
    .leftJoin('revisions', (join) =>
      join.on('revisions.design_id', 'designs.id').andOnIn('revisions.state', ['approved', 'built']),
    )
    .select({
      id: 'designs.id',
      engagementId: 'designs.engagement_id',
      engagementName: 'engagements.name',
      engagementArchivedAt: 'engagements.archived_at',
      workspaceId: 'engagements.workspace_id',
      state: 'designs.state',
      sequence: 'designs.sequence',
      title: 'designs.title',
      identification: 'designs.identification',
      revision: 'designs.revision',
      blocking: 'designs.blocking',
      degrading: 'designs.degrading',
      advisory: 'designs.advisory',
      countsUntil: knex.raw("to_char(designs.counts_until, 'YYYY-MM-DD')"),
      changedAt: 'designs.changed_at',
      changedBy: 'people.name',
      archivedAt: 'designs.archived_at',
      deletedAt: 'designs.deleted_at',
      issuedId: 'revisions.id',
      issuedLabel: 'revisions.label',
      issuedState: 'revisions.state',
    });
}

function fromFlat({
  blocking,
  degrading,
  advisory,
  issuedId,
  issuedLabel,
  issuedState,
  ...row
}: Flat): DesignRow {
  return {
    ...row,
    counts: { blocking, degrading, advisory },
    issued: issuedId === null ? null : { id: issuedId, label: issuedLabel, state: issuedState },
  };
}

export async function findDesign(knex: Knex, id: string): Promise<DesignRow | null> {
  const row = (await selectDesigns(knex).where({ 'designs.id': id }).first()) as Flat | undefined;
  return row === undefined ? null : fromFlat(row);
}

/** Finds a design and holds it until the transaction ends: whoever else wants to save waits. */
export async function lockDesign(trx: Knex.Transaction, id: string): Promise<DesignRow | null> {
  // Locked first, read afterwards: what a joined read returns after waiting for a lock may be half old.
  const locked = await trx('designs').where({ id }).forUpdate().first('id');
  return locked === undefined ? null : findDesign(trx, id);
}

/** A workspace's designs, the last changed first. */
export async function listDesigns(
  knex: Knex,
  workspaceId: string,
  withArchived: boolean,
): Promise<readonly DesignRow[]> {
  const query = selectDesigns(knex)
    .where({ 'engagements.workspace_id': workspaceId })
    .orderBy([{ column: 'designs.changed_at', order: 'desc' }, { column: 'designs.id' }]);
  if (!withArchived) query.whereNull('designs.archived_at');
  return ((await query) as Flat[]).map(fromFlat);
}

export async function insertDesign(
  knex: Knex,
  engagementId: string,
  summary: DocumentSummary,
  personId: string | null,
  at: Date,
): Promise<string> {
  const rows = await knex('designs')
    .insert({
      engagement_id: engagementId,
      ...summaryColumns(summary),
      created_at: at,
      created_by: personId,
      changed_at: at,
      changed_by: personId,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

/** Notes that patches were logged up to `sequence`. */
export async function updateAfterSave(
  knex: Knex,
  id: string,
  change: {
    readonly sequence: number;
    readonly summary: DocumentSummary;
    readonly personId: string;
    readonly at: Date;
  },
): Promise<void> {
  await knex('designs')
    .where({ id })
    .update({
      sequence: change.sequence,
      ...summaryColumns(change.summary),
      changed_at: change.at,
      changed_by: change.personId,
    });
}

export async function setDesignState(knex: Knex, id: string, state: DesignRow['state']): Promise<void> {
  await knex('designs').where({ id }).update({ state });
}

/** Who began a design, and when. */
export async function findCreation(
  knex: Knex,
  id: string,
): Promise<{ readonly personId: string | null; readonly name: string | null; readonly at: Date } | null> {
  const row = await knex('designs')
    .leftJoin('people', 'people.id', 'designs.created_by')
    .where({ 'designs.id': id })
    .first<{ personId: string | null; name: string | null; at: Date } | undefined>({
      personId: 'designs.created_by',
      name: 'people.name',
      at: 'designs.created_at',
    });
  return row ?? null;
}

export async function setDesignPutAway(
  knex: Knex,
  id: string,
  { archivedAt, deletedAt }: Pick<DesignRow, 'archivedAt' | 'deletedAt'>,
): Promise<void> {
  await knex('designs').where({ id }).update({ archived_at: archivedAt, deleted_at: deletedAt });
}

/** Removes the designs of a workspace that were deleted before a moment, with all that belongs to them. */
export async function removeDeletedDesigns(knex: Knex, workspaceId: string, before: Date): Promise<void> {
  const engagements = knex('engagements').where({ workspace_id: workspaceId }).select('id');
  await knex('designs').whereIn('engagement_id', engagements).where('deleted_at', '<', before).delete();
}

/** Notes how many findings are open now, after a waiver was given, withdrawn or has ended. */
export async function setOpenCounts(knex: Knex, id: string, open: OpenCounts): Promise<void> {
  await knex('designs').where({ id }).update(countColumns(open));
}

/** Notes the numbers of a document that was last saved before numbers were kept. */
export async function setNumbers(knex: Knex, id: string, numbers: DesignNumbers): Promise<void> {
  await knex('designs').where({ id }).whereNull('numbers_digest').update(numberColumns(numbers));
}

function summaryColumns({
  title,
  identification,
  revision,
  numbers,
  profileCopies,
  ...open
}: DocumentSummary) {
  return {
    title,
    identification,
    revision,
    ...countColumns(open),
    ...numberColumns(numbers),
    profile_copies: JSON.stringify(profileCopies),
  };
}

function countColumns({ counts, countsUntil }: OpenCounts) {
  return {
    blocking: counts.blocking,
    degrading: counts.degrading,
    advisory: counts.advisory,
    counts_until: countsUntil,
  };
}

function numberColumns(numbers: DesignNumbers) {
  const text = JSON.stringify(numbers);
  return { numbers: text, numbers_digest: createHash('sha256').update(text).digest('base64url') };
}
