import { randomUUID } from 'node:crypto';
import type { Design } from '#engine/model/design.ts';
import { collections } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, isEmptyPatch } from '#engine/model/merge-patch.ts';
import type { Problem } from '#engine/model/parse-design.ts';
import { changedProblems, referenceProblems } from '#engine/model/parse-design.ts';
import { danglingPatch } from '#engine/model/references.ts';
import { settlePatch } from '#engine/model/settle-patch.ts';
import { limits } from './limits.ts';

export interface Edit {
  readonly editId: string;
  readonly patch: MergePatch;
}
export interface SettledEdit extends Edit {
  readonly repair: boolean;
}

export type Settled =
  | { readonly ok: true; readonly document: Design; readonly edits: readonly SettledEdit[] }
  | { readonly ok: false; readonly problems: readonly Problem[]; readonly reason: 'invalid' | 'too-large' };

/**
 * The document after edits that were made on an older state of it. `since` are the patches that others logged meanwhile.
 * Edits merge by property, the later one standing. Where an edit changes inside what somebody removed meanwhile, the removal
 * stands (settlePatch). What then names something that is gone is removed by one repair. All edits are taken or none.
 */
export function settleEdits(before: Design, edits: readonly Edit[], since: readonly MergePatch[]): Settled {
  let document = before;
  const settled: SettledEdit[] = [];
  for (const { editId, patch } of edits) {
    const reserved = reservedKeyIn(patch, []);
    if (reserved !== null) return { ok: false, reason: 'invalid', problems: [reserved] };
    const kept = settlePatch(document, patch, since);
    const next = applyPatch(document, kept);
    const problems = changedProblems(document, next);
    if (problems.length > 0) return { ok: false, reason: 'invalid', problems };
    document = next;
    settled.push({ editId, patch: kept, repair: false });
  }
  const tooLarge = sizeProblem(document);
  if (tooLarge !== null) return { ok: false, reason: 'too-large', problems: [tooLarge] };
  const repair = danglingPatch(document);
  if (!isEmptyPatch(repair)) {
    const repaired = applyPatch(document, repair);
    const problems = changedProblems(document, repaired);
    if (problems.length > 0) return { ok: false, reason: 'invalid', problems };
    document = repaired;
    settled.push({ editId: randomUUID(), patch: repair, repair: true });
  }
  const problems = referenceProblems(document);
  if (problems.length > 0) return { ok: false, reason: 'invalid', problems };
  return { ok: true, document, edits: settled };
}

/** Why a design is too large to be kept, or null. */
export function sizeProblem(document: Design): Problem | null {
  const entries = countEntries(document);
  if (entries > limits.designEntries) {
    return {
      path: '',
      value: `${entries} entries`,
      expected: `expected at most ${limits.designEntries} entries in one design; split it`,
    };
  }
  const bytes = Buffer.byteLength(JSON.stringify(document));
  if (bytes > limits.designBytes) {
    return {
      path: '',
      value: `${bytes} bytes`,
      expected: `expected at most ${limits.designBytes} bytes of JSON in one design; split it`,
    };
  }
  return null;
}

/** How many sites, devices, cables and so on a design has. */
export function countEntries(document: Design): number {
  return collections.reduce((sum, collection) => sum + Object.keys(document[collection]).length, 0);
}

const reservedKeys: ReadonlySet<string> = new Set(['__proto__', 'constructor', 'prototype']);

// Such a key confuses code that treats a record as a plain object, and a schema of records passes over __proto__.
function reservedKeyIn(value: unknown, path: readonly string[]): Problem | null {
  if (typeof value !== 'object' || value === null) return null;
  for (const [key, inner] of Object.entries(value)) {
    if (reservedKeys.has(key)) {
      return { path: [...path, key].join('.'), value: key, expected: 'expected a name that is not reserved' };
    }
    const found = reservedKeyIn(inner, [...path, key]);
    if (found !== null) return found;
  }
  return null;
}
