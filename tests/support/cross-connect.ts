import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { firstRanks } from '#engine/model/rank.ts';
import { pairDesign } from './designs.ts';
import { changed } from './rule-tester.ts';

/** A permission for both ways, unless the rule says otherwise. */
export const permit = (rule: object): MergePatch =>
  ({ action: 'permit', direction: 'both', ...rule }) as MergePatch;
export const logTheRest = { action: 'deny', direction: 'both', frames: 'any', log: true } as const;

/** Two sites of which the second filters segment A by these rules, in this order. */
export const filtered = (
  rules: readonly MergePatch[],
  segment: MergePatch = {},
  more: MergePatch = {},
): Design => {
  const ranks = firstRanks(rules.length);
  return changed(
    pairDesign(),
    {
      forwarders: {
        'br-s1-a': {
          kind: 'cross-connect',
          policy: Object.fromEntries(
            rules.map((rule, i) => [`r${i + 1}`, { ...(rule as object), rank: ranks[i]! }]),
          ),
        },
      },
      segments: { a: segment },
    },
    more,
  );
};
