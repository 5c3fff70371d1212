import { afterAll, beforeAll, expect, test } from 'vitest';
import { noPools } from '#contract/numbering.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let owner: TestBrowser;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
});
afterAll(() => application.close());

/** What was recorded since the last call: action, who, what, details. */
const recorded = (() => {
  let last = '0';
  return async () => {
    const rows = await application.database.knex('activity').where('id', '>', last).orderBy('id').select<
      {
        id: string;
        action: string;
        person_name: string | null;
        object_name: string;
        details: Record<string, string>;
      }[]
    >(['id', 'action', 'person_name', 'object_name', 'details']);
    last = rows.at(-1)?.id ?? last;
    return rows.map((row) => [row.action, row.person_name, row.object_name, row.details]);
  };
})();

test('what becomes of engagements and designs is recorded, and what changes nothing is not', async () => {
  const { id } = (
    await owner.post(`/api/workspaces/${workspace.id}/engagements`, { name: 'Terminals stretch' }).expect(201)
  ).body as { id: string };
  const design = (
    await owner
      .post(`/api/engagements/${id}/designs`, { title: 'Two sites', from: { kind: 'empty' } })
      .expect(201)
  ).body as { id: string };
  expect(await recorded()).toEqual([
    ['engagement.created', 'Some Owner', 'Terminals stretch', {}],
    ['design.created', 'Some Owner', 'Two sites', { engagement: 'Terminals stretch' }],
  ]);

  await owner.patch(`/api/engagements/${id}`, { name: 'Terminals', archived: true }).expect(200);
  await owner.patch(`/api/engagements/${id}`, { archived: true }).expect(200);
  await owner.patch(`/api/engagements/${id}`, { archived: false }).expect(200);
  expect(await recorded()).toEqual([
    ['engagement.changed', 'Some Owner', 'Terminals', { nameBefore: 'Terminals stretch', archived: 'yes' }],
    ['engagement.changed', 'Some Owner', 'Terminals', { archived: 'no' }],
  ]);

  for (const change of [{ archived: true }, { archived: true }, { deleted: true }, { deleted: false }])
    await owner.patch(`/api/designs/${design.id}`, change).expect(200);
  expect((await recorded()).map(([action]) => action)).toEqual([
    'design.archived',
    'design.deleted',
    'design.restored',
  ]);
});

test('waivers, pools and equipment are recorded', async () => {
  const document = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });
  const { key, fingerprint, sentence } = runRules(document).find(
    ({ rule }) => rule === 'tunnel-vni-mismatch',
  )!;
  const designId = await addDesign(application, await addEngagement(application, workspace.id), document);
  const tomorrow = new Date(Date.now() + 24 * 60 * 60 * 1000).toISOString().slice(0, 10);
  const terms = { findingKey: key, fingerprint, reason: 'The far end translates.', expiresOn: tomorrow };
  const waiver = (await owner.post(`/api/designs/${designId}/waivers`, terms).expect(201)).body as {
    id: string;
  };
  await owner.delete(`/api/designs/${designId}/waivers/${waiver.id}`).expect(200);
  await owner.delete(`/api/designs/${designId}/waivers/${waiver.id}`).expect(200);
  const [waived, withdrawn, ...others] = await recorded();
  expect(waived).toMatchObject(['finding.waived', 'Some Owner', sentence, { expiresOn: tomorrow }]);
  expect(withdrawn).toMatchObject(['waiver.withdrawn', 'Some Owner', sentence, {}]);
  expect(others).toEqual([]);

  await owner.put(`/api/workspaces/${workspace.id}/pools`, { pools: noPools }).expect(200);
  const profile = { name: 'Branch gateway' };
  const made = (await owner.post(`/api/workspaces/${workspace.id}/profiles`, { profile }).expect(201))
    .body as { id: string };
  await owner.patch(`/api/profiles/${made.id}`, { profile }).expect(200);
  await owner.patch(`/api/profiles/${made.id}`, { archived: true }).expect(200);
  expect(await recorded()).toEqual([
    ['pools.changed', 'Some Owner', 'numbers', {}],
    ['profile.changed', 'Some Owner', profile.name, { made: 'yes' }],
    ['profile.changed', 'Some Owner', profile.name, { archived: 'yes' }],
  ]);
});

test('what the database refuses is not recorded', async () => {
  await recorded();
  await owner.patch(`/api/designs/${workspace.id}`, { archived: true }).expect(404);
  expect(await recorded()).toEqual([]);
});
