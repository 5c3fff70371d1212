import { promisify } from 'node:util';
import { gunzip, gzip } from 'node:zlib';
import type { Knex } from 'knex';
import type { Counts } from '#contract/designs.ts';
import type { Revision } from '#contract/revisions.ts';
import type { Waiver } from '#contract/waivers.ts';
import type { Design } from '#engine/model/design.ts';
import type { Finding } from '#engine/rules/finding.ts';

const compress = promisify(gzip);
const decompress = promisify(gunzip);

/** What a revision holds beyond what lists tell of it. */
export interface RevisionContent {
  readonly document: Design;
  readonly findings: readonly Finding[];
  readonly waivers: readonly Waiver[];
}

/** What the checks said of a revision; frozen when it is decided. */
export interface FrozenChecks extends Omit<RevisionContent, 'document'> {
  readonly engineVersion: string;
  readonly counts: Counts;
}

export interface Actor {
  readonly id: string;
  readonly name: string;
}

export interface NewRevision {
  readonly designId: string;
  readonly number: number;
  readonly label: string;
  readonly sequence: number;
  readonly document: Design;
  readonly contentHash: string;
  readonly checks: FrozenChecks;
  readonly message: string;
  readonly askedBy: Actor;
  readonly askedAt: Date;
}

interface Flat {
  readonly id: string;
  readonly designId: string;
  readonly number: number;
  readonly label: string;
  readonly state: Revision['state'];
  readonly sequence: number;
  readonly contentHash: string;
  readonly engineVersion: string;
  readonly blocking: number;
  readonly degrading: number;
  readonly advisory: number;
  readonly waived: number;
  readonly message: string;
  readonly askedById: string | null;
  readonly askedByName: string;
  readonly askedAt: Date;
  readonly decidedById: string | null;
  readonly decidedByName: string | null;
  readonly decidedAt: Date | null;
  readonly note: string;
  readonly builtById: string | null;
  readonly builtByName: string | null;
  readonly builtOn: string | null;
  readonly supersededById: string | null;
  readonly supersededByName: string | null;
  readonly supersededAt: Date | null;
  readonly supersededNote: string;
}

function selectRevisions(knex: Knex): Knex.QueryBuilder {
  return knex('revisions').select({
    id: 'id',
    designId: 'design_id',
    number: 'number',
    label: 'label',
    state: 'state',
    sequence: 'sequence',
    contentHash: 'content_hash',
    engineVersion: 'engine_version',
    blocking: 'blocking',
    degrading: 'degrading',
    advisory: 'advisory',
    waived: 'waived',
    message: 'message',
    askedById: 'asked_by',
    askedByName: 'asked_by_name',
    askedAt: 'asked_at',
    decidedById: 'decided_by',
    decidedByName: 'decided_by_name',
    decidedAt: 'decided_at',
    note: 'note',
    builtById: 'built_by',
    builtByName: 'built_by_name',
    builtOn: knex.raw("to_char(built_on, 'YYYY-MM-DD')"),
    supersededById: 'superseded_by',
    supersededByName: 'superseded_by_name',
    supersededAt: 'superseded_at',
    supersededNote: 'superseded_note',
  });
}

function fromFlat(row: Flat): Revision {
  const actor = (id: string | null, name: string | null) => (name === null ? null : { id, name });
  return {
    id: row.id,
    designId: row.designId,
    number: row.number,
    label: row.label,
    state: row.state,
    sequence: row.sequence,
    contentHash: row.contentHash,
    engineVersion: row.engineVersion,
    counts: { blocking: row.blocking, degrading: row.degrading, advisory: row.advisory },
    waived: row.waived,
    message: row.message,
    askedBy: { id: row.askedById, name: row.askedByName },
    askedAt: row.askedAt.toISOString(),
    decidedBy: actor(row.decidedById, row.decidedByName),
    decidedAt: row.decidedAt?.toISOString() ?? null,
    note: row.note,
    builtBy: actor(row.builtById, row.builtByName),
    builtOn: row.builtOn,
    supersededBy: actor(row.supersededById, row.supersededByName),
    supersededAt: row.supersededAt?.toISOString() ?? null,
    supersededNote: row.supersededNote,
  };
}

/** A design's revisions, the newest first. */
export async function listRevisions(knex: Knex, designId: string): Promise<readonly Revision[]> {
  const rows = (await selectRevisions(knex)
    .where({ design_id: designId })
    .orderBy('number', 'desc')) as Flat[];
  return rows.map(fromFlat);
}

export async function findRevision(knex: Knex, id: string): Promise<Revision | null> {
  const row = (await selectRevisions(knex).where({ id }).first()) as Flat | undefined;
  return row === undefined ? null : fromFlat(row);
}

/** The document, findings and waivers of a revision that exists. */
export async function readRevisionContent(knex: Knex, id: string): Promise<RevisionContent> {
  const row = await knex('revisions')
    .where({ id })
    .first<{ document: Buffer; findings: Buffer; waivers: readonly Waiver[] } | undefined>(
      'document',
      'findings',
      'waivers',
    );
  if (row === undefined) throw new Error(`there is no revision ${id}`);
  // What is stored was validated when it was written.
  return {
    document: JSON.parse((await decompress(row.document)).toString('utf8')) as Design,
    findings: JSON.parse((await decompress(row.findings)).toString('utf8')) as Finding[],
    waivers: row.waivers,
  };
}

export async function insertRevision(trx: Knex, revision: NewRevision): Promise<string> {
  const rows = await trx('revisions')
    .insert({
      design_id: revision.designId,
      number: revision.number,
      label: revision.label,
      state: 'in-review' satisfies Revision['state'],
      sequence: revision.sequence,
      document: await compress(JSON.stringify(revision.document)),
      content_hash: revision.contentHash,
      ...(await checkColumns(revision.checks)),
      message: revision.message,
      asked_by: revision.askedBy.id,
      asked_by_name: revision.askedBy.name,
      asked_at: revision.askedAt,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

/** Notes what became of a review; with an approval also what the checks said at that moment. */
export async function settleRevision(
  trx: Knex,
  id: string,
  settled: {
    readonly state: 'withdrawn' | 'sent-back' | 'approved';
    readonly by: Actor;
    readonly at: Date;
    readonly note: string;
    readonly checks?: FrozenChecks;
  },
): Promise<void> {
  await trx('revisions')
    .where({ id })
    .update({
      state: settled.state,
      decided_by: settled.by.id,
      decided_by_name: settled.by.name,
      decided_at: settled.at,
      note: settled.note,
      ...(settled.checks === undefined ? {} : await checkColumns(settled.checks)),
    });
}

/** Ends the time of the revision that a design was built from until now; answers which one that was, if any. */
export async function supersedeIssued(
  trx: Knex,
  designId: string,
  superseded: { readonly by: Actor; readonly at: Date; readonly note: string },
): Promise<{ readonly id: string; readonly label: string } | null> {
  const rows = await trx('revisions')
    .where({ design_id: designId })
    .whereIn('state', ['approved', 'built'] satisfies Revision['state'][])
    .update({
      state: 'superseded' satisfies Revision['state'],
      superseded_by: superseded.by.id,
      superseded_by_name: superseded.by.name,
      superseded_at: superseded.at,
      superseded_note: superseded.note,
    })
    .returning<{ id: string; label: string }[]>(['id', 'label']);
  return rows[0] ?? null;
}

export async function setBuilt(trx: Knex, id: string, by: Actor, builtOn: string): Promise<void> {
  await trx('revisions')
    .where({ id })
    .update({
      state: 'built' satisfies Revision['state'],
      built_by: by.id,
      built_by_name: by.name,
      built_on: builtOn,
    });
}

async function checkColumns({ engineVersion, counts, findings, waivers }: FrozenChecks) {
  return {
    engine_version: engineVersion,
    findings: await compress(JSON.stringify(findings)),
    waivers: JSON.stringify(waivers),
    ...counts,
    waived: waivers.length,
  };
}
