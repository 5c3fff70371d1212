import type { Knex } from 'knex';
import type { ActivityAction, ActivityObjectKind } from '#contract/activity.ts';

export interface NewActivity {
  readonly workspaceId: string;
  readonly at: Date;
  readonly action: ActivityAction;
  /** Null for what a guest or the server did. */
  readonly personId: string | null;
  readonly object: { readonly kind: ActivityObjectKind; readonly id: string | null; readonly name: string };
  /** The design that it concerns, where there is one. */
  readonly designId?: string;
  /** Values that belong to the sentence, such as a role before and after; never secrets. */
  readonly details?: Readonly<Record<string, string>>;
}

/** Notes what somebody did, in the transaction in which it was done. */
export async function recordActivity(knex: Knex, activity: NewActivity): Promise<void> {
  const { workspaceId, at, action, personId, object, designId, details } = activity;
  await knex('activity').insert({
    workspace_id: workspaceId,
    at,
    action,
    person_id: personId,
    person_name: personId === null ? null : knex('people').where({ id: personId }).select('name'),
    object_kind: object.kind,
    object_id: object.id,
    object_name: object.name,
    design_id: designId ?? null,
    details: JSON.stringify(details ?? {}),
  });
}
