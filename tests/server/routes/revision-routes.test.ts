import { createHash } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { engagementListSchema, openDesignSchema, savedPatchesSchema } from '#contract/designs.ts';
import type { FrozenRevision, Revision } from '#contract/revisions.ts';
import {
  frozenRevisionSchema,
  pastDocumentSchema,
  restoredSchema,
  revisionListSchema,
  revisionSchema,
  sittingListSchema,
} from '#contract/revisions.ts';
import type { Role } from '#contract/session.ts';
import { roles } from '#contract/session.ts';
import { canonicalJson } from '#engine/model/canonical-json.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addPerson,
  addWorkspace,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';
import { insertMembership } from '../../../server/repositories/memberships.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let engagementId: string;
let secondReviewer: TestBrowser;
const members = {} as { [role in Role]: TestBrowser };
let now = new Date('2026-12-01T14:00:00Z');

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  for (const role of roles) members[role] = await signIn(application, workspace.people[role]);
  const another = await addPerson(application.database, 'Another Reviewer');
  await insertMembership(application.database.knex, workspace.id, another.id, 'reviewer');
  secondReviewer = await signIn(application, another);
});
afterAll(() => application.close());
beforeEach(() => {
  now = new Date('2026-12-01T14:00:00Z');
});

const sound = pairDesign();
const mismatch: MergePatch = { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } };
const broken = applyPatch(sound, mismatch);
const blocking = runRules(broken).filter(({ severity }) => severity === 'blocking');
const describeNote: MergePatch = { meta: { supplementaryTitle: 'With the berths' } };

const open = async (designId: string, browser = members.owner) =>
  openDesignSchema.parse((await browser.get(`/api/designs/${designId}`).expect(200)).body);
const save = async (browser: TestBrowser, designId: string, patch: MergePatch) => {
  const { sequence } = await open(designId);
  return browser.post(`/api/designs/${designId}/patches`, {
    baseSequence: sequence,
    edits: [{ editId: crypto.randomUUID(), patch }],
  });
};
const askWith = async (browser: TestBrowser, designId: string, message = 'Please look at the berths') => {
  const { sequence } = await open(designId);
  return browser.post(`/api/designs/${designId}/revisions`, { message, sequence });
};
const asked = async (designId: string, browser = members.architect): Promise<Revision> => {
  const answer = await askWith(browser, designId);
  expect(answer.status).toBe(201);
  return revisionSchema.parse(answer.body);
};
const decide = (browser: TestBrowser, id: string, body: object) =>
  browser.post(`/api/revisions/${id}/decision`, body);
const approve = (browser: TestBrowser, id: string) =>
  decide(browser, id, { decision: 'approve', note: 'Fine' });
const withdraw = (browser: TestBrowser, id: string) => browser.post(`/api/revisions/${id}/withdrawal`);
const revisionsOf = async (designId: string, browser = members.owner) =>
  revisionListSchema.parse((await browser.get(`/api/designs/${designId}/revisions`).expect(200)).body)
    .revisions;
const frozen = async (id: string, browser = members.owner): Promise<FrozenRevision> =>
  frozenRevisionSchema.parse((await browser.get(`/api/revisions/${id}`).expect(200)).body);
/** A design that the architect drew in, so that everybody else may approve it. */
const drawn = async (document = sound): Promise<string> => {
  const designId = await addDesign(application, engagementId, document);
  expect((await save(members.architect, designId, describeNote)).status).toBe(200);
  return designId;
};
const approved = async (): Promise<{ designId: string; revision: Revision }> => {
  const designId = await drawn();
  const { id } = await asked(designId);
  return { designId, revision: revisionSchema.parse((await approve(members.reviewer, id).expect(200)).body) };
};
const waiveAll = async (designId: string) => {
  for (const { key, fingerprint } of blocking)
    await members.reviewer
      .post(`/api/designs/${designId}/waivers`, {
        findingKey: key,
        fingerprint,
        reason: 'The far end translates',
        expiresOn: '2027-03-31',
      })
      .expect(201);
};
const activityOf = (designId: string) =>
  application.database
    .knex('activity')
    .where({ design_id: designId })
    .orderBy('id')
    .select<{ action: string; person_name: string; details: object }[]>('action', 'person_name', 'details');

describe('asking for a review', () => {
  test('freezes the draft under the next label, with its hash, findings and waivers', async () => {
    const designId = await drawn(broken);
    await waiveAll(designId);
    const revision = await asked(designId);
    expect(revision).toMatchObject({
      number: 1,
      label: 'A',
      state: 'in-review',
      message: 'Please look at the berths',
      askedBy: { name: 'Some Architect' },
      counts: { blocking: 0 },
      waived: blocking.length,
      engineVersion: '0.1.0',
    });
    const { document, findings, waivers } = await frozen(revision.id);
    expect(createHash('sha256').update(canonicalJson(document)).digest('hex')).toBe(revision.contentHash);
    expect(document).toMatchObject({ meta: { revision: 'A', status: 'In review' } });
    expect(findings.filter(({ severity }) => severity === 'blocking').map(({ key }) => key)).toEqual(
      blocking.map(({ key }) => key),
    );
    expect(waivers.map(({ reason, expiresOn }) => [reason, expiresOn])).toEqual(
      blocking.map(() => ['The far end translates', '2027-03-31']),
    );
    const opened = await open(designId, members.architect);
    expect(opened.summary).toMatchObject({ state: 'in-review', revision: 'A', issued: null });
    expect(opened.actions).not.toContain('design.edit');
    expect(opened.actions).toContain('review.ask');
  });

  test('locks the drawing: edits, a new title and restoring are refused with the state and the way out', async () => {
    const designId = await drawn();
    await asked(designId);
    for (const answer of [
      await save(members.architect, designId, { meta: { title: 'Other' } }),
      await members.owner.patch(`/api/designs/${designId}`, { title: 'Other' }),
      await members.owner.post(`/api/designs/${designId}/restoration`, { sequence: 0 }),
    ]) {
      expect(answer.status).toBe(409);
      expect(answer.body).toMatchObject({
        code: 'conflict',
        message: expect.stringMatching(/in review.*take it back/) as string,
        details: [{ path: 'state', value: 'in-review' }],
      });
    }
  });

  test('answers an edit that was saved before the review and is sent again', async () => {
    const designId = await drawn();
    const { sequence } = await open(designId);
    const edit = { editId: crypto.randomUUID(), patch: { meta: { documentType: 'Plan' } } };
    const send = () =>
      members.architect.post(`/api/designs/${designId}/patches`, { baseSequence: sequence, edits: [edit] });
    await send().expect(200);
    await asked(designId);
    const { patches } = savedPatchesSchema.parse((await send().expect(200)).body);
    expect(patches.map(({ editId }) => editId)).toContain(edit.editId);
  });

  test('is refused where others saved since, twice at once, and where nothing differs from what is approved', async () => {
    const designId = await drawn();
    const stale = await members.architect.post(`/api/designs/${designId}/revisions`, { sequence: 0 });
    expect(stale.status).toBe(409);
    expect(stale.body).toMatchObject({ message: expect.stringContaining('by Some Architect') as string });
    const both = await Promise.all([askWith(members.architect, designId), askWith(members.owner, designId)]);
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409]);
    const { designId: done } = await approved();
    await members.architect.post(`/api/designs/${done}/draft`).expect(200);
    const same = await askWith(members.architect, done);
    expect(same.status).toBe(409);
    expect(same.body).toMatchObject({ message: expect.stringContaining('Nothing differs') as string });
  });

  test('mails those who may decide, and the decision to the one who asked', async () => {
    const { designId } = await approved();
    const { title } = (await open(designId)).summary;
    const mails = await application.database
      .knex('mails')
      .whereRaw("content ->> 'link' = ?", [`http://127.0.0.1:3000/designs/${designId}`])
      .orderBy('kind')
      .select<{ kind: string; to_email: string; content: { designTitle: string; by: string } }[]>();
    expect(mails.map(({ kind }) => kind)).toEqual([
      'approved',
      'review-asked',
      'review-asked',
      'review-asked',
    ]);
    expect(mails[0]).toMatchObject({
      to_email: workspace.people.architect.email,
      content: { designTitle: title, by: 'Some Reviewer', message: 'Fine' },
    });
    const told = mails.slice(1).map((mail) => mail.to_email);
    expect(told).toContain(workspace.people.owner.email);
    expect(told).not.toContain(workspace.people.architect.email);
  });
});

describe('taking a review back and sending it back', () => {
  test('make the design a draft under the next label; the frozen copy stays', async () => {
    const designId = await drawn();
    const first = await asked(designId);
    expect((await withdraw(members.architect, first.id).expect(200)).body).toMatchObject({
      state: 'withdrawn',
      decidedBy: { name: 'Some Architect' },
    });
    expect((await open(designId)).document).toMatchObject({ meta: { revision: 'B', status: 'Draft' } });
    const second = await asked(designId);
    const noReason = await decide(members.reviewer, second.id, { decision: 'send-back', note: ' ' });
    expect(noReason.status).toBe(400);
    expect(noReason.body).toMatchObject({ message: expect.stringContaining('expected a reason') as string });
    await decide(members.reviewer, second.id, { decision: 'send-back', note: 'Name the berths' }).expect(200);
    expect((await open(designId)).actions).toContain('design.edit');
    expect((await revisionsOf(designId)).map(({ label, state, note }) => [label, state, note])).toEqual([
      ['B', 'sent-back', 'Name the berths'],
      ['A', 'withdrawn', ''],
    ]);
    expect((await frozen(first.id)).document).toMatchObject({ meta: { revision: 'A' } });
    expect((await activityOf(designId)).map(({ action }) => action)).toEqual([
      'review.asked',
      'review.withdrawn',
      'review.asked',
      'review.sent-back',
    ]);
  });
});

describe('approving', () => {
  test('freezes the revision for good and lets the title block say who and when', async () => {
    const { designId, revision } = await approved();
    expect(revision).toMatchObject({ state: 'approved', decidedBy: { name: 'Some Reviewer' }, note: 'Fine' });
    const opened = await open(designId);
    expect(opened.summary).toMatchObject({
      state: 'approved',
      issued: { id: revision.id, label: 'A', state: 'approved' },
    });
    expect(opened.document).toMatchObject({
      meta: { revision: 'A', status: 'Approved', approvedBy: 'Some Reviewer', dateOfIssue: '2026-12-01' },
    });
    expect((await frozen(revision.id)).revision.contentHash).toBe(revision.contentHash);
  });

  test('is refused while a blocking finding is neither mended nor waived, and names it', async () => {
    const designId = await drawn(broken);
    const { id } = await asked(designId);
    const refused = await approve(members.reviewer, id);
    expect(refused.status).toBe(409);
    const { message, details } = refused.body as { message: string; details: { value: string }[] };
    expect(message).toContain(blocking[0]!.sentence);
    expect(details.map(({ value }) => value)).toEqual(blocking.map(({ sentence }) => sentence));
    await waiveAll(designId);
    const { waived } = revisionSchema.parse((await approve(members.reviewer, id).expect(200)).body);
    expect(waived).toBe(blocking.length);
    expect((await frozen(id)).waivers.map(({ reason }) => reason)).toContain('The far end translates');
  });

  test('counts no waiver whose day is past', async () => {
    const designId = await drawn(broken);
    await waiveAll(designId);
    const { id } = await asked(designId);
    now = new Date('2027-04-01T09:00:00Z');
    expect((await approve(members.reviewer, id)).status).toBe(409);
  });

  test('is refused to who alone drew it, whatever their role, and not once somebody else drew as well', async () => {
    const designId = await addDesign(application, engagementId, sound);
    await application.database
      .knex('designs')
      .where({ id: designId })
      .update({ created_by: workspace.people.owner.id });
    await save(members.owner, designId, describeNote);
    const { id } = await asked(designId);
    const refused = await approve(members.owner, id);
    expect(refused.status).toBe(403);
    expect(refused.body).toMatchObject({ message: expect.stringContaining('second pair of eyes') as string });
    await withdraw(members.owner, id).expect(200);
    await save(members.architect, designId, { meta: { documentType: 'Plan' } });
    const again = await asked(designId);
    await approve(members.owner, again.id).expect(200);
  });

  test('looks at what is new since the last approval alone', async () => {
    const { designId } = await approved();
    await members.owner.post(`/api/designs/${designId}/draft`).expect(200);
    await save(members.owner, designId, { meta: { documentType: 'Plan' } });
    const { id } = await asked(designId);
    expect((await approve(members.owner, id)).status).toBe(403);
    await approve(members.reviewer, id).expect(200);
  });

  test('supersedes what was approved before', async () => {
    const { designId, revision } = await approved();
    await members.architect.post(`/api/designs/${designId}/draft`).expect(200);
    expect((await open(designId)).document).toMatchObject({ meta: { revision: 'B', status: 'Draft' } });
    expect((await open(designId)).summary.issued).toMatchObject({ label: 'A' });
    await save(members.architect, designId, { meta: { documentType: 'Plan' } });
    const next = await asked(designId);
    await approve(members.reviewer, next.id).expect(200);
    expect(
      (await revisionsOf(designId)).map(({ label, state, supersededNote }) => [label, state, supersededNote]),
    ).toEqual([
      ['B', 'approved', ''],
      ['A', 'superseded', 'Replaced by revision B'],
    ]);
    const [last] = (await activityOf(designId)).slice(-1);
    expect(last).toMatchObject({ action: 'design.superseded', details: { revision: 'A', by: 'B' } });
    expect((await frozen(revision.id)).revision.state).toBe('superseded');
  });

  test('happens once, whoever of two is first, and not after it was taken back', async () => {
    const designId = await drawn();
    const { id } = await asked(designId);
    const answers = await Promise.all([approve(members.reviewer, id), approve(secondReviewer, id)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409]);
    const late = answers.find(({ status }) => status === 409)!;
    expect(late.body).toMatchObject({
      message: expect.stringMatching(/was approved by .* already/) as string,
    });

    const other = await drawn();
    const revision = await asked(other);
    await withdraw(members.architect, revision.id).expect(200);
    const gone = await approve(members.reviewer, revision.id);
    expect(gone.status).toBe(409);
    expect(gone.body).toMatchObject({
      message:
        'Revision A was taken back by Some Architect meanwhile; wait until a review is asked for again.',
    });
  });
});

describe('what follows on an approval', () => {
  test('the day on which it was built is noted, within reason', async () => {
    const { designId, revision } = await approved();
    const build = (builtOn: string) =>
      members.architect.post(`/api/revisions/${revision.id}/build`, { builtOn });
    for (const day of ['2026-11-29', '2026-12-05']) {
      const refused = await build(day);
      expect(refused.status).toBe(400);
      expect(refused.body).toMatchObject({ details: [{ path: 'builtOn', value: day }] });
    }
    expect((await build('2026-12-01').expect(200)).body).toMatchObject({
      state: 'built',
      builtOn: '2026-12-01',
      builtBy: { name: 'Some Architect' },
    });
    expect((await open(designId)).summary).toMatchObject({ state: 'built', issued: { state: 'built' } });
    expect((await build('2026-12-01')).status).toBe(409);
    expect((await save(members.architect, designId, describeNote)).body).toMatchObject({
      message: expect.stringContaining('start the next revision') as string,
    });
  });

  test('a later draft goes on while the approved revision is built', async () => {
    const { designId, revision } = await approved();
    await members.architect.post(`/api/designs/${designId}/draft`).expect(200);
    await members.architect
      .post(`/api/revisions/${revision.id}/build`, { builtOn: '2026-12-01' })
      .expect(200);
    expect((await open(designId)).summary).toMatchObject({ state: 'draft', issued: { state: 'built' } });
  });

  test('it can be ended for a reason without another in its place', async () => {
    const { designId, revision } = await approved();
    const end = () =>
      members.owner.post(`/api/revisions/${revision.id}/supersession`, { reason: 'The site is sold' });
    expect((await end().expect(200)).body).toMatchObject({
      state: 'superseded',
      supersededNote: 'The site is sold',
    });
    expect((await open(designId)).summary).toMatchObject({ state: 'superseded', issued: null });
    expect((await end()).status).toBe(409);
  });
});

describe('an approved revision', () => {
  test('can be changed by nobody, not even with direct access to the database', async () => {
    const { revision } = await approved();
    const { knex } = application.database;
    const row = () => knex('revisions').where({ id: revision.id });
    for (const change of [
      { document: Buffer.from('x') },
      { content_hash: 'x' },
      { label: 'Z' },
      { findings: Buffer.from('x') },
      { waivers: '[]', note: 'other' },
      { note: 'other' },
      { decided_by_name: 'Somebody Else' },
      { decided_by: workspace.people.owner.id },
      { state: 'in-review' },
      { state: 'sent-back' },
    ])
      await expect(row().update(change), JSON.stringify(change)).rejects.toThrow(/frozen|does not become/);
    await expect(row().delete()).rejects.toThrow('stays as long as its design');
    expect((await frozen(revision.id)).revision).toEqual(revision);
  });

  test('goes with its design, and keeps names when a person goes', async () => {
    const { designId, revision } = await approved();
    const { knex } = application.database;
    await knex('revisions').where({ id: revision.id }).update({ decided_by: null });
    expect((await frozen(revision.id)).revision.decidedBy).toEqual({ id: null, name: 'Some Reviewer' });
    await knex('designs').where({ id: designId }).delete();
    await members.owner.get(`/api/revisions/${revision.id}`).expect(404);
  });
});

describe('an installer', () => {
  test('is told of approved and built revisions alone, and sent to the newest from another', async () => {
    const { designId, revision } = await approved();
    await members.architect.post(`/api/designs/${designId}/draft`).expect(200);
    await save(members.architect, designId, { meta: { documentType: 'Plan' } });
    const next = await asked(designId);
    expect((await revisionsOf(designId, members.installer)).map(({ label }) => label)).toEqual(['A']);
    expect((await frozen(revision.id, members.installer)).revision.label).toBe('A');
    const early = await members.installer.get(`/api/revisions/${next.id}`).expect(403);
    expect(early.body).toMatchObject({
      message: 'Revision B is not approved, so it is not to be built from; open revision A instead.',
    });
    await approve(members.reviewer, next.id).expect(200);
    const old = await members.installer.get(`/api/revisions/${revision.id}`).expect(403);
    expect(old.body).toMatchObject({ message: expect.stringContaining('was superseded') as string });
    const { body } = await members.installer.get(`/api/workspaces/${workspace.id}/engagements`).expect(200);
    const listed = engagementListSchema.parse(body).engagements.flatMap(({ designs }) => designs);
    expect(listed.find(({ id }) => id === designId)!.issued).toEqual({
      id: next.id,
      label: 'B',
      state: 'approved',
    });
  });
});

describe('the past of a design', () => {
  test('can be read at each patch, and tells who worked on it when', async () => {
    const designId = await drawn();
    await save(members.architect, designId, { meta: { language: 'en' } });
    now = new Date('2026-12-01T15:00:00Z');
    await save(members.architect, designId, { meta: { documentType: 'Plan' } });
    await save(members.owner, designId, { meta: { documentType: 'Proposal' } });
    const { id } = await asked(designId);
    await approve(members.reviewer, id).expect(200);
    const { body } = await members.reviewer.get(`/api/designs/${designId}/sittings`).expect(200);
    expect(
      sittingListSchema
        .parse(body)
        .sittings.map(({ by, firstSequence, lastSequence }) => [by, firstSequence, lastSequence]),
    ).toEqual([
      ['Some Owner', 4, 4],
      ['Some Architect', 3, 3],
      ['Some Architect', 1, 2],
    ]);
    const past = await members.reviewer.get(`/api/designs/${designId}/document?sequence=1`).expect(200);
    expect(pastDocumentSchema.parse(past.body).document).toEqual(applyPatch(sound, describeNote));
    const ahead = await members.reviewer.get(`/api/designs/${designId}/document?sequence=99`);
    expect(ahead.status).toBe(409);
  });

  test('is restored as one patch on the draft, on record', async () => {
    const designId = await drawn();
    const { id } = await asked(designId);
    await withdraw(members.architect, id).expect(200);
    await save(members.architect, designId, mismatch);
    const before = await open(designId);
    const answer = await members.architect
      .post(`/api/designs/${designId}/restoration`, { revisionId: id })
      .expect(200);
    expect(restoredSchema.parse(answer.body)).toMatchObject({ sequence: before.sequence + 1 });
    const { document } = await open(designId);
    expect((document as Design).tunnels).toEqual(sound.tunnels);
    expect(document).toMatchObject({
      meta: { revision: 'B', status: 'Draft', supplementaryTitle: 'With the berths' },
    });
    expect((await activityOf(designId)).at(-1)).toMatchObject({
      action: 'revision.restored',
      details: { revision: 'A' },
    });
    const again = await members.architect
      .post(`/api/designs/${designId}/restoration`, { revisionId: id })
      .expect(200);
    expect(again.body).toMatchObject({ editId: null });
    await members.architect
      .post(`/api/designs/${designId}/restoration`, { sequence: before.sequence })
      .expect(200);
    expect((await open(designId)).document).toEqual(before.document);
  });

  test('is restored from an approved design into its next draft, and never from another design', async () => {
    const { designId, revision } = await approved();
    await members.architect.post(`/api/designs/${designId}/restoration`, { sequence: 0 }).expect(200);
    expect((await open(designId)).summary).toMatchObject({ state: 'draft', issued: { label: 'A' } });
    const other = await drawn();
    await members.architect
      .post(`/api/designs/${other}/restoration`, { revisionId: revision.id })
      .expect(404);
    const both = await members.architect.post(`/api/designs/${other}/restoration`, {
      revisionId: revision.id,
      sequence: 0,
    });
    expect(both.status).toBe(400);
  });
});

test('the sheet of a revision is drawn with what its state says in the title block, and the frozen findings', async () => {
  const designId = await drawn(broken);
  await waiveAll(designId);
  const { id } = await asked(designId);
  const early = await members.architect.get(`/api/revisions/${id}/sheet.svg`).expect(200);
  expect(String(early.body)).toContain('In review');
  await approve(members.reviewer, id).expect(200);
  const sheet = await members.installer.get(`/api/revisions/${id}/sheet.svg?findings=true`).expect(200);
  for (const words of ['Approved', 'Some Reviewer', '2026-12-01', '>A<'])
    expect(String(sheet.body)).toContain(words);
  expect(String(sheet.body)).not.toContain('In review');
});
