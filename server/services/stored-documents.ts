import type { Knex } from 'knex';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { listPatches } from '../repositories/design-patches.ts';
import { findSnapshot, insertSnapshot } from '../repositories/design-snapshots.ts';
import type { Context } from './context.ts';

/** A document as it was at a sequence number, and how far back its newest known snapshot lies. */
export interface StoredDocument {
  readonly sequence: number;
  readonly document: Design;
  readonly snapshotSequence: number;
}

/**
 * Documents that this process read or wrote last. The log only grows, so that an older entry is brought up to date by the
 * patches since, whichever process wrote them.
 */
export interface DocumentCache {
  find(designId: string): StoredDocument | undefined;
  /** Only for what is committed. */
  keep(designId: string, stored: StoredDocument): void;
}

const cachedDocuments = 50;
const patchesPerSnapshot = 100;

export function createDocumentCache(): DocumentCache {
  // A Map keeps the order of insertion: its first key is the one not used for longest.
  const byDesign = new Map<string, StoredDocument>();
  const putLast = (designId: string, stored: StoredDocument): void => {
    byDesign.delete(designId);
    byDesign.set(designId, stored);
    const oldest = byDesign.keys().next().value;
    if (byDesign.size > cachedDocuments && oldest !== undefined) byDesign.delete(oldest);
  };
  return {
    find(designId) {
      const stored = byDesign.get(designId);
      if (stored !== undefined) putLast(designId, stored);
      return stored;
    },
    keep(designId, stored) {
      const kept = byDesign.get(designId);
      if (kept === undefined || kept.sequence <= stored.sequence) putLast(designId, stored);
    },
  };
}

/** The document of a design at the sequence number that its row names. */
export async function loadDocument(
  { documents }: Context,
  knex: Knex,
  design: Pick<DesignRow, 'id' | 'sequence'>,
): Promise<StoredDocument> {
  const cached = documents.find(design.id);
  const usable = cached !== undefined && cached.sequence <= design.sequence ? cached : undefined;
  if (usable?.sequence === design.sequence) return usable;
  const start = usable ?? (await fromSnapshot(knex, design));
  const patches = await listPatches(knex, design.id, start.sequence, design.sequence);
  const document = patches.reduce<Design>((at, { patch }) => applyPatch(at, patch), start.document);
  return { sequence: design.sequence, document, snapshotSequence: start.snapshotSequence };
}

async function fromSnapshot(
  knex: Knex,
  { id, sequence }: Pick<DesignRow, 'id' | 'sequence'>,
): Promise<StoredDocument> {
  const snapshot = await findSnapshot(knex, id, sequence);
  return { ...snapshot, snapshotSequence: snapshot.sequence };
}

/** Remembers a committed document, and writes a snapshot in the background when many patches lie since the last. */
export function documentSaved(context: Context, designId: string, stored: StoredDocument): void {
  const isDue = stored.sequence - stored.snapshotSequence >= patchesPerSnapshot;
  context.documents.keep(designId, isDue ? { ...stored, snapshotSequence: stored.sequence } : stored);
  if (isDue) context.database.inBackground(() => insertSnapshot(context.database.knex, designId, stored));
}
