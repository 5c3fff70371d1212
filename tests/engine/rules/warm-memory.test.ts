import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { collections } from '#engine/model/design.ts';
import type { Design } from '#engine/model/design.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { generatedEdit } from '../../support/generated-edits.ts';

/** A design of which nothing is in any memory. */
const fresh = (design: Design): Design => {
  const parsed = parseDesign(structuredClone(design));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems));
  return parsed.value;
};

describe('what earlier versions of a design left in memory', () => {
  it('never changes what is found after a chain of edits', { timeout: 240_000 }, () => {
    const edited = new Set<string>();
    fc.assert(
      fc.property(
        generatedDesign,
        fc.array(fc.record({ edit: generatedEdit, isChecked: fc.boolean() }), {
          minLength: 10,
          maxLength: 10,
        }),
        (start, edits) => {
          let design = start;
          runRules(design);
          for (const { edit, isChecked } of edits) {
            const next = edit(design);
            for (const collection of collections)
              if (next[collection] !== design[collection]) edited.add(collection);
            design = next;
            if (isChecked) expect(runRules(design)).toEqual(runRules(fresh(design)));
          }
          expect(runRules(design)).toEqual(runRules(fresh(design)));
        },
      ),
      { numRuns: 60, endOnFailure: true },
    );
    expect([...edited].sort()).toEqual([...collections].sort());
  });
});
