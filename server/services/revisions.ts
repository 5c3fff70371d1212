import type { Knex } from 'knex';
import type { FrozenRevision, Revision } from '#contract/revisions.ts';
import { issueOf } from '#contract/revisions.ts';
import type { Action, Role } from '#contract/session.ts';
import type { Design } from '#engine/model/design.ts';
import { asIssued } from '#engine/model/issue.ts';
import { authorise } from '../auth/authorise.ts';
import { permits } from '../auth/permissions.ts';
import { Refusal, notFound } from '../errors.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign } from '../repositories/designs.ts';
import { findRevision, listRevisions, readRevisionContent } from '../repositories/revisions.ts';
import type { Context } from './context.ts';
import { requireDesign } from './designs.ts';

/** A design's revisions, the newest first; to who reads no drafts those to build from alone. */
export async function readRevisions(
  context: Context,
  personId: string,
  designId: string,
): Promise<readonly Revision[]> {
  const { knex } = context.database;
  const { workspaceId } = await requireDesign(context, designId);
  const role = await authorise(knex, personId, 'revision.read', workspaceId, 'design');
  const revisions = await listRevisions(knex, designId);
  return permits(role, 'design.read') ? revisions : revisions.filter(({ state }) => isToBuildFrom(state));
}

/** A revision with all that was frozen. */
export async function readRevision(
  context: Context,
  personId: string,
  revisionId: string,
): Promise<FrozenRevision> {
  const { knex } = context.database;
  const { revision, design } = await openRevision(knex, personId, revisionId, 'revision.read');
  return {
    revision,
    workspaceId: design.workspaceId,
    engagementName: design.engagementName,
    ...(await frozenContent(knex, revisionId)),
  };
}

/** The document of a revision with the title block that its state gives it: what is drawn, printed and built from. */
export async function loadIssued(
  knex: Knex,
  revision: Revision,
): Promise<
  Omit<FrozenRevision, 'document' | 'revision' | 'workspaceId' | 'engagementName'> & {
    readonly document: Design;
  }
> {
  const { document, ...checks } = await readRevisionContent(knex, revision.id);
  return {
    document: asIssued(document, issueOf(revision)),
    findings: [...checks.findings],
    waivers: [...checks.waivers],
  };
}

/** A revision and its design, if the person may do this with it. Who reads no drafts may open what to build from alone. */
export async function openRevision(
  knex: Knex,
  personId: string,
  revisionId: string,
  action: Action,
): Promise<{ readonly revision: Revision; readonly design: DesignRow; readonly role: Role }> {
  const revision = await findRevision(knex, revisionId);
  const design = revision === null ? null : await findDesign(knex, revision.designId);
  if (revision === null || design === null) throw notFound('revision');
  const role = await authorise(knex, personId, action, design.workspaceId, 'revision');
  if (!permits(role, 'design.read') && !isToBuildFrom(revision.state)) {
    throw new Refusal('not-allowed', notToBuildFrom(revision, design));
  }
  return { revision, design, role };
}

function isToBuildFrom(state: Revision['state']): boolean {
  return state === 'approved' || state === 'built';
}

function notToBuildFrom({ label, state }: Revision, { issued }: DesignRow): string {
  const instead =
    issued === null ? 'wait until a revision is approved' : `open revision ${issued.label} instead`;
  const why = state === 'superseded' ? 'was superseded' : 'is not approved';
  return `Revision ${label} ${why}, so it is not to be built from; ${instead}.`;
}

async function frozenContent(knex: Knex, revisionId: string) {
  const { document, findings, waivers } = await readRevisionContent(knex, revisionId);
  return { document, findings: [...findings], waivers: [...waivers] };
}
