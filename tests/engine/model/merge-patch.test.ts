import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import {
  applyPatch,
  diffPatch,
  inversePatch,
  joinPatches,
  patchAt,
  sameJson,
} from '#engine/model/merge-patch.ts';
import { cases } from '../../reference/rfc7396-merge-patch-cases.ts';

const freeze = <T>(value: T): T => {
  if (typeof value === 'object' && value !== null) {
    Object.values(value).forEach(freeze);
    Object.freeze(value);
  }
  return value;
};

const key = fc.constantFrom('a', 'b', 'c', '__proto__', 'constructor');
/** Documents hold no null, as designs don't. */
const { document } = fc.letrec<{ value: unknown; document: object }>((tie) => ({
  value: fc.oneof(
    { maxDepth: 4 },
    fc.integer({ min: 0, max: 3 }),
    fc.constantFrom('x', 'y'),
    fc.array(fc.integer({ min: 0, max: 2 }), { maxLength: 2 }),
    tie('document'),
  ),
  document: fc.dictionary(key, tie('value'), { maxKeys: 4, noNullPrototype: true }),
}));
const { patch } = fc.letrec<{ change: unknown; patch: MergePatch }>((tie) => ({
  change: fc.oneof(
    { maxDepth: 4 },
    fc.constant(null),
    fc.integer({ min: 0, max: 3 }),
    fc.array(fc.constant(1), { maxLength: 2 }),
    tie('patch'),
  ),
  patch: fc.dictionary(key, tie('change'), { maxKeys: 4, noNullPrototype: true }) as fc.Arbitrary<MergePatch>,
}));

/** The pseudocode of RFC 7396 section 2, as plainly as it can be written; documents as Maps so that no key is special. */
type Plain = Map<string, unknown>;
const toMap = (value: unknown): unknown =>
  typeof value === 'object' && value !== null && !Array.isArray(value)
    ? new Map(Object.entries(value).map(([k, v]) => [k, toMap(v)]))
    : value;
const twin = (target: unknown, change: unknown): unknown => {
  if (!(change instanceof Map)) return change;
  const result: Plain = target instanceof Map ? new Map(target) : new Map();
  for (const [k, v] of change) {
    if (v === null) result.delete(k);
    else result.set(k, twin(result.get(k), v));
  }
  return result;
};

describe('a merge patch', () => {
  it.each(cases)('turns %j with %j into %j', (original, change, result) => {
    expect(applyPatch(original, change as MergePatch)).toEqual(result);
  });

  it('agrees with the pseudocode of RFC 7396 for any document and patch', () => {
    fc.assert(
      fc.property(document, patch, (doc, change) => {
        expect(toMap(applyPatch(freeze(doc), freeze(change)))).toEqual(twin(toMap(doc), toMap(change)));
      }),
    );
  });

  it('never touches a prototype', () => {
    const change = JSON.parse(
      '{"__proto__":{"polluted":true},"constructor":{"prototype":{"polluted":true}}}',
    ) as MergePatch;
    applyPatch({}, change);
    expect(({} as { polluted?: boolean }).polluted).toBeUndefined();
  });

  it('keeps the identity of what it does not change', () => {
    const doc = { left: { x: 1 }, right: { y: { z: 2 } } };
    const next = applyPatch(doc, { left: { x: 2 } });
    expect(next.right).toBe(doc.right);
    expect(applyPatch(doc, { left: { x: 1 }, none: null })).toBe(doc);
  });

  it('is taken back by its inverse', () => {
    fc.assert(
      fc.property(document, patch, (doc, change) => {
        const after = applyPatch(doc, change);
        expect(sameJson(applyPatch(after, inversePatch(doc, change)), doc)).toBe(true);
      }),
    );
  });

  it('is found again as the difference of two documents', () => {
    fc.assert(
      fc.property(document, document, (before, after) => {
        expect(sameJson(applyPatch(before, diffPatch(before, after)), after)).toBe(true);
      }),
    );
  });

  it('joins with others into one that does the same', () => {
    fc.assert(
      fc.property(document, fc.array(patch, { maxLength: 3 }), (doc, changes) => {
        const oneByOne = changes.reduce<object>(applyPatch, doc);
        fc.pre(!JSON.stringify(oneByOne).includes('null'));
        expect(sameJson(applyPatch(doc, joinPatches(doc, changes)), oneByOne)).toBe(true);
      }),
    );
  });

  it('can be written for one place', () => {
    expect(patchAt(['tunnels', 't', 'a', 'vni'], 7)).toEqual({ tunnels: { t: { a: { vni: 7 } } } });
    expect(patchAt(['tunnels', 't'], undefined)).toEqual({ tunnels: { t: null } });
  });
});
