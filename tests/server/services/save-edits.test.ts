import fc from 'fast-check';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import type { LoggedPatch, SavedPatches } from '#contract/designs.ts';
import { openDesignSchema, patchListSchema, savedPatchesSchema } from '#contract/designs.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { countBySeverity, runRules } from '#engine/rules/run-rules.ts';
import { findSnapshot } from '../../../server/repositories/design-snapshots.ts';
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
let secondProcess: TestApplication;
let workspace: TestWorkspace;
let engagementId: string;
let architect: TestBrowser;
let owner: TestBrowser;

beforeAll(async () => {
  application = await startTestApplication();
  secondProcess = await application.another();
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  architect = await signIn(application, workspace.people.architect);
  owner = await signIn(secondProcess, workspace.people.owner);
});
afterAll(() => application.close());
afterEach(() => application.database.settled());

const original = pairDesign();
const newEdit = (patch: unknown) => ({ editId: crypto.randomUUID(), patch: patch as MergePatch });
type Edit = ReturnType<typeof newEdit>;

const post = (browser: TestBrowser, designId: string, baseSequence: number, edits: readonly Edit[]) =>
  browser.post(`/api/designs/${designId}/patches`, { baseSequence, edits });

async function save(
  browser: TestBrowser,
  designId: string,
  baseSequence: number,
  ...edits: readonly Edit[]
): Promise<SavedPatches> {
  return savedPatchesSchema.parse((await post(browser, designId, baseSequence, edits).expect(200)).body);
}

async function open(browser: TestBrowser, designId: string) {
  return openDesignSchema.parse((await browser.get(`/api/designs/${designId}`).expect(200)).body);
}

async function log(designId: string): Promise<readonly LoggedPatch[]> {
  const { body } = await architect.get(`/api/designs/${designId}/patches?after=0`).expect(200);
  return patchListSchema.parse(body).patches;
}

const replay = (from: Design, patches: readonly LoggedPatch[]): Design =>
  patches.reduce<Design>((at, { patch }) => applyPatch(at, patch as MergePatch), from);

describe('saving', () => {
  test('logs edits in order, with who and when, and counts findings', async () => {
    const designId = await addDesign(application, engagementId, original);
    const edits = [
      newEdit({ sites: { s0: { name: 'Quay' } } }),
      newEdit({ tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } }),
    ];
    const saved = await save(architect, designId, 0, ...edits);
    expect(saved.sequence).toBe(2);
    expect(saved.patches).toEqual(
      edits.map((each, index) => ({
        ...each,
        sequence: index + 1,
        by: workspace.people.architect.name,
        at: expect.any(String) as string,
        repair: false,
      })),
    );
    const { document, summary } = await open(owner, designId);
    expect(document).toEqual(replay(original, saved.patches));
    expect(saved.counts).toEqual(countBySeverity(runRules(document as Design)));
    expect(saved.counts.blocking).toBe(1);
    expect(summary).toMatchObject({
      sequence: 2,
      counts: saved.counts,
      changedBy: workspace.people.architect.name,
    });
  });

  test('answers everything since the base, whoever made it', async () => {
    const designId = await addDesign(application, engagementId, original);
    const theirs = newEdit({ sites: { s0: { name: 'Pier' } } });
    await save(owner, designId, 0, theirs);
    const mine = newEdit({ sites: { s1: { name: 'Quay' } } });
    const saved = await save(architect, designId, 0, mine);
    expect(saved.patches.map(({ editId, by }) => [editId, by])).toEqual([
      [theirs.editId, workspace.people.owner.name],
      [mine.editId, workspace.people.architect.name],
    ]);
  });

  test('takes an edit once, however often it is sent', async () => {
    const designId = await addDesign(application, engagementId, original);
    const edit = newEdit({ sites: { s0: { name: 'Quay' } } });
    const first = await save(architect, designId, 0, edit, edit);
    const later = newEdit({ sites: { s0: { name: 'Pier' } } });
    await save(owner, designId, 1, later);
    const again = await save(architect, designId, 0, edit);
    expect(again.sequence).toBe(2);
    expect(again.patches).toEqual([...first.patches, expect.objectContaining({ editId: later.editId })]);
    expect((await open(architect, designId)).document).toMatchObject({ sites: { s0: { name: 'Pier' } } });
  });

  test('takes an edit once when it arrives twice at the same moment at two processes', async () => {
    const designId = await addDesign(application, engagementId, original);
    const edit = newEdit({ sites: { s0: { name: 'Quay' } } });
    const elsewhere = await signIn(secondProcess, workspace.people.architect);
    await Promise.all(
      Array.from({ length: 8 }, (_, index) => save(index % 2 ? architect : elsewhere, designId, 0, edit)),
    );
    expect(await log(designId)).toHaveLength(1);
  });

  test('takes all edits or none', async () => {
    const designId = await addDesign(application, engagementId, original);
    const response = await post(architect, designId, 0, [
      newEdit({ sites: { s0: { name: 'Quay' } } }),
      newEdit({ sites: { s1: { name: '' } } }),
    ]).expect(422);
    expect(response.body).toMatchObject({
      code: 'invalid-design',
      details: [{ path: 'sites.s1.name', value: '""', expected: 'expected a name, at least one character' }],
    });
    expect(await log(designId)).toEqual([]);
    expect((await open(architect, designId)).document).toEqual(original);
  });

  test('logs the repair of what two people’s edits left dangling', async () => {
    const designId = await addDesign(application, engagementId, original);
    await save(owner, designId, 0, newEdit({ segments: { a: null } }));
    const saved = await save(
      architect,
      designId,
      0,
      newEdit({
        demands: { dm: { segment: 'a', from: { site: 's0' }, to: { site: 's1' } } },
      }),
    );
    const repair = saved.patches.at(-1)!;
    expect(repair).toMatchObject({ repair: true, by: null, patch: { demands: { dm: null } } });
    expect(parseDesign((await open(architect, designId)).document)).toMatchObject({ ok: true });
  });

  test('refuses edits made on a state that never was', async () => {
    const designId = await addDesign(application, engagementId, original);
    const response = await post(architect, designId, 7, [newEdit({ meta: { revision: 'B' } })]).expect(409);
    expect(response.body).toMatchObject({ code: 'conflict' });
    await architect.get(`/api/designs/${designId}/patches?after=7`).expect(409);
    await architect.get(`/api/designs/${designId}/patches?after=-1`).expect(400);
    await architect.get(`/api/designs/${designId}/patches`).expect(400);
  });

  test('keeps every character that JSON has', async () => {
    const designId = await addDesign(application, engagementId, original);
    const notes = 'zero \u0000, half a pair \ud800, “quoted” \\ 🚢';
    await save(architect, designId, 0, newEdit({ sites: { s0: { notes } } }));
    const fresh = await signIn(await application.another(), workspace.people.reviewer);
    expect((await open(fresh, designId)).document).toMatchObject({ sites: { s0: { notes } } });
  });

  test('a key that means something to JavaScript changes nothing', async () => {
    const designId = await addDesign(application, engagementId, original);
    const body = `{"baseSequence":0,"edits":[{"editId":"${crypto.randomUUID()}","patch":{"devices":{"__proto__":{"polluted":1}}}}]}`;
    await architect.agent
      .post(`/api/designs/${designId}/patches`)
      .set('X-CSRF-Token', architect.csrfToken)
      .set('Content-Type', 'application/json')
      .send(body)
      .expect(422);
    expect(await log(designId)).toEqual([]);
    expect(({} as { polluted?: unknown }).polluted).toBeUndefined();
  });
});

describe('the log', () => {
  test('cannot be rewritten, even by hand', async () => {
    const designId = await addDesign(application, engagementId, original);
    await save(architect, designId, 0, newEdit({ meta: { revision: 'B' } }));
    const rows = application.database.knex('design_patches').where({ design_id: designId });
    await expect(rows.update({ patch: '{}' })).rejects.toThrow('append-only');
  });

  test('is gathered into a snapshot now and then, and reads the same without the cache', async () => {
    const designId = await addDesign(application, engagementId, original);
    let sequence = 0;
    for (let batch = 0; batch < 13; batch += 1) {
      const edits = Array.from({ length: 17 }, (_, index) =>
        newEdit({ sites: { s0: { notes: `batch ${batch}, edit ${index}` } } }),
      );
      ({ sequence } = await save(architect, designId, sequence, ...edits));
    }
    await application.database.settled();
    const kept = await application.database
      .knex('design_snapshots')
      .where({ design_id: designId })
      .orderBy('sequence')
      .pluck<number[]>('sequence');
    expect(kept).toEqual([0, 102, 204]);
    const fresh = await signIn(await application.another(), workspace.people.reviewer);
    const { document } = await open(fresh, designId);
    expect(document).toEqual(replay(original, await log(designId)));
    const half = await findSnapshot(application.database.knex, designId, 150);
    expect(half.document).toEqual(replay(original, (await log(designId)).slice(0, 102)));
  });
});

describe('the title', () => {
  test('is one truth: changed in the list it is a patch, changed on the sheet it is in the list', async () => {
    const designId = await addDesign(application, engagementId, original);
    const renamed = await architect.patch(`/api/designs/${designId}`, { title: ' Phase 2 ' }).expect(200);
    expect(renamed.body).toMatchObject({ title: 'Phase 2', sequence: 1 });
    expect((await log(designId))[0]).toMatchObject({ patch: { meta: { title: 'Phase 2' } } });
    await architect.patch(`/api/designs/${designId}`, { title: 'Phase 2' }).expect(200);
    const saved = await save(
      owner,
      designId,
      1,
      newEdit({ meta: { title: 'Phase 3', identification: 'SMF-9', revision: 'D' } }),
    );
    expect(saved.sequence).toBe(2);
    expect((await open(architect, designId)).summary).toMatchObject({
      title: 'Phase 3',
      identification: 'SMF-9',
      revision: 'D',
    });
    await save(owner, designId, 2, newEdit({ meta: { identification: null } }));
    expect((await open(architect, designId)).summary.identification).toBeNull();
  });
});

describe('an archived design', () => {
  test('is opened without the right to edit, and takes no edits until it is restored', async () => {
    const designId = await addDesign(application, engagementId, original);
    await architect.patch(`/api/designs/${designId}`, { archived: true }).expect(200);
    expect((await open(architect, designId)).actions).not.toContain('design.edit');
    const edit = newEdit({ meta: { revision: 'B' } });
    const refused = await post(architect, designId, 0, [edit]).expect(409);
    expect(refused.body).toMatchObject({ code: 'conflict' });
    await architect.patch(`/api/designs/${designId}`, { title: 'Another' }).expect(409);
    const restored = await architect
      .patch(`/api/designs/${designId}`, { archived: false, title: 'Another' })
      .expect(200);
    expect(restored.body).toMatchObject({ archivedAt: null, title: 'Another', sequence: 1 });
    await save(architect, designId, 1, edit);
  });

  test('so is a design whose engagement is archived', async () => {
    const archivedEngagement = await addEngagement(application, workspace.id);
    const designId = await addDesign(application, archivedEngagement, original);
    await architect.patch(`/api/engagements/${archivedEngagement}`, { archived: true }).expect(200);
    expect((await open(architect, designId)).actions).not.toContain('design.edit');
    await post(architect, designId, 0, [newEdit({ meta: { revision: 'B' } })]).expect(409);
  });
});

describe('two people who save at once', () => {
  /** One property that an edit sets to its own mark, or an entry that it takes away. */
  const intents = [
    ...['s0', 's1'].flatMap((id) => [
      ['sites', id, 'name'],
      ['sites', id, 'notes'],
    ]),
    ...['fw-s0', 'fw-s1', 'h-s0-a', 'sw-s1'].flatMap((id) => [
      ['devices', id, 'name'],
      ['devices', id, 'notes'],
    ]),
    ['tunnels', 'tn-s0-s1-a', 'notes'],
    ['associations', 'as-s0-s1', 'name'],
    ['meta', 'createdBy'],
  ] as const;
  const removals = [
    ['devices', 'h-s0-a'],
    ['sites', 's1'],
    ['tunnels', 'tn-s0-s1-a'],
  ] as const;
  const isRemoval = (path: readonly string[]): boolean =>
    (removals as readonly (readonly string[])[]).includes(path);
  const patchAt = (path: readonly string[], value: unknown): MergePatch =>
    path.reduceRight<unknown>((inner, key) => ({ [key]: inner }), value) as MergePatch;
  const valueAt = (root: unknown, path: readonly string[]): unknown =>
    path.reduce<unknown>((at, key) => (at as Record<string, unknown> | undefined)?.[key], root);

  /** What a patch says about a property: null where it takes it, or what it is in, away. */
  const sayAt = (patch: unknown, path: readonly string[]): unknown =>
    path.reduce<unknown>(
      (at, key) => (at === null ? null : (at as Record<string, unknown> | undefined)?.[key]),
      patch,
    );

  const stepArbitrary = fc.record({
    who: fc.constantFrom(0, 1),
    paths: fc.uniqueArray(
      fc.oneof({ weight: 6, arbitrary: fc.constantFrom(...intents) }, fc.constantFrom(...removals)),
      { minLength: 1, maxLength: 4, selector: (path) => path.join('.') },
    ),
  });

  test('lose nothing to one another, agree in the end, and leave a valid design', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(stepArbitrary, { minLength: 2, maxLength: 8 }), async (steps) => {
        const designId = await addDesign(application, engagementId, original);
        const savers = [architect, owner].map((browser) => ({ browser, sequence: 0, document: original }));
        const sent: Edit[] = [];
        let mark = 0;
        // Each saves on what it knew last, without waiting for the other.
        await Promise.all(
          savers.map(async (saver, who) => {
            for (const step of steps.filter((each) => each.who === who)) {
              const known = step.paths.filter(
                (path) => path[0] === 'meta' || valueAt(saver.document, path.slice(0, 2)) !== undefined,
              );
              // One's own removal ends the batch: nobody goes on to change what they took away.
              const firstRemoval = known.findIndex(isRemoval);
              const kept = (firstRemoval < 0 ? known : known.slice(0, firstRemoval + 1)).map((path) =>
                newEdit(patchAt(path, isRemoval(path) ? null : `mark ${(mark += 1)}`)),
              );
              if (kept.length === 0) continue;
              sent.push(...kept);
              const saved = await save(saver.browser, designId, saver.sequence, ...kept);
              saver.document = replay(saver.document, saved.patches);
              saver.sequence = saved.sequence;
            }
          }),
        );
        const patches = await log(designId);
        expect(patches.map(({ sequence }) => sequence)).toEqual(patches.map((_, index) => index + 1));
        expect(
          patches
            .filter(({ repair }) => !repair)
            .map(({ editId }) => editId)
            .sort(),
        ).toEqual(sent.map(({ editId }) => editId).sort());
        const document = replay(original, patches);
        for (const browser of [architect, owner])
          expect((await open(browser, designId)).document).toEqual(document);
        expect(parseDesign(document)).toMatchObject({ ok: true });
        // Slow twin: each property alone, through the log. A later edit stands, a removed entry takes its properties along.
        for (const path of intents) {
          let expected = valueAt(original, path);
          for (const { patch } of patches) {
            const says = sayAt(patch, path);
            if (says !== undefined) expected = says ?? undefined;
          }
          expect(valueAt(document, path)).toBe(expected);
        }
      }),
      { numRuns: 20 },
    );
  });

  test('merge in the one entry that both change', async () => {
    const designId = await addDesign(application, engagementId, original);
    const rounds = 20;
    const saveAll = async (browser: TestBrowser, property: 'name' | 'notes') => {
      let base = 0;
      for (let round = 1; round <= rounds; round += 1) {
        const saved = await save(
          browser,
          designId,
          base,
          newEdit({ sites: { s0: { [property]: `${round}` } } }),
        );
        base = saved.sequence;
      }
    };
    await Promise.all([saveAll(architect, 'name'), saveAll(owner, 'notes')]);
    const { document, sequence } = await open(architect, designId);
    expect(sequence).toBe(2 * rounds);
    expect(document).toMatchObject({ sites: { s0: { name: `${rounds}`, notes: `${rounds}` } } });
  });
});
