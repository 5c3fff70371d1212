import type { Role } from '#contract/session.ts';
import { hashPassword } from '../server/auth/passwords.ts';
import type { Database } from '../server/db/open-database.ts';
import { insertDemoPerson } from '../server/repositories/demo-people.ts';
import { insertSnapshot } from '../server/repositories/design-snapshots.ts';
import { insertDesign } from '../server/repositories/designs.ts';
import { insertEngagement } from '../server/repositories/engagements.ts';
import { insertProfile } from '../server/repositories/equipment-profiles.ts';
import { insertMembership, insertWorkspace } from '../server/repositories/memberships.ts';
import { insertPerson } from '../server/repositories/people.ts';
import { putPools } from '../server/repositories/workspace-pools.ts';
import { summarise } from '../server/services/design-summary.ts';
import { demoDesign, largerDemoDesigns, smallerDemoDesigns } from './demo-designs/demo-design.ts';
import { demoPeople } from './demo-people.ts';
import { demoPools } from './demo-pools.ts';
import { demoProfiles, withMeasuredGateways } from './demo-profiles.ts';
import type { Reviewed } from './demo-revisions.ts';
import { insertReviewedDesign } from './demo-revisions.ts';

const oneMinuteMs = 60_000;

/** Those of the demo that have been through a review, by title. */
const reviewedDesigns: { readonly [title: string]: Reviewed } = {
  'Skerry standby controller': 'approved-and-changed',
  'Ring terminals, ticketing': 'in-review',
};

/** Fills a database with the demo, all or nothing, once. */
export async function seedSaltmarsh({ knex }: Pick<Database, 'knex'>): Promise<void> {
  await knex.transaction(async (trx) => {
    // Two starters may seed at once: the second waits, and finds the demo there.
    await trx.raw('lock table demo_people in exclusive mode');
    if ((await trx('demo_people').first('person_id')) !== undefined) return;

    const workspaceId = await insertWorkspace(trx, 'Ternwick Net');
    const ids = new Map<string, string>();
    for (const { role, name, email, password } of demoPeople) {
      const id = await insertPerson(trx, { name, email, passwordHash: await hashPassword(password) });
      await insertMembership(trx, workspaceId, id, role);
      await insertDemoPerson(trx, id, workspaceId);
      ids.set(role, id);
    }
    const actorOf = (role: Role) => ({
      id: ids.get(role)!,
      name: demoPeople.find((person) => person.role === role)!.name,
    });
    const now = Date.now();
    const engagement = await insertEngagement(
      trx,
      { workspaceId, name: 'Saltmarsh Ferries', summary: 'Head office, Gullhaven, Orrin Point, Skerry' },
      new Date(now),
    );
    await putPools(trx, workspaceId, demoPools, ids.get('owner')!, new Date(now));
    const originals = {
      branch: await insertProfile(trx, workspaceId, demoProfiles.branch, ids.get('owner')!, new Date(now)),
      pair: await insertProfile(trx, workspaceId, demoProfiles.pair, ids.get('owner')!, new Date(now)),
    };
    await insertProfile(trx, workspaceId, demoProfiles.virtual, ids.get('owner')!, new Date(now));
    const designs = [
      demoDesign('fault-free'),
      demoDesign('planted-faults'),
      ...smallerDemoDesigns().map((document) => withMeasuredGateways(document, originals)),
      ...largerDemoDesigns(),
    ];
    for (const [index, document] of designs.entries()) {
      // The list shows the last changed first.
      const at = new Date(now - index * oneMinuteMs);
      const changedBy = ids.get('architect')!;
      const reviewed = reviewedDesigns[document.meta.title];
      if (reviewed !== undefined) {
        await insertReviewedDesign(trx, document, reviewed, {
          engagementId: engagement.id,
          architect: actorOf('architect'),
          reviewer: actorOf('reviewer'),
          at,
        });
        continue;
      }
      const id = await insertDesign(trx, engagement.id, summarise(document), changedBy, at);
      await insertSnapshot(trx, id, { sequence: 0, document });
    }
  });
}
