import type { Knex } from 'knex';
import type { Counts, DesignSummary } from '#contract/designs.ts';

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
  readonly changedAt: Date;
  /** The name of whoever changed it last. */
  readonly changedBy: string | null;
  readonly archivedAt: Date | null;
}

/** What a list shows of a document, kept beside it. */
export interface DocumentSummary {
  readonly title: string;
  readonly identification: string | null;
  readonly revision: string | null;
  readonly counts: Counts;
}

interface Flat extends Omit<DesignRow, 'counts'>, Counts {}

function selectDesigns(knex: Knex): Knex.QueryBuilder {
  return knex('designs')
    .join('engagements', 'engagements.id', 'designs.engagement_id')
    .leftJoin('people', 'people.id', 'designs.changed_by')
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
      changedAt: 'designs.changed_at',
      changedBy: 'people.name',
      archivedAt: 'designs.archived_at',
    });
}

function fromFlat({ blocking, degrading, advisory, ...row }: Flat): DesignRow {
  return { ...row, counts: { blocking, degrading, advisory } };
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

export async function setDesignArchivedAt(knex: Knex, id: string, archivedAt: Date | null): Promise<void> {
  await knex('designs').where({ id }).update({ archived_at: archivedAt });
}

function summaryColumns({ title, identification, revision, counts }: DocumentSummary) {
  return {
    title,
    identification,
    revision,
    blocking: counts.blocking,
    degrading: counts.degrading,
    advisory: counts.advisory,
  };
}
