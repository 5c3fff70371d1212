import type { CreateDesign, DesignSummary, OpenDesign } from '#contract/designs.ts';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { demoDesign } from '../../seeds/demo-designs/demo-design.ts';
import { authorise } from '../auth/authorise.ts';
import { permissions } from '../auth/permissions.ts';
import { Refusal, notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import { insertSnapshot } from '../repositories/design-snapshots.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign, insertDesign, lockDesign, setDesignPutAway } from '../repositories/designs.ts';
import { findEngagement } from '../repositories/engagements.ts';
import { listMemberships } from '../repositories/memberships.ts';
import { findAccount } from '../repositories/people.ts';
import type { Context } from './context.ts';
import { summarise, summaryOf } from './design-summary.ts';
import { saveTitle } from './save-edits.ts';
import { sizeProblem } from './settle-edits.ts';
import { loadDocument } from './stored-documents.ts';
import { withCurrentCounts } from './waivers.ts';

/** Starts a design: empty, from the demo, as a copy of another, or from a document. */
export async function createDesign(
  context: Context,
  personId: string,
  engagementId: string,
  { title, from }: CreateDesign,
): Promise<DesignSummary> {
  const { database, clock } = context;
  const engagement = await findEngagement(database.knex, engagementId);
  if (engagement === null) throw notFound('engagement');
  await authorise(database.knex, personId, 'design.create', engagement.workspaceId, 'engagement');
  if (engagement.archivedAt !== null) {
    throw new Refusal('conflict', 'The engagement is archived; restore it before you start a design in it.');
  }
  const document = withTitle(
    await firstDocument(context, personId, engagement.workspaceId, title, from),
    title,
  );
  const id = await database.knex.transaction(async (trx) => {
    const at = clock();
    const inserted = await insertDesign(trx, engagementId, summarise(document), personId, at);
    await insertSnapshot(trx, inserted, { sequence: 0, document });
    await recordActivity(trx, {
      workspaceId: engagement.workspaceId,
      at,
      action: 'design.created',
      personId,
      object: { kind: 'design', id: inserted, name: title },
      designId: inserted,
      details: { engagement: engagement.name },
    });
    return inserted;
  });
  return summaryOf(await requireDesign(context, id));
}

/** A design with its document, and what the reader may do with it. */
export async function openDesign(context: Context, personId: string, designId: string): Promise<OpenDesign> {
  const { knex } = context.database;
  const row = await requireDesign(context, designId);
  const role = await authorise(knex, personId, 'design.read', row.workspaceId, 'design');
  const [design = row] = await withCurrentCounts(context, [row]);
  const { document } = await loadDocument(context, knex, design);
  const isPutAway = design.archivedAt !== null || design.engagementArchivedAt !== null;
  return {
    summary: summaryOf(design),
    engagementName: design.engagementName,
    workspaceId: design.workspaceId,
    actions: permissions[role].filter(
      (action) => action !== 'design.edit' || (!isPutAway && design.state === 'draft'),
    ),
    sequence: design.sequence,
    document,
  };
}

/** Renames, archives, deletes or restores a design. */
export async function changeDesign(
  context: Context,
  personId: string,
  designId: string,
  {
    title,
    archived,
    deleted,
  }: { readonly title?: string; readonly archived?: boolean; readonly deleted?: boolean },
): Promise<DesignSummary> {
  const { database, clock } = context;
  const design = await requireDesign(context, designId);
  await authorise(database.knex, personId, 'design.edit', design.workspaceId, 'design');
  // Restored before it is renamed, renamed before it is archived: an archived design takes no patch.
  if (archived === false || deleted === false)
    await putAway(context, personId, designId, { archivedAt: null, deletedAt: null });
  if (title !== undefined) await saveTitle(context, personId, designId, title);
  const at = clock();
  if (archived === true) await putAway(context, personId, designId, { archivedAt: at, deletedAt: null });
  if (deleted === true) await putAway(context, personId, designId, { archivedAt: at, deletedAt: at });
  return summaryOf(await requireDesign(context, designId));
}

/** What is put away already keeps the time at which it was. */
async function putAway(
  { database, clock }: Context,
  personId: string,
  designId: string,
  { archivedAt, deletedAt }: Pick<DesignRow, 'archivedAt' | 'deletedAt'>,
): Promise<void> {
  await database.knex.transaction(async (trx) => {
    const design = await lockDesign(trx, designId);
    if (design === null) throw notFound('design');
    await authorise(trx, personId, 'design.archive', design.workspaceId, 'design');
    await setDesignPutAway(trx, designId, {
      archivedAt: archivedAt && (design.archivedAt ?? archivedAt),
      deletedAt: deletedAt && (design.deletedAt ?? deletedAt),
    });
    const action = putAwayAction(design, { archivedAt, deletedAt });
    if (action !== null)
      await recordActivity(trx, {
        workspaceId: design.workspaceId,
        at: clock(),
        action,
        personId,
        object: { kind: 'design', id: designId, name: design.title },
        designId,
      });
  });
}

/** What became of a design; null where it was so before. */
function putAwayAction(
  before: DesignRow,
  after: Pick<DesignRow, 'archivedAt' | 'deletedAt'>,
): 'design.archived' | 'design.deleted' | 'design.restored' | null {
  if (after.deletedAt !== null) return before.deletedAt === null ? 'design.deleted' : null;
  if (after.archivedAt === null) return before.archivedAt === null ? null : 'design.restored';
  // What was deleted and is only archived from now on has come back, too.
  if (before.deletedAt !== null) return 'design.restored';
  return before.archivedAt === null ? 'design.archived' : null;
}

export async function requireDesign({ database }: Context, designId: string): Promise<DesignRow> {
  const design = await findDesign(database.knex, designId);
  if (design === null) throw notFound('design');
  return design;
}

async function firstDocument(
  context: Context,
  personId: string,
  workspaceId: string,
  title: string,
  from: CreateDesign['from'],
): Promise<Design> {
  switch (from.kind) {
    case 'empty':
      return withAuthor(context, personId, workspaceId, emptyDesign(title));
    case 'demo':
      return demoDesign(from.demo);
    case 'copy':
      return copied(await documentOf(context, personId, from.designId));
    case 'document':
      return parsed(from.document);
  }
}

/** A new drawing's title block says whose it is and who drew it; both can be written over. */
async function withAuthor(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
  document: Design,
): Promise<Design> {
  const [person, memberships] = await Promise.all([
    findAccount(knex, personId),
    listMemberships(knex, personId),
  ]);
  const workspace = memberships.find((membership) => membership.workspaceId === workspaceId);
  return applyPatch(document, {
    meta: { createdBy: person?.name ?? null, legalOwner: workspace?.workspaceName ?? null },
  });
}

async function documentOf(context: Context, personId: string, designId: string): Promise<Design> {
  const { knex } = context.database;
  const design = await requireDesign(context, designId);
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  return (await loadDocument(context, knex, design)).document;
}

/** A copy is another drawing: what identifies and releases the first is not carried over. */
function copied(document: Design): Design {
  return applyPatch(document, {
    meta: { identification: null, revision: null, approvedBy: null, dateOfIssue: null, status: null },
  });
}

function parsed(input: unknown): Design {
  const result = parseDesign(input);
  if (!result.ok) {
    const count = result.problems.length;
    throw new Refusal(
      'invalid-design',
      count === 1 ? 'The document has a problem.' : `The document has ${count} problems.`,
      { details: result.problems.slice(0, mostProblemsShown) },
    );
  }
  const tooLarge = sizeProblem(result.value);
  if (tooLarge !== null) {
    throw new Refusal('too-large', `The design has ${tooLarge.value}, ${tooLarge.expected}.`, {
      details: [tooLarge],
    });
  }
  return result.value;
}

const mostProblemsShown = 200;

function withTitle(document: Design, title: string): Design {
  return { ...document, meta: { ...document.meta, title } };
}
