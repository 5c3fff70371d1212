import { createStore } from 'zustand/vanilla';
import type { StoreApi } from 'zustand/vanilla';
import type { Counts, LoggedPatch, SavedPatches } from '../contract/designs.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { applyPatch, diffPatch, isEmptyPatch, joinPatches } from '../engine/model/merge-patch.ts';
import type { Problem } from '../engine/model/parse-design.ts';
import { changedProblems } from '../engine/model/parse-design.ts';
import { danglingPatch } from '../engine/model/references.ts';
import { settlePatch } from '../engine/model/settle-patch.ts';
import type { Edit, EditStorage } from './edit-storage.ts';
import type { PatchHistory } from './patch-history.ts';
import type { Told } from './meet-others.ts';
import { meetOthers } from './meet-others.ts';
import { emptyHistory, record, redo, undo } from './patch-history.ts';

/** What the bar says about the work's safety. */
export type SaveState =
  | { readonly kind: 'saved'; readonly at: number }
  | { readonly kind: 'saving' }
  | { readonly kind: 'offline'; readonly edits: number }
  | { readonly kind: 'signed-out'; readonly edits: number }
  | {
      readonly kind: 'refused';
      readonly message: string;
      readonly problems: readonly Problem[];
      readonly edits: number;
    };

/** Why a save did not go through: worth another try, or an answer that stands. */
export type SaveFailure =
  | { readonly kind: 'unreachable' }
  | { readonly kind: 'signed-out' }
  | { readonly kind: 'refused'; readonly message: string; readonly problems: readonly Problem[] };

export interface OpenDesignServer {
  readonly save: (baseSequence: number, edits: readonly Edit[]) => Promise<SavedPatches | SaveFailure>;
  readonly patchesAfter: (
    sequence: number,
  ) => Promise<{ readonly sequence: number; readonly patches: readonly LoggedPatch[] } | SaveFailure>;
}

export interface OpenDesignState {
  readonly document: Design;
  readonly editable: boolean;
  readonly sequence: number;
  readonly save: SaveState;
  readonly counts: Counts | undefined;
  readonly history: PatchHistory;
  readonly selection: readonly ElementRef[];
}

export type Committed = { readonly ok: true } | { readonly ok: false; readonly problems: readonly Problem[] };

export interface OpenDesign {
  readonly store: StoreApi<OpenDesignState>;
  /** Applies one gesture: one undo step, one logged edit. What it leaves dangling goes with it. */
  readonly commit: (label: string, patch: MergePatch) => Committed;
  readonly undo: () => string | undefined;
  readonly redo: () => string | undefined;
  readonly select: (selection: readonly ElementRef[]) => void;
  /** Sends what waits; also called by itself a moment after every edit. */
  readonly flush: () => Promise<void>;
  /** Fetches what others did, as when a tab comes back to the front. */
  readonly catchUp: () => Promise<void>;
  /** Gives up the edits that the server refused and goes back to what it has. */
  readonly discardRefused: () => void;
  /** Lets the person edit from now on, or not, as when the design's state changes; what waits to be saved stays. */
  readonly setEditable: (editable: boolean) => void;
  readonly close: () => void;
}

interface Options {
  readonly document: Design;
  readonly sequence: number;
  readonly editable: boolean;
  readonly server: OpenDesignServer;
  readonly storage: EditStorage;
  readonly newEditId: () => string;
  readonly now: () => number;
  readonly tell?: (told: Told) => void;
}

// Long enough to gather a burst of typing into one request, short enough that nobody waits for "saved".
const quietMs = 300;
const firstRetryMs = 1_000;
const lastRetryMs = 15_000;
// Who changes what somebody else changed a moment ago has probably not seen it.
const sameMomentMs = 30_000;
// The contract's limit for one request.
const editsPerRequest = 500;

const isFailure = (answer: object): answer is SaveFailure => 'kind' in answer;

/**
 * The open design on this screen: the server's document with this person's unsaved edits on top. Edits are kept in the
 * browser's storage until acknowledged and sent in order; two people's edits merge by property.
 */
export const openDesign = (options: Options): OpenDesign => {
  const { server, storage } = options;
  let base = options.document;
  let pending: readonly Edit[] = [];
  /** This tab's own edits of the last moment, acknowledged or not. */
  let recent: readonly (Edit & { readonly at: number })[] = [];
  let timer: ReturnType<typeof setTimeout> | undefined;
  let running: Promise<void> | undefined;
  let retryMs = firstRetryMs;
  let closed = false;

  const withPending = (): Design =>
    pending.reduce<Design>((document, edit) => applyPatch(document, edit.patch), base);
  /** The next document with the identity of all that stayed the same, so that screens redraw only what changed. */
  const shared = (before: Design, after: Design): Design => applyPatch(before, diffPatch(before, after));

  pending = storage.load();
  const recovered = withPending();
  if (changedProblems(base, recovered).length > 0) {
    // What a crashed tab left does not fit any more; the server would refuse it as well.
    storage.remove(pending.map((edit) => edit.editId));
    pending = [];
  }

  const store = createStore<OpenDesignState>(() => ({
    document: withPending(),
    editable: options.editable,
    sequence: options.sequence,
    save: pending.length > 0 ? { kind: 'saving' } : { kind: 'saved', at: options.now() },
    counts: undefined,
    history: emptyHistory,
    selection: [],
  }));
  const set = store.setState;
  const get = store.getState;

  const schedule = (ms: number): void => {
    if (closed) return;
    if (timer !== undefined) clearTimeout(timer);
    timer = setTimeout(() => void flush(), ms);
  };

  const takeIn = (patches: readonly LoggedPatch[], sequence: number): void => {
    const known = get().sequence;
    const fresh = patches.filter((logged) => logged.sequence > known);
    const acknowledged = new Set(fresh.map((logged) => logged.editId));
    storage.remove([...acknowledged]);
    recent = recent.filter(({ at }) => at > options.now() - sameMomentMs);
    const met = meetOthers({ document: base, fresh, recent, pending, history: get().history });
    for (const told of met.told) options.tell?.(told);
    base = fresh.reduce<Design>((document, logged) => applyPatch(document, logged.patch as MergePatch), base);
    pending = settled(
      pending.filter((edit) => !acknowledged.has(edit.editId)),
      fresh.map((logged) => logged.patch as MergePatch),
    );
    set((state) => ({
      sequence: Math.max(sequence, known),
      history: met.history,
      document: shared(state.document, withPending()),
    }));
    keepSelection();
  };

  /** The waiting edits on top of what others did meanwhile; see settlePatch. */
  const settled = (edits: readonly Edit[], concurrent: readonly MergePatch[]): readonly Edit[] => {
    let document = base;
    return edits.map((edit) => {
      const patch = settlePatch(document, edit.patch, concurrent);
      document = applyPatch(document, patch);
      if (patch === edit.patch) return edit;
      const replacement = { editId: edit.editId, patch };
      storage.add(replacement);
      return replacement;
    });
  };

  const keepSelection = (): void => {
    const { document, selection } = get();
    const alive = selection.filter((ref) => Object.hasOwn(document[ref.collection], ref.id));
    if (alive.length !== selection.length) set({ selection: alive });
  };

  const fail = (failure: SaveFailure): void => {
    const edits = pending.length;
    if (failure.kind === 'unreachable') {
      set({ save: { kind: 'offline', edits } });
      schedule(retryMs);
      retryMs = Math.min(retryMs * 2, lastRetryMs);
    } else if (failure.kind === 'signed-out') {
      set({ save: { kind: 'signed-out', edits } });
    } else {
      set({ save: { kind: 'refused', message: failure.message, problems: failure.problems, edits } });
    }
  };

  const sendAll = async (): Promise<void> => {
    while (pending.length > 0 && !closed) {
      set({ save: { kind: 'saving' } });
      const batch = pending.slice(0, editsPerRequest);
      const answer = await server.save(get().sequence, batch);
      if (isFailure(answer)) return fail(answer);
      retryMs = firstRetryMs;
      takeIn(answer.patches, answer.sequence);
      // An edit that changed nothing any more is acknowledged without a log entry of its own.
      const sent = new Set(batch.map((edit) => edit.editId));
      storage.remove([...sent]);
      pending = pending.filter((edit) => !sent.has(edit.editId));
      set({ counts: answer.counts });
    }
    if (!closed) set({ save: { kind: 'saved', at: options.now() } });
  };

  const flush = (): Promise<void> => {
    if (timer !== undefined) clearTimeout(timer);
    timer = undefined;
    if (running !== undefined) return running;
    if (pending.length === 0) return Promise.resolve();
    running = sendAll().finally(() => {
      running = undefined;
    });
    return running;
  };

  const enqueue = (patch: MergePatch): void => {
    const edit = { editId: options.newEditId(), patch };
    pending = [...pending, edit];
    recent = [...recent, { ...edit, at: options.now() }].slice(-editsPerRequest);
    storage.add(edit);
    const { save } = get();
    if (save.kind === 'offline') set({ save: { kind: 'offline', edits: pending.length } });
    else if (save.kind === 'signed-out') set({ save: { kind: 'signed-out', edits: pending.length } });
    else if (save.kind === 'refused') set({ save: { ...save, edits: pending.length } });
    else {
      set({ save: { kind: 'saving' } });
      schedule(quietMs);
    }
  };

  const travel = (way: typeof undo): string | undefined => {
    const { document, history, editable } = get();
    if (!editable) return undefined;
    const step = way(history, document);
    if (step === undefined) return undefined;
    const { takenOverBy, label } = step.step;
    if (takenOverBy !== undefined) {
      set({ history: step.history });
      options.tell?.({ kind: 'taken-over', label, by: takenOverBy });
      return undefined;
    }
    const after = applyPatch(document, step.patch);
    if (changedProblems(document, after).length > 0) {
      // Somebody else's edits left no room for it; it is dropped from the history rather than block what lies before.
      set({ history: step.history });
      return undefined;
    }
    const patch = joinPatches(document, [step.patch, danglingPatch(after)]);
    set({ document: applyPatch(document, patch), history: step.history });
    keepSelection();
    if (!isEmptyPatch(patch)) enqueue(patch);
    return step.step.label;
  };

  if (pending.length > 0) schedule(0);

  return {
    store,
    commit: (label, patch) => {
      const { document, history, editable } = get();
      if (!editable)
        return {
          ok: false,
          problems: [{ path: '', value: '', expected: 'a role that may edit this design' }],
        };
      const touched = applyPatch(document, patch);
      const problems = changedProblems(document, touched);
      if (problems.length > 0) return { ok: false, problems };
      const whole = joinPatches(document, [patch, danglingPatch(touched)]);
      if (isEmptyPatch(whole)) return { ok: true };
      set({ document: applyPatch(document, whole), history: record(history, document, label, whole) });
      keepSelection();
      enqueue(whole);
      return { ok: true };
    },
    undo: () => travel(undo),
    redo: () => travel(redo),
    select: (selection) => set({ selection }),
    flush,
    catchUp: async () => {
      if (pending.length > 0) return flush();
      const answer = await server.patchesAfter(get().sequence);
      if (!isFailure(answer)) takeIn(answer.patches, answer.sequence);
      else if (answer.kind === 'signed-out') set({ save: { kind: 'signed-out', edits: 0 } });
    },
    discardRefused: () => {
      storage.remove(pending.map((edit) => edit.editId));
      pending = [];
      set((state) => ({
        document: shared(state.document, base),
        history: emptyHistory,
        save: { kind: 'saved', at: options.now() },
      }));
      keepSelection();
    },
    setEditable: (editable) => set({ editable }),
    close: () => {
      closed = true;
      if (timer !== undefined) clearTimeout(timer);
    },
  };
};
