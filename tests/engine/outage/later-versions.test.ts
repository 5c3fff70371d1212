import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { everySingleFailure } from '#engine/outage/every-single-failure.ts';
import { smallestSegmentCuts } from '#engine/outage/smallest-segment-cuts.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { generatedEdit } from '../../support/generated-edits.ts';

const fresh = (design: Design): Design => {
  const parsed = parseDesign(structuredClone(design));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems));
  return parsed.value;
};

const outages = (design: Design): unknown => ({
  failures: everySingleFailure(design),
  cuts: smallestSegmentCuts(design),
});

describe('what fails in a version of a design', () => {
  it('does not depend on the versions before or after it that were indexed', { timeout: 120_000 }, () => {
    fc.assert(
      fc.property(
        generatedDesign,
        fc.array(generatedEdit, { minLength: 10, maxLength: 10 }),
        (start, edits) => {
          const versions = [start];
          indexNetwork(start);
          for (const edit of edits) {
            versions.push(edit(versions.at(-1)!));
            indexNetwork(versions.at(-1)!);
          }
          for (const version of [versions[10]!, versions[5]!])
            expect(outages(version)).toEqual(outages(fresh(version)));
        },
      ),
      { numRuns: 40, endOnFailure: true },
    );
  });
});
