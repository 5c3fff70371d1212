import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { engagementListSchema, openDesignSchema, savedPatchesSchema } from '#contract/designs.ts';
import { waiverListSchema, waiverSchema } from '#contract/waivers.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { countBySeverity, runRules } from '#engine/rules/run-rules.ts';
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
let engagementId: string;
let reviewer: TestBrowser;
let architect: TestBrowser;
let now = new Date('2026-12-01T14:00:00Z');

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  reviewer = await signIn(application, workspace.people.reviewer);
  architect = await signIn(application, workspace.people.architect);
});
afterAll(() => application.close());
beforeEach(() => {
  now = new Date('2026-12-01T14:00:00Z');
});

const mismatch: MergePatch = { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } };
const document = applyPatch(pairDesign(), mismatch);
const findings = runRules(document);
const finding = findings.find(({ rule }) => rule === 'tunnel-vni-mismatch')!;
const all = countBySeverity(findings);
const butOne = { ...all, blocking: all.blocking - 1 };

const terms = (changes: object = {}) => ({
  findingKey: finding.key,
  fingerprint: finding.fingerprint,
  reason: ' The far end translates. ',
  expiresOn: '2027-03-31',
  ...changes,
});
const waive = (designId: string, changes: object = {}) =>
  reviewer.post(`/api/designs/${designId}/waivers`, terms(changes));
const list = async (designId: string) =>
  waiverListSchema.parse((await architect.get(`/api/designs/${designId}/waivers`).expect(200)).body).waivers;
const listedCounts = async (designId: string) => {
  const { body } = await architect.get(`/api/workspaces/${workspace.id}/engagements`).expect(200);
  const { engagements } = engagementListSchema.parse(body);
  return engagements.flatMap(({ designs }) => designs).find(({ id }) => id === designId)!.counts;
};
const openedCounts = async (designId: string) =>
  openDesignSchema.parse((await architect.get(`/api/designs/${designId}`).expect(200)).body).summary.counts;
const save = async (designId: string, baseSequence: number, patch: MergePatch) =>
  savedPatchesSchema.parse(
    (
      await architect
        .post(`/api/designs/${designId}/patches`, {
          baseSequence,
          edits: [{ editId: crypto.randomUUID(), patch }],
        })
        .expect(200)
    ).body,
  );

describe('waiving a finding', () => {
  test('records who, when, why and until when, and takes it out of the counts', async () => {
    const designId = await addDesign(application, engagementId, document);
    expect(await listedCounts(designId)).toEqual(all);
    const waiver = waiverSchema.parse((await waive(designId).expect(201)).body);
    expect(waiver).toMatchObject({
      findingKey: finding.key,
      fingerprint: finding.fingerprint,
      rule: 'tunnel-vni-mismatch',
      severity: 'blocking',
      sentence: finding.sentence,
      reason: 'The far end translates.',
      expiresOn: '2027-03-31',
      madeBy: workspace.people.reviewer.name,
      madeAt: now.toISOString(),
      withdrawnBy: null,
      withdrawnAt: null,
    });
    expect(await list(designId)).toEqual([waiver]);
    expect(await listedCounts(designId)).toEqual(butOne);
    expect(await openedCounts(designId)).toEqual(butOne);
  });

  test('again takes the place of the earlier waiver, which stays on record', async () => {
    const designId = await addDesign(application, engagementId, document);
    const first = waiverSchema.parse((await waive(designId).expect(201)).body);
    now = new Date('2026-12-02T09:00:00Z');
    const second = waiverSchema.parse((await waive(designId, { reason: 'Still so.' }).expect(201)).body);
    expect((await list(designId)).map(({ id, withdrawnAt }) => [id, withdrawnAt])).toEqual([
      [second.id, null],
      [first.id, now.toISOString()],
    ]);
    expect(await listedCounts(designId)).toEqual(butOne);
  });

  test.each([
    ['no reason', { reason: '  ' }, 400, 'reason'],
    ['a reason that is a book', { reason: 'x'.repeat(1001) }, 400, 'reason'],
    ['a day that is past', { expiresOn: '2026-11-30' }, 400, 'expiresOn'],
    ['a day more than a year off', { expiresOn: '2027-12-02' }, 400, 'expiresOn'],
    ['no day', { expiresOn: 'soon' }, 400, 'expiresOn'],
    ['a day that no calendar has', { expiresOn: '2027-02-29' }, 400, 'expiresOn'],
    [
      'a finding that the design does not have',
      { findingKey: 'tunnel-vni-mismatch tunnels/x' },
      409,
      'findingKey',
    ],
    ['a finding whose values have changed', { fingerprint: '0123456789abcdef' }, 409, 'fingerprint'],
    ['no fingerprint', { fingerprint: 'x' }, 400, 'fingerprint'],
  ])('is refused with %s', async (_what, changes, status, path) => {
    const designId = await addDesign(application, engagementId, document);
    const { body } = await waive(designId, changes).expect(status);
    expect(body).toMatchObject({
      code: status === 400 ? 'invalid-request' : 'conflict',
      details: [{ path, expected: expect.stringMatching(/^expected /) as string }],
    });
    expect(await list(designId)).toEqual([]);
  });

  test('is taken for today and for the same day of next year', async () => {
    const designId = await addDesign(application, engagementId, document);
    await waive(designId, { expiresOn: '2026-12-01' }).expect(201);
    await waive(designId, { expiresOn: '2027-12-01' }).expect(201);
  });

  test('is refused on a design that is archived', async () => {
    const designId = await addDesign(application, engagementId, document);
    await architect.patch(`/api/designs/${designId}`, { archived: true }).expect(200);
    await waive(designId).expect(409);
  });
});

describe('a waiver', () => {
  test('is withdrawn once, and its finding counts again', async () => {
    const designId = await addDesign(application, engagementId, document);
    const { id } = waiverSchema.parse((await waive(designId).expect(201)).body);
    const path = `/api/designs/${designId}/waivers/${id}`;
    const withdrawn = waiverSchema.parse((await reviewer.delete(path).expect(200)).body);
    expect(withdrawn).toMatchObject({
      withdrawnBy: workspace.people.reviewer.name,
      withdrawnAt: now.toISOString(),
    });
    expect(await listedCounts(designId)).toEqual(all);
    now = new Date('2026-12-05T14:00:00Z');
    expect((await reviewer.delete(path).expect(200)).body).toEqual(withdrawn);
    const missing = `/api/designs/${designId}/waivers/00000000-0000-4000-8000-000000000000`;
    expect((await reviewer.delete(missing).expect(404)).body).toMatchObject({ code: 'not-found' });
  });

  test('of another design cannot be reached through this one', async () => {
    const [here, there] = [
      await addDesign(application, engagementId, document),
      await addDesign(application, engagementId, document),
    ];
    const { id } = waiverSchema.parse((await waive(there).expect(201)).body);
    await reviewer.delete(`/api/designs/${here}/waivers/${id}`).expect(404);
    expect(await list(there)).toMatchObject([{ withdrawnAt: null }]);
  });

  test('ends after its last day: the lists count its finding again without anybody saving', async () => {
    const designId = await addDesign(application, engagementId, document);
    await waive(designId, { expiresOn: '2026-12-10' }).expect(201);
    now = new Date('2026-12-10T23:59:59Z');
    expect(await listedCounts(designId)).toEqual(butOne);
    now = new Date('2026-12-11T00:00:00Z');
    expect(await listedCounts(designId)).toEqual(all);
    expect(await openedCounts(designId)).toEqual(all);
  });

  test('outlives edits elsewhere and lapses with an edit of the values it was given for', async () => {
    const designId = await addDesign(application, engagementId, document);
    await waive(designId).expect(201);
    const renamed = await save(designId, 0, { sites: { s0: { name: 'Harbour office' } } });
    expect(renamed.counts).toEqual(butOne);
    const changed = await save(designId, 1, { tunnels: { 'tn-s0-s1-a': { b: { vni: 778 } } } });
    expect(changed.counts).toEqual(all);
    const back = await save(designId, 2, { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });
    expect(back.counts).toEqual(butOne);
  });

  test('takes the mark of its finding off the thumbnail, until it is withdrawn', async () => {
    const designId = await addDesign(application, engagementId, document);
    const picture = async () =>
      (
        (await architect.get(`/api/designs/${designId}/thumbnail?v=0&open=1`).expect(200)).body as Buffer
      ).toString();
    const before = await picture();
    const { id } = waiverSchema.parse((await waive(designId).expect(201)).body);
    expect(await picture()).not.toBe(before);
    await reviewer.delete(`/api/designs/${designId}/waivers/${id}`).expect(200);
    expect(await picture()).toBe(before);
  });
});

test('two waivers given at the same moment leave one standing', async () => {
  const designId = await addDesign(application, engagementId, document);
  const answers = await Promise.all([waive(designId), waive(designId, { reason: 'Also agreed' })]);
  expect(answers.map(({ status }) => status)).toEqual([201, 201]);
  expect((await list(designId)).filter(({ withdrawnAt }) => withdrawnAt === null)).toHaveLength(1);
});
