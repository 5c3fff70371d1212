import type { Knex } from 'knex';
import type { Sitting, SittingList } from '#contract/revisions.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal } from '../errors.ts';
import { listPatchTimes, listPatches } from '../repositories/design-patches.ts';
import { findSnapshot } from '../repositories/design-snapshots.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findCreation } from '../repositories/designs.ts';
import type { Context } from './context.ts';
import { requireDesign } from './designs.ts';
import { limits } from './limits.ts';

/** A design as it was after one of its patches; 0 is how it began. */
export async function readPastDocument(
  context: Context,
  personId: string,
  designId: string,
  sequence: number,
): Promise<{ readonly sequence: number; readonly document: Design }> {
  const { knex } = context.database;
  const design = await requireDesign(context, designId);
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  return { sequence, document: await documentAt(knex, design, sequence) };
}

/** The document of a design after one of its patches. */
export async function documentAt(
  knex: Knex,
  design: Pick<DesignRow, 'id' | 'sequence'>,
  sequence: number,
): Promise<Design> {
  if (sequence > design.sequence) {
    throw new Refusal(
      'conflict',
      `The design has ${design.sequence} patches, so there is none ${sequence}.`,
      {
        details: [
          { path: 'sequence', value: String(sequence), expected: `expected 0 to ${design.sequence}` },
        ],
      },
    );
  }
  const snapshot = await findSnapshot(knex, design.id, sequence);
  const patches = await listPatches(knex, design.id, snapshot.sequence, sequence);
  return patches.reduce<Design>((document, { patch }) => applyPatch(document, patch), snapshot.document);
}

/** Who worked on a design when, the newest first, and who began it. */
export async function readSittings(
  context: Context,
  personId: string,
  designId: string,
): Promise<SittingList> {
  const { knex } = context.database;
  const design = await requireDesign(context, designId);
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  const creation = await findCreation(knex, designId);
  const patches = await listPatchTimes(knex, designId);
  return {
    sittings: sittingsOf(patches).reverse().slice(0, limits.sittings),
    createdBy: creation?.name ?? null,
    createdAt: (creation?.at ?? design.changedAt).toISOString(),
  };
}

const longestPauseMs = 30 * 60 * 1000;

/** Patches one after the other by one person, none more than half an hour after the last. */
function sittingsOf(patches: Awaited<ReturnType<typeof listPatchTimes>>): Sitting[] {
  const sittings: Sitting[] = [];
  for (const { sequence, by, at, repair, issue } of patches) {
    // What a change of state writes into the title block is told by the revision.
    if (issue) continue;
    const last = sittings.at(-1);
    const goesOn =
      last !== undefined &&
      // A repair belongs to the edit that it follows on.
      (repair || (last.by === by && at.getTime() - Date.parse(last.until) <= longestPauseMs));
    if (goesOn) sittings[sittings.length - 1] = { ...last, until: at.toISOString(), lastSequence: sequence };
    else
      sittings.push({
        by,
        from: at.toISOString(),
        until: at.toISOString(),
        firstSequence: sequence,
        lastSequence: sequence,
      });
  }
  return sittings;
}
