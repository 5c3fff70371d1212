import type { Knex } from 'knex';

export interface WorkspaceRow {
  readonly id: string;
  readonly name: string;
  readonly requiresSecondStep: boolean;
}

export async function findWorkspace(knex: Knex, id: string): Promise<WorkspaceRow | null> {
  const row = await knex('workspaces')
    .where({ id })
    .first<WorkspaceRow | undefined>({ id: 'id', name: 'name', requiresSecondStep: 'requires_second_step' });
  return row ?? null;
}

/** Holds other changes of the workspace and its people up until the transaction ends; what else goes on there goes on. */
export async function lockWorkspace(trx: Knex.Transaction, id: string): Promise<boolean> {
  return (await trx('workspaces').where({ id }).forNoKeyUpdate().first('id')) !== undefined;
}

export async function updateWorkspace(
  trx: Knex.Transaction,
  id: string,
  change: { readonly name?: string; readonly requiresSecondStep?: boolean },
): Promise<void> {
  const { name, requiresSecondStep } = change;
  await trx('workspaces').where({ id }).update({ name, requires_second_step: requiresSecondStep, id });
}

export async function deleteWorkspaces(trx: Knex.Transaction, ids: readonly string[]): Promise<void> {
  await trx('workspaces')
    .whereIn('id', [...ids])
    .delete();
}
