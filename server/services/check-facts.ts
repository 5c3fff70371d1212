import type { Knex } from 'knex';
import type { Design } from '#engine/model/design.ts';
import type { NumberingContext } from '#engine/numbering/numbering-context.ts';
import { noNumberingContext } from '#engine/numbering/numbering-context.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { Waived } from '#engine/rules/waived.ts';
import { applyWaivers } from '#engine/rules/waived.ts';
import type { DesignRow } from '../repositories/designs.ts';
import type { WaiverRow } from '../repositories/waivers.ts';
import { listStandingWaivers } from '../repositories/waivers.ts';
import type { Context } from './context.ts';
import { numberingContextOf } from './numbering.ts';

/** What the checks of a stored design take into account beyond its document. */
export interface CheckFacts {
  readonly numbering: NumberingContext;
  readonly waivers: readonly WaiverRow[];
  /** Such as 2027-03-31, by UTC. */
  readonly today: string;
}

/** Of a document that stands by itself: nobody waived anything, and nobody else holds numbers. */
export const nothingKnown: CheckFacts = { numbering: noNumberingContext, waivers: [], today: '' };

export async function checkFactsOf(
  context: Context,
  knex: Knex,
  design: Pick<DesignRow, 'id' | 'workspaceId' | 'identification'>,
): Promise<CheckFacts> {
  return {
    numbering: (await numberingContextOf(context, knex, design)).context,
    waivers: await listStandingWaivers(knex, design.id),
    today: dayOf(context.clock()),
  };
}

/** What the checks find in a document, the waived apart. */
export function findingsBy(document: Design, facts: CheckFacts): Waived<WaiverRow> {
  return applyWaivers(runRules(document, facts.numbering), facts.waivers, facts.today);
}

/** The day of a moment, by UTC, so that everybody's day ends at once. */
export function dayOf(moment: Date): string {
  return moment.toISOString().slice(0, 10);
}
