import { promisify } from 'node:util';
import { gunzip, gzip } from 'node:zlib';
import type { Knex } from 'knex';
import type { Design } from '#engine/model/design.ts';

export interface Snapshot {
  readonly sequence: number;
  readonly document: Design;
}

const compress = promisify(gzip);
const decompress = promisify(gunzip);

/** The newest whole document at or before a sequence number. Every design has one at 0. */
export async function findSnapshot(knex: Knex, designId: string, upTo: number): Promise<Snapshot> {
  const row = await knex('design_snapshots')
    .where({ design_id: designId })
    .where('sequence', '<=', upTo)
    .orderBy('sequence', 'desc')
    .first<{ sequence: number; document: Buffer } | undefined>('sequence', 'document');
  if (row === undefined) throw new Error(`design ${designId} has no snapshot at or before ${upTo}`);
  // What is stored was validated when it was written.
  const document = JSON.parse((await decompress(row.document)).toString('utf8')) as Design;
  return { sequence: row.sequence, document };
}

/** Keeps a whole document; another process may have kept the same one already. */
export async function insertSnapshot(knex: Knex, designId: string, snapshot: Snapshot): Promise<void> {
  const document = await compress(JSON.stringify(snapshot.document));
  await knex('design_snapshots')
    .insert({ design_id: designId, sequence: snapshot.sequence, document })
    .onConflict(['design_id', 'sequence'])
    .ignore();
}
