import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { copyIdOf, equipmentProfileSchema, profileIdOf, profileListSchema } from '#contract/profiles.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { Profile } from '#engine/model/underlay.ts';
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
let installer: TestBrowser;
let now = new Date('2026-12-01T14:00:00Z');

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
});
afterAll(() => application.close());
beforeEach(async () => {
  now = new Date('2026-12-01T14:00:00Z');
  workspace = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
  installer = await signIn(application, workspace.people.installer);
});

const branch: Profile = {
  name: 'Small branch gateway',
  basis: 'Measured on the bench',
  encrypted: { oneFlowBps: 180_000_000, packetsPerSecond: 40_000 },
  oversizeDf: 'silent',
};
const path = () => `/api/workspaces/${workspace.id}/profiles`;
const list = async () => profileListSchema.parse((await installer.get(path()).expect(200)).body).profiles;
const create = async (profile: Profile) =>
  equipmentProfileSchema.parse((await owner.post(path(), { profile }).expect(201)).body);
const change = (id: string, body: object) => owner.patch(`/api/profiles/${id}`, body);

describe('equipment profiles', () => {
  test('are kept by an owner and read by every member, by name', async () => {
    const small = await create(branch);
    expect(small).toMatchObject({
      profile: branch,
      changedAt: now.toISOString(),
      changedBy: workspace.people.owner.name,
      archivedAt: null,
      usedIn: [],
    });
    await create({ name: 'a pair' });
    expect((await list()).map(({ profile }) => profile.name)).toEqual(['a pair', 'Small branch gateway']);
  });

  test('are changed as a whole, archived and restored', async () => {
    const { id } = await create(branch);
    now = new Date('2026-12-02T09:00:00Z');
    const changed = equipmentProfileSchema.parse(
      (await change(id, { profile: { name: 'Small branch gateway', macTable: 4000 } }).expect(200)).body,
    );
    expect(changed.profile).toEqual({ name: 'Small branch gateway', macTable: 4000 });
    expect(changed.changedAt).toBe(now.toISOString());
    const archived = await change(id, { archived: true }).expect(200);
    expect(archived.body).toMatchObject({ archivedAt: now.toISOString(), changedAt: now.toISOString() });
    expect(await list()).toMatchObject([{ id, archivedAt: now.toISOString() }]);
    expect((await change(id, { archived: false }).expect(200)).body).toMatchObject({ archivedAt: null });
  });

  test('are not overwritten by somebody who read them before another change', async () => {
    const { id, changedAt } = await create(branch);
    now = new Date('2026-12-02T09:00:00Z');
    await change(id, { profile: { ...branch, macTable: 1 }, basedOn: changedAt }).expect(200);
    const { body } = await change(id, { profile: branch, basedOn: changedAt }).expect(409);
    expect(body).toMatchObject({ code: 'conflict' });
    expect(await list()).toMatchObject([{ profile: { macTable: 1 } }]);
  });

  test('have names of their own, as long as they are not archived', async () => {
    const first = await create(branch);
    const taken = await owner.post(path(), { profile: { name: 'SMALL branch gateway' } }).expect(409);
    expect(taken.body).toMatchObject({ code: 'conflict', details: [{ path: 'profile.name' }] });
    await change(first.id, { archived: true }).expect(200);
    const second = await create(branch);
    await change(first.id, { archived: false }).expect(409);
    await change(second.id, { profile: { name: 'Another' } }).expect(200);
    await change(first.id, { archived: false }).expect(200);
    await change(second.id, { profile: { name: branch.name } }).expect(409);
  });

  test.each([
    [{ name: '' }, 'profile.name'],
    [{ name: 'A', plain: { oneFlowBps: 0 } }, 'profile.plain.oneFlowBps'],
    [{ name: 'A', encrypted: { packetsPerSecond: -1 } }, 'profile.encrypted.packetsPerSecond'],
    [{ name: 'A', oversizeDf: 'vanish' }, 'profile.oversizeDf'],
    [{ name: 'A', reservedGroups: { '1f': 'drop' } }, 'profile.reservedGroups.1f'],
    [{ name: 'A', speed: 1 }, 'profile.speed'],
  ])('refuse %j and name what is wrong', async (profile, at) => {
    const { body } = await owner.post(path(), { profile }).expect(400);
    expect(body).toMatchObject({ code: 'invalid-request', details: [{ path: at }] });
  });
});

describe('where a profile is used', () => {
  const holding = (id: string, profile: Profile): MergePatch =>
    ({
      profiles: { [copyIdOf(id)]: profile },
      devices: { 'fw-s0': { profile: copyIdOf(id) }, 'fw-s1': { profile: copyIdOf(id) } },
    }) as unknown as MergePatch;

  test('names the designs that hold a copy, on how many devices, and whether it is the newest', async () => {
    const { id } = await create(branch);
    const engagementId = await addEngagement(application, workspace.id);
    const designId = await addDesign(
      application,
      engagementId,
      applyPatch(pairDesign(), holding(id, branch)),
    );
    const [fresh] = await list();
    expect(fresh!.usedIn).toMatchObject([{ designId, devices: 2, current: true }]);
    await change(id, { profile: { ...branch, macTable: 8000 } }).expect(200);
    expect((await list())[0]!.usedIn).toMatchObject([{ designId, current: false }]);
    const save = (baseSequence: number, patch: MergePatch) =>
      owner
        .post(`/api/designs/${designId}/patches`, {
          baseSequence,
          edits: [{ editId: crypto.randomUUID(), patch }],
        })
        .expect(200);
    // The order of keys says nothing.
    const { name, ...rest } = branch;
    await save(0, {
      profiles: { [copyIdOf(id)]: { macTable: 8000, ...rest, name } },
    } as unknown as MergePatch);
    expect((await list())[0]!.usedIn).toMatchObject([{ designId, current: true }]);
    await save(1, { devices: { 'fw-s1': { profile: null } } });
    expect((await list())[0]!.usedIn).toMatchObject([{ designId, devices: 1 }]);
    await owner.patch(`/api/designs/${designId}`, { archived: true }).expect(200);
    expect((await list())[0]!.usedIn).toEqual([]);
  });
});

test('the id of a copy names its profile, and no other id does', () => {
  const id = 'b6a1f1de-9f0e-4a52-8d7e-0c8f6f2f9b11';
  expect(profileIdOf(copyIdOf(id))).toBe(id);
  expect(profileIdOf(id)).toBeUndefined();
  expect(profileIdOf('eq-own')).toBeUndefined();
});
