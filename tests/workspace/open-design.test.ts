import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { LoggedPatch } from '../../src/contract/designs.ts';
import type { Design } from '../../src/engine/model/design.ts';
import { applyPatch } from '../../src/engine/model/merge-patch.ts';
import type { MergePatch } from '../../src/engine/model/merge-patch.ts';
import { browserEditStorage } from '../../src/workspace/edit-storage.ts';
import type { Told } from '../../src/workspace/meet-others.ts';
import type { OpenDesignServer, SaveFailure } from '../../src/workspace/open-design.ts';
import { openDesign } from '../../src/workspace/open-design.ts';
import { pairDesign } from '../support/designs.ts';

/** A server in memory that logs patches as the real one does, and can be made unreachable. */
const memoryServer = (document: Design) => {
  const log: LoggedPatch[] = [];
  let failure: SaveFailure | undefined;
  let loseAnswers = false;
  const append = (editId: string, patch: MergePatch, by: string | null = null) => {
    if (log.some((entry) => entry.editId === editId)) return;
    log.push({
      sequence: log.length + 1,
      editId,
      by,
      at: '2026-03-18T14:32:00.000Z',
      patch,
      repair: false,
    });
  };
  const server: OpenDesignServer = {
    save: async (baseSequence, edits) => {
      if (failure !== undefined) return failure;
      for (const edit of edits) append(edit.editId, edit.patch);
      if (loseAnswers) return { kind: 'unreachable' };
      return {
        sequence: log.length,
        patches: log.slice(baseSequence),
        counts: { blocking: 0, degrading: 0, advisory: 0 },
      };
    },
    patchesAfter: async (sequence) => failure ?? { sequence: log.length, patches: log.slice(sequence) },
  };
  return {
    server,
    log,
    other: (patch: MergePatch, by?: string) => append(`other-${log.length}`, patch, by),
    fail: (next: SaveFailure | undefined) => (failure = next),
    loseAnswers: (lose: boolean) => (loseAnswers = lose),
    document: () => log.reduce<Design>((d, entry) => applyPatch(d, entry.patch as MergePatch), document),
  };
};

let edits = 0;
const open = (
  memory: ReturnType<typeof memoryServer>,
  document: Design,
  storage = browserEditStorage(localStorage, 'd1', Date.now),
  tell?: (told: Told) => void,
  now = () => 0,
) =>
  openDesign({
    document,
    sequence: 0,
    editable: true,
    server: memory.server,
    storage,
    newEditId: () => `edit-${(edits += 1)}`,
    now,
    ...(tell === undefined ? {} : { tell }),
  });

const rename = (name: string): MergePatch => ({ sites: { s0: { name } } });

beforeEach(() => localStorage.clear());

describe('the open design', () => {
  it('shows an edit at once and says when it is saved', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    const design = open(memory, document);
    expect(design.commit('Rename', rename('Gull'))).toEqual({ ok: true });
    expect(design.store.getState().document.sites.s0!.name).toBe('Gull');
    expect(design.store.getState().save.kind).toBe('saving');
    await design.flush();
    expect(design.store.getState().save.kind).toBe('saved');
    expect(memory.document()).toEqual(design.store.getState().document);
    expect(localStorage.length).toBe(0);
  });

  it('refuses what the schema refuses and changes nothing', () => {
    const document = pairDesign();
    const design = open(memoryServer(document), document);
    const result = design.commit('VNI', { tunnels: { 'tn-s0-s1-a': { a: { vni: -1 } } } });
    expect(result).toMatchObject({ ok: false, problems: [{ path: 'tunnels.tn-s0-s1-a.a.vni' }] });
    expect(design.store.getState().document).toBe(document);
  });

  it('takes back and does again, one step per gesture', () => {
    const document = pairDesign();
    const design = open(memoryServer(document), document);
    design.commit('Rename', rename('One'));
    design.commit('Remove firewall', { devices: { 'fw-s1': null } });
    expect(Object.keys(design.store.getState().document.tunnels)).toEqual([]);
    expect(design.undo()).toBe('Remove firewall');
    expect(design.undo()).toBe('Rename');
    expect(design.store.getState().document).toEqual(document);
    expect(design.undo()).toBeUndefined();
    expect(design.redo()).toBe('Rename');
    expect(design.store.getState().document.sites.s0!.name).toBe('One');
  });

  it('undoes only its own edits, not what somebody else did meanwhile', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    const design = open(memory, document);
    design.commit('Rename', rename('Mine'));
    memory.other({ sites: { s1: { name: 'Theirs' } } });
    await design.flush();
    design.undo();
    expect(design.store.getState().document.sites).toMatchObject({
      s0: { name: 'Head office' },
      s1: { name: 'Theirs' },
    });
  });

  it('keeps entries that nobody touched identical, so that nothing is drawn again', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    const design = open(memory, document);
    design.commit('Rename', rename('Mine'));
    const { tunnels, sites } = design.store.getState().document;
    await design.flush();
    expect(design.store.getState().document.tunnels).toBe(tunnels);
    expect(design.store.getState().document.sites).toBe(sites);
  });

  it('keeps edits while the server is away and sends them when it is back', async () => {
    vi.useFakeTimers();
    const document = pairDesign();
    const memory = memoryServer(document);
    memory.fail({ kind: 'unreachable' });
    const design = open(memory, document);
    for (let i = 0; i < 500; i += 1) design.commit('Rename', rename(`Name ${i}`));
    await vi.advanceTimersByTimeAsync(600_000);
    expect(design.store.getState().save).toEqual({ kind: 'offline', edits: 500 });
    expect(localStorage.length).toBe(500);
    memory.fail(undefined);
    await vi.advanceTimersByTimeAsync(20_000);
    expect(design.store.getState().save.kind).toBe('saved');
    expect(memory.log).toHaveLength(500);
    expect(memory.document().sites.s0!.name).toBe('Name 499');
    vi.useRealTimers();
  });

  it('takes over what a closed tab left and sends it once, even when its answer had been lost', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    memory.loseAnswers(true);
    const first = open(memory, document);
    first.commit('Rename', rename('Kept'));
    await first.flush();
    first.close();
    memory.loseAnswers(false);
    const second = open(memory, document);
    expect(second.store.getState().document.sites.s0!.name).toBe('Kept');
    await second.flush();
    expect(memory.log).toHaveLength(1);
    expect(second.store.getState().save.kind).toBe('saved');
    expect(localStorage.length).toBe(0);
  });

  it('lets an edit lapse where somebody else meanwhile removed what it changes', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    const design = open(memory, document);
    design.commit('Rename', rename('First'));
    memory.other({ tunnels: { 'tn-s0-s1-a': null } });
    const sending = design.flush();
    design.commit('VNI', { tunnels: { 'tn-s0-s1-a': { a: { vni: 77 } } }, sites: { s1: { name: 'Mine' } } });
    await sending;
    expect(memory.log.at(-1)!.patch).toEqual({ sites: { s1: { name: 'Mine' } } });
    expect(design.store.getState().document.tunnels).toEqual({});
    expect(design.store.getState().document.sites).toMatchObject({
      s0: { name: 'First' },
      s1: { name: 'Mine' },
    });
  });

  it('says when its person has been signed out and keeps the edits', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    memory.fail({ kind: 'signed-out' });
    const design = open(memory, document);
    design.commit('Rename', rename('Kept'));
    await design.flush();
    expect(design.store.getState().save).toEqual({ kind: 'signed-out', edits: 1 });
    expect(localStorage.length).toBe(1);
  });

  it('shows why the server refused and can go back to what it has', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    memory.fail({ kind: 'refused', message: 'Your role may not edit this design.', problems: [] });
    const design = open(memory, document);
    design.commit('Rename', rename('Lost'));
    await design.flush();
    expect(design.store.getState().save).toMatchObject({ kind: 'refused', edits: 1 });
    design.discardRefused();
    expect(design.store.getState().document).toEqual(document);
    expect(localStorage.length).toBe(0);
  });

  it('drops from the selection what is gone', () => {
    const document = pairDesign();
    const design = open(memoryServer(document), document);
    design.select([
      { collection: 'tunnels', id: 'tn-s0-s1-a' },
      { collection: 'sites', id: 's0' },
    ]);
    design.commit('Remove', { tunnels: { 'tn-s0-s1-a': null } });
    expect(design.store.getState().selection).toEqual([{ collection: 'sites', id: 's0' }]);
  });
});

describe('two people on the same things', () => {
  const setUp = () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    const told: Told[] = [];
    const design = open(memory, document, undefined, (each) => told.push(each));
    const name = () => design.store.getState().document.sites.s0!.name;
    return { memory, design, told, name, before: document.sites.s0!.name };
  };

  it('lets the later edit stand and tells whose it is', async () => {
    const { memory, design, told, name } = setUp();
    design.commit('Rename', rename('Mine'));
    await design.flush();
    memory.other(rename('Theirs'), 'Noor Okafor');
    await design.catchUp();
    expect(name()).toBe('Theirs');
    expect(told).toMatchObject([
      {
        kind: 'settled',
        stands: 'theirs',
        by: 'Noor Okafor',
        before: { sites: { s0: { name: 'Mine' } } },
        after: { sites: { s0: { name: 'Theirs' } } },
      },
    ]);
  });

  it('lets an edit that waited stand over one that was logged before it', async () => {
    const { memory, design, told, name } = setUp();
    memory.other(rename('Theirs'), 'Noor Okafor');
    design.commit('Rename', rename('Mine'));
    await design.flush();
    expect(name()).toBe('Mine');
    expect(told).toMatchObject([{ kind: 'settled', stands: 'mine', by: 'Noor Okafor' }]);
  });

  it('takes such an edit back to what the other one had left', async () => {
    const { memory, design, name, before } = setUp();
    design.commit('Rename', rename('First'));
    await design.flush();
    memory.other(rename('Theirs'), 'Noor Okafor');
    design.commit('Rename', rename('Mine'));
    await design.flush();
    expect(design.undo()).toBe('Rename');
    expect(name()).toBe('Theirs');
    expect(design.undo()).toBeUndefined();
    expect(name()).toBe('Theirs');
    expect(name()).not.toBe(before);
  });

  it('does not take back what somebody else has changed since, and says so', async () => {
    const { memory, design, told, name } = setUp();
    design.commit('Rename', { sites: { s0: { name: 'Mine' }, s1: { name: 'Also mine' } } });
    design.commit('Move', { sites: { s1: { name: 'Again mine' } } });
    await design.flush();
    memory.other({ sites: { s1: { name: 'Theirs' } } }, 'Noor Okafor');
    await design.catchUp();
    told.length = 0;
    expect(design.undo()).toBeUndefined();
    expect(told).toEqual([{ kind: 'taken-over', label: 'Move', by: 'Noor Okafor' }]);
    expect(design.undo()).toBe('Rename');
    expect(name()).not.toBe('Mine');
    expect(design.store.getState().document.sites.s1!.name).toBe('Theirs');
  });

  it('says nothing of different properties of one thing, nor of what was long ago', async () => {
    const document = pairDesign();
    const memory = memoryServer(document);
    const told: Told[] = [];
    let now = 0;
    const design = open(
      memory,
      document,
      undefined,
      (each) => told.push(each),
      () => now,
    );
    design.commit('VNI', { tunnels: { 'tn-s0-s1-a': { a: { vni: 77 } } } });
    await design.flush();
    memory.other({ tunnels: { 'tn-s0-s1-a': { b: { vni: 78 } } } }, 'Noor Okafor');
    await design.catchUp();
    now = 31_000;
    memory.other({ tunnels: { 'tn-s0-s1-a': { a: { vni: 79 } } } }, 'Noor Okafor');
    await design.catchUp();
    expect(told).toEqual([]);
  });
});
