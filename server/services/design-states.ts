import { Refusal } from '../errors.ts';
import type { DesignRow } from '../repositories/designs.ts';

/** Refuses changes to what is put away. */
export function refuseArchived(design: Pick<DesignRow, 'archivedAt' | 'engagementArchivedAt'>): void {
  if (design.archivedAt !== null) {
    throw new Refusal('conflict', 'The design is archived; restore it before you change it.');
  }
  if (design.engagementArchivedAt !== null) {
    throw new Refusal('conflict', 'The engagement is archived; restore it before you change its designs.');
  }
}

const waysOut: { readonly [state in Exclude<DesignRow['state'], 'draft'>]: string } = {
  'in-review':
    'The design is in review and stays as the reviewers see it: an architect can take it back, or wait for the decision.',
  approved:
    'The design is approved and its revision is frozen; start the next revision before you change it.',
  built: 'The design is built and its revision is frozen; start the next revision before you change it.',
  superseded: 'The design is superseded; start the next revision before you change it.',
};

/** Refuses changes to the drawing of what is in review or was approved. */
export function refuseUnlessDraft({ state }: Pick<DesignRow, 'state'>): void {
  if (state === 'draft') return;
  throw new Refusal('conflict', waysOut[state], {
    details: [{ path: 'state', value: state, expected: 'expected draft' }],
  });
}
