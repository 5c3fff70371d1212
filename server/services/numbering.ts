import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import type { DesignContext, Pools, WorkspacePools } from '#contract/numbering.ts';
import { noPools } from '#contract/numbering.ts';
import type { DesignNumbers, NumberingContext } from '#engine/numbering/numbering-context.ts';
import { numbersOf } from '#engine/numbering/numbers-of.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { NeighbourRow } from '../repositories/design-numbers.ts';
import { findNumbers, listNeighbours } from '../repositories/design-numbers.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign, setNumbers } from '../repositories/designs.ts';
import type { WorkspacePoolsRow } from '../repositories/workspace-pools.ts';
import { findPools, lockPools, putPools } from '../repositories/workspace-pools.ts';
import type { Context } from './context.ts';
import { limits } from './limits.ts';
import { loadDocument } from './stored-documents.ts';

/** The last contexts that this process put together, by design: the same object as long as they say the same. */
export interface NumberingCache {
  find(designId: string): DesignContext | undefined;
  keep(designId: string, context: DesignContext): void;
}

const cachedContexts = 100;

export function createNumberingCache(): NumberingCache {
  // A Map keeps the order of insertion: its first key is the oldest.
  const byDesign = new Map<string, DesignContext>();
  return {
    find: (designId) => byDesign.get(designId),
    keep(designId, context) {
      byDesign.delete(designId);
      byDesign.set(designId, context);
      const oldest = byDesign.keys().next().value;
      if (byDesign.size > cachedContexts && oldest !== undefined) byDesign.delete(oldest);
    },
  };
}

/** A workspace's pools; empty ones where nobody has set any. */
export async function readPools(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
): Promise<WorkspacePools> {
  await authorise(knex, personId, 'design.read', workspaceId, 'workspace');
  return workspacePoolsOf(await findPools(knex, workspaceId));
}

/** Sets a workspace's pools, unless somebody else did since the person read them. */
export async function changePools(
  { database: { knex }, clock }: Context,
  personId: string,
  workspaceId: string,
  { pools, basedOn }: { readonly pools: Pools; readonly basedOn?: string | null },
): Promise<WorkspacePools> {
  return knex.transaction(async (trx) => {
    await authorise(trx, personId, 'pools.edit', workspaceId, 'workspace');
    await lockPools(trx, workspaceId);
    const before = workspacePoolsOf(await findPools(trx, workspaceId));
    if (basedOn !== undefined && basedOn !== before.changedAt) {
      throw new Refusal(
        'conflict',
        `${before.changedBy ?? 'Somebody'} has changed the pools since you read them; read them again, then make your change.`,
      );
    }
    const at = clock();
    await putPools(trx, workspaceId, pools, personId, at);
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'pools.changed',
      personId,
      object: { kind: 'workspace', id: workspaceId, name: 'numbers' },
    });
    return workspacePoolsOf(await findPools(trx, workspaceId));
  });
}

/** What numbering and checks may know beyond one design, for somebody who may read it. */
export async function readDesignContext(
  context: Context,
  personId: string,
  designId: string,
): Promise<DesignContext> {
  const { knex } = context.database;
  const design = await findDesign(knex, designId);
  if (design === null) throw notFound('design');
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  return numberingContextOf(context, knex, design);
}

/** Pools, and the numbers of the workspace's other designs. The same object again while nothing of it changed. */
export async function numberingContextOf(
  context: Context,
  knex: Knex,
  design: Pick<DesignRow, 'id' | 'workspaceId' | 'identification'>,
): Promise<DesignContext> {
  const all = await listNeighbours(knex, design.workspaceId, design);
  // By id, so that the order says nothing about who saved last.
  const neighbours = all.slice(0, limits.neighbours).sort((a, b) => (a.id < b.id ? -1 : 1));
  const pools = await findPools(knex, design.workspaceId);
  const version = versionOf(neighbours, all.length, pools);
  const known = context.numbering.find(design.id);
  if (known?.version === version) return known;
  const numbers = await numbersOfNeighbours(context, knex, neighbours);
  const told = upToLimit(neighbours, numbers);
  const fresh: DesignContext = {
    version,
    context: {
      ...contextOfPools(pools?.pools ?? noPools),
      otherDesigns: told.map(({ id, title }) => ({ ...numbers.get(id), name: title })),
    } as DesignContext['context'],
    neighbours: told.map(({ id, title, engagementName }) => ({ id, title, engagementName })),
    leftOut: all.length - told.length,
  };
  context.numbering.keep(design.id, fresh);
  return fresh;
}

function versionOf(
  neighbours: readonly NeighbourRow[],
  count: number,
  pools: WorkspacePoolsRow | null,
): string {
  const said = [
    count,
    pools?.pools,
    ...neighbours.map(({ id, title, engagementName, digest }) => [id, title, engagementName, digest]),
  ];
  return createHash('sha256').update(JSON.stringify(said)).digest('base64url');
}

/** Their numbers; worked out and kept for those that were last saved before numbers were kept. */
async function numbersOfNeighbours(
  context: Context,
  knex: Knex,
  neighbours: readonly NeighbourRow[],
): Promise<ReadonlyMap<string, DesignNumbers>> {
  const numbers = new Map(
    await findNumbers(
      knex,
      neighbours.map(({ id }) => id),
    ),
  );
  for (const neighbour of neighbours) {
    if (numbers.has(neighbour.id)) continue;
    const { document } = await loadDocument(context, knex, neighbour);
    numbers.set(neighbour.id, numbersOf(document));
    // Not in the caller's transaction: it may hold locks that a save of the neighbour waits for.
    context.database.inBackground(() => setNumbers(context.database.knex, neighbour.id, numbersOf(document)));
  }
  return numbers;
}

function upToLimit(
  neighbours: readonly NeighbourRow[],
  numbers: ReadonlyMap<string, DesignNumbers>,
): readonly NeighbourRow[] {
  let left: number = limits.neighbourNumbers;
  return neighbours.filter(({ id }) => {
    left -= Object.values(numbers.get(id) ?? {}).reduce((sum: number, list) => sum + list.length, 0);
    return left >= 0;
  });
}

/** Pools without the words of what they are for. An empty pool says nothing, so that the usual ranges stand in for it. */
function contextOfPools({ vnis, vlans, loopbacks, reserved, networksInUse }: Pools): NumberingContext {
  const range = ({ from, to }: { readonly from: number; readonly to: number }) => ({ from, to });
  return {
    pools: {
      ...(vnis.length === 0 ? {} : { vnis: vnis.map(range) }),
      ...(vlans.length === 0 ? {} : { vlans: vlans.map(range) }),
      ...(loopbacks.length === 0 ? {} : { loopbacks: loopbacks.map(({ prefix }) => prefix) }),
    },
    reserved: {
      vnis: reserved.vnis.map(range),
      vlans: reserved.vlans.map(range),
      networks: reserved.networks.map(({ prefix }) => prefix),
    },
    networksInUse: networksInUse.map(({ prefix, for: of }) => ({
      network: prefix,
      ...(of === undefined ? {} : { of }),
    })),
  };
}

function workspacePoolsOf(row: WorkspacePoolsRow | null): WorkspacePools {
  return row === null
    ? { pools: noPools, changedAt: null, changedBy: null }
    : { pools: row.pools, changedAt: row.changedAt.toISOString(), changedBy: row.changedBy };
}
