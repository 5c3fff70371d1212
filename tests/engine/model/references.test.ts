import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Collection } from '#engine/model/design.ts';
import { collections } from '#engine/model/design.ts';
import { applyPatch, patchAt } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { danglingPatch, listReferences, resolves } from '#engine/model/references.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';

const design = hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] });

describe('references between entries', () => {
  it('all lead somewhere in a design that the builder made', () => {
    const references = listReferences(design);
    expect(references.length).toBeGreaterThan(100);
    expect(references.every((reference) => resolves(design, reference))).toBe(true);
  });

  it('leave nothing to remove in a sound design', () => {
    expect(danglingPatch(design)).toEqual({});
  });

  it('take a tunnel, its circuits and a landing along with a vanished device', () => {
    const after = applyPatch(pairDesign(), patchAt(['devices', 'fw-s1'], null));
    const repaired = applyPatch(after, danglingPatch(after));
    expect(repaired.tunnels).toEqual({});
    expect(repaired.associations).toEqual({});
    expect(Object.keys(repaired.endpoints)).toEqual(['lo-s0']);
    expect(Object.keys(repaired.forwarders)).toEqual(['br-s0-a']);
    expect(Object.keys(repaired.forwarders['br-s0-a']!.circuits)).toEqual(['access']);
    expect(Object.keys(repaired.links).filter((id) => id.includes('s1'))).toEqual(['cb-h-s1-a']);
  });

  it('let an optional reference go alone: a tunnel outlives its association', () => {
    const after = applyPatch(pairDesign(), patchAt(['associations', 'as-s0-s1'], null));
    expect(danglingPatch(after)).toEqual({ tunnels: { 'tn-s0-s1-a': { association: null } } });
  });

  it('never leave an invalid design, whatever entries vanish', () => {
    const entry = fc.constantFrom(
      ...collections.flatMap((c) => Object.keys(design[c]).map((id): [Collection, string] => [c, id])),
    );
    fc.assert(
      fc.property(fc.array(entry, { minLength: 1, maxLength: 6 }), (gone) => {
        const after = gone.reduce(
          (d, [collection, id]) => applyPatch(d, patchAt([collection, id], null)),
          design,
        );
        const parsed = parseDesign(applyPatch(after, danglingPatch(after)));
        expect(parsed.ok).toBe(true);
      }),
    );
  });
});
