import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Pools } from '#contract/numbering.ts';
import { designContextSchema, noPools, workspacePoolsSchema } from '#contract/numbering.ts';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { freeLoopbacks, freeVnis } from '#engine/numbering/free-numbers.ts';
import { numbersOf } from '#engine/numbering/numbers-of.ts';
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
let owner: TestBrowser;
let architect: TestBrowser;

beforeAll(async () => {
  application = await startTestApplication();
});
afterAll(() => application.close());

/** A workspace of its own for each test, so that its designs have no other neighbours. */
async function newWorkspace(): Promise<void> {
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  owner = await signIn(application, workspace.people.owner);
  architect = await signIn(application, workspace.people.architect);
}

const poolsPath = () => `/api/workspaces/${workspace.id}/pools`;
const pools: Pools = {
  vnis: [{ from: 10_100, to: 10_199, for: 'Ferries' }],
  vlans: [],
  loopbacks: [{ prefix: '10.255.7.0/24' }],
  reserved: {
    vnis: [{ from: 10_100, to: 10_109, for: 'Plant controllers' }],
    vlans: [{ from: 900, to: 999 }],
    networks: [],
  },
  networksInUse: [{ prefix: '10.20.0.0/16', for: 'Offices' }],
};

const contextOf = async (designId: string) =>
  designContextSchema.parse((await architect.get(`/api/designs/${designId}/context`).expect(200)).body);
const add = (document: Design) => addDesign(application, engagementId, document);
const titled = (title: string, meta: MergePatch = {}): Design =>
  applyPatch(pairDesign(), { meta: { title, ...meta } });
const save = (designId: string, baseSequence: number, patch: MergePatch) =>
  architect
    .post(`/api/designs/${designId}/patches`, {
      baseSequence,
      edits: [{ editId: crypto.randomUUID(), patch }],
    })
    .expect(200);

describe('the pools of a workspace', () => {
  test('are empty at first, set by an owner and read by everybody who may read designs', async () => {
    await newWorkspace();
    const first = workspacePoolsSchema.parse((await architect.get(poolsPath()).expect(200)).body);
    expect(first).toEqual({ pools: noPools, changedAt: null, changedBy: null });
    const set = workspacePoolsSchema.parse((await owner.put(poolsPath(), { pools }).expect(200)).body);
    expect(set).toMatchObject({ pools, changedBy: workspace.people.owner.name });
    expect((await architect.get(poolsPath()).expect(200)).body).toEqual(set);
  });

  test('are not overwritten by somebody who read them before another change', async () => {
    await newWorkspace();
    const set = workspacePoolsSchema.parse(
      (await owner.put(poolsPath(), { pools, basedOn: null }).expect(200)).body,
    );
    const stale = await owner.put(poolsPath(), { pools: noPools, basedOn: null }).expect(409);
    expect(stale.body).toMatchObject({ code: 'conflict' });
    await owner.put(poolsPath(), { pools: noPools, basedOn: set.changedAt }).expect(200);
  });

  test.each([
    [{ vnis: [{ from: 20, to: 10 }] }, 'pools.vnis.0.to'],
    [{ vnis: [{ from: 1, to: 16_777_216 }] }, 'pools.vnis.0.to'],
    [{ vlans: [{ from: 0, to: 10 }] }, 'pools.vlans.0.from'],
    [{ loopbacks: [{ prefix: '10.255.0.0/33' }] }, 'pools.loopbacks.0.prefix'],
    [{ loopbacks: Array.from({ length: 101 }, () => ({ prefix: '10.0.0.0/24' })) }, 'pools.loopbacks'],
    [{ vnis: [{ from: 10, to: 20, for: 'two\nlines' }] }, 'pools.vnis.0.for'],
    [{ mystery: [] }, 'pools.mystery'],
  ])('refuse %j and name what is wrong', async (change, path) => {
    await newWorkspace();
    const { body } = await owner.put(poolsPath(), { pools: { ...noPools, ...change } }).expect(400);
    expect(body).toMatchObject({ code: 'invalid-request', details: [{ path }] });
  });
});

describe('the context of a design', () => {
  test('says nothing in a workspace that has no pools and no other design', async () => {
    await newWorkspace();
    const { context, neighbours, leftOut } = await contextOf(await add(titled('Alone')));
    expect(context).toEqual({
      pools: {},
      reserved: { vnis: [], vlans: [], networks: [] },
      networksInUse: [],
      otherDesigns: [],
    });
    expect(neighbours).toEqual([]);
    expect(leftOut).toBe(0);
  });

  test('has the pools without what they are for, in the engine’s form', async () => {
    await newWorkspace();
    const designId = await add(titled('Alone'));
    const before = await contextOf(designId);
    await owner.put(poolsPath(), { pools }).expect(200);
    const { version, context } = await contextOf(designId);
    expect(version).not.toBe(before.version);
    expect(context).toMatchObject({
      pools: { vnis: [{ from: 10_100, to: 10_199 }], loopbacks: ['10.255.7.0/24'] },
      reserved: { vnis: [{ from: 10_100, to: 10_109 }], vlans: [{ from: 900, to: 999 }] },
      networksInUse: [{ network: '10.20.0.0/16', of: 'Offices' }],
    });
    expect(context.pools).not.toHaveProperty('vlans');
    expect(freeVnis(emptyDesign('New'), 1, context)).toMatchObject({ vnis: [10_110] });
    expect(freeLoopbacks(emptyDesign('New'), 4, 1, context)).toMatchObject({ loopbacks: ['10.255.7.1/32'] });
  });

  test('has the numbers of the workspace’s other designs as they were last saved', async () => {
    await newWorkspace();
    const [here, there] = [await add(emptyDesign('Here')), await add(titled('There'))];
    const before = await contextOf(here);
    expect(before.context.otherDesigns).toEqual([{ ...numbersOf(titled('There')) }]);
    expect(before.neighbours).toMatchObject([{ id: there, title: 'There' }]);
    await save(there, 0, { tunnels: { 'tn-s0-s1-a': { a: { vni: 55_555 }, b: { vni: 55_555 } } } });
    const after = await contextOf(here);
    expect(after.version).not.toBe(before.version);
    expect(after.context.otherDesigns![0]!.vnis).toContain(55_555);
    expect((await contextOf(here)).version).toBe(after.version);
  });

  test('leaves out its own numbers, what is put away, superseded, another workspace’s, and versions of one drawing', async () => {
    await newWorkspace();
    const elsewhere = await add(titled('Elsewhere'));
    await newWorkspace();
    const here = await add(titled('Here', { identification: 'SMF-L2-004' }));
    await add(titled('Its twin', { identification: 'SMF-L2-004' }));
    const other = await add(titled('Another', { identification: 'SMF-L2-005' }));
    const archived = await add(titled('Archived'));
    await architect.patch(`/api/designs/${archived}`, { archived: true }).expect(200);
    const superseded = await add(titled('Superseded'));
    await application.database.knex('designs').where({ id: superseded }).update({ state: 'superseded' });
    const { neighbours } = await contextOf(here);
    expect(neighbours.map(({ id }) => id)).toEqual([other]);
    expect(neighbours.map(({ id }) => id)).not.toContain(elsewhere);
  });

  test('works out the numbers of a design that was last saved before numbers were kept', async () => {
    await newWorkspace();
    const [here, there] = [await add(emptyDesign('Here')), await add(titled('There'))];
    const { knex } = application.database;
    await knex('designs').where({ id: there }).update({ numbers: null, numbers_digest: null });
    expect((await contextOf(here)).context.otherDesigns).toEqual([{ ...numbersOf(titled('There')) }]);
    await application.database.settled();
    const kept = await knex('designs').where({ id: there }).first<{ numbers_digest: string }>();
    expect(kept.numbers_digest).toMatch(/./);
    expect((await contextOf(here)).context.otherDesigns).toHaveLength(1);
  });
});
