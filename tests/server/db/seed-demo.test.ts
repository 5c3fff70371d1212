import { afterAll, beforeAll, expect, test } from 'vitest';
import { engagementListSchema, openDesignSchema } from '#contract/designs.ts';
import { workspacePoolsSchema } from '#contract/numbering.ts';
import { profileListSchema } from '#contract/profiles.ts';
import { frozenRevisionSchema } from '#contract/revisions.ts';
import { sessionSchema } from '#contract/session.ts';
import { compareDesigns } from '#engine/diff/compare-designs.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { Design } from '#engine/model/design.ts';
import { demoSignIns, seedDemo } from '../../../server/db/seed-demo.ts';
import type { TestApplication } from '../../support/test-application.ts';
import { openBrowser, signIn, startTestApplication } from '../../support/test-application.ts';

let application: TestApplication;

beforeAll(async () => {
  application = await startTestApplication();
});
afterAll(() => application.close());

test('the demo is seeded once, also by two starters at the same moment', async () => {
  await Promise.all([seedDemo(application.url), seedDemo(application.url)]);
  await seedDemo(application.url);
  const { knex } = application.database;
  const counts = await Promise.all(
    ['workspaces', 'people', 'engagements', 'designs'].map(async (table) => (await knex(table)).length),
  );
  expect(counts).toEqual([1, 5, 1, 7]);
});

test('everybody of the demo can sign in, with the documented password or with one click', async () => {
  const visitor = await openBrowser(application);
  const { demo } = sessionSchema.parse((await visitor.get('/api/session')).body);
  expect(demo.map(({ role, email }) => ({ role, email }))).toEqual(
    demoSignIns.map(({ role, email }) => ({ role, email })),
  );
  for (const { role, email, password } of demoSignIns) {
    await signIn(application, { email }, password);
    const clicker = await openBrowser(application);
    const session = sessionSchema.parse((await clicker.post('/api/session/demo', { role }).expect(200)).body);
    expect(session.person?.email).toBe(email);
  }
});

test('the list’s counts and titles are those of the documents', async () => {
  const reviewer = await signIn(application, demoSignIns[2]!, demoSignIns[2]!.password);
  const session = sessionSchema.parse((await reviewer.get('/api/session')).body);
  const { workspaceId, workspaceName } = session.memberships[0]!;
  expect(workspaceName).toBe('Ternwick Net');
  const list = await reviewer.get(`/api/workspaces/${workspaceId}/engagements`).expect(200);
  const { engagements } = engagementListSchema.parse(list.body);
  expect(engagements.map(({ name }) => name)).toEqual(['Saltmarsh Ferries']);
  for (const summary of engagements[0]!.designs) {
    const opened = openDesignSchema.parse((await reviewer.get(`/api/designs/${summary.id}`)).body);
    const document = opened.document as Design;
    expect(summary.title).toBe(document.meta.title);
    expect(document.meta.example).toBe(true);
    const findings = runRules(document);
    for (const severity of ['blocking', 'degrading', 'advisory'] as const)
      expect(summary.counts[severity]).toBe(findings.filter((each) => each.severity === severity).length);
    await reviewer.get(`/api/designs/${summary.id}/thumbnail?v=0`).expect(200);
  }
});

test('the demo’s team has pools, and profiles that designs hold current copies of', async () => {
  const owner = await signIn(application, demoSignIns[0]!, demoSignIns[0]!.password);
  const session = sessionSchema.parse((await owner.get('/api/session')).body);
  const { workspaceId } = session.memberships[0]!;
  const listed = await owner.get(`/api/workspaces/${workspaceId}/profiles`).expect(200);
  const { profiles } = profileListSchema.parse(listed.body);
  expect(profiles.map(({ profile }) => profile.name)).toEqual([
    'Pair of small gateways',
    'Small branch gateway',
    'Virtual gateway, 1 vCPU',
  ]);
  expect(profiles[0]!.usedIn.length).toBeGreaterThan(0);
  for (const { usedIn } of profiles)
    for (const { current, devices } of usedIn) expect([current, devices > 0]).toEqual([true, true]);
  const pools = workspacePoolsSchema.parse(
    (await owner.get(`/api/workspaces/${workspaceId}/pools`).expect(200)).body,
  );
  expect(pools.pools.vnis).toMatchObject([{ from: 10_100, to: 10_999 }]);
});

test('one design of the demo is in review, and one has an approved revision and a later draft', async () => {
  const reviewer = await signIn(application, demoSignIns[2]!, demoSignIns[2]!.password);
  const session = sessionSchema.parse((await reviewer.get('/api/session')).body);
  const { workspaceId } = session.memberships[0]!;
  const list = await reviewer.get(`/api/workspaces/${workspaceId}/engagements`).expect(200);
  const designs = engagementListSchema.parse(list.body).engagements[0]!.designs;
  const inReview = designs.filter(({ state }) => state === 'in-review');
  const issued = designs.filter((design) => design.issued !== null);
  expect(inReview.map(({ title, revision }) => [title, revision])).toEqual([
    ['Ring terminals, ticketing', 'A'],
  ]);
  expect(issued.map(({ title, state, revision, issued: of }) => [title, state, revision, of?.label])).toEqual(
    [['Skerry standby controller', 'draft', 'B', 'A']],
  );
  const revision = frozenRevisionSchema.parse(
    (await reviewer.get(`/api/revisions/${issued[0]!.issued!.id}`).expect(200)).body,
  );
  expect(runRules(revision.document as Design).filter(({ severity }) => severity === 'blocking')).toEqual([]);
  const opened = openDesignSchema.parse((await reviewer.get(`/api/designs/${issued[0]!.id}`)).body);
  expect(
    compareDesigns(revision.document as Design, opened.document as Design).changes.length,
  ).toBeGreaterThan(3);
});
