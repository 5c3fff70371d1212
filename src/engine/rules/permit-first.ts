import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankBetween } from '../model/rank.ts';
import type { PolicyRule } from './protocol-frames.ts';
import { unusedId } from './unused-id.ts';

type Policy = { readonly [id: string]: PolicyRule } | undefined;
/** A rule without its place. */
export type NewRule = Partial<PolicyRule> & Pick<PolicyRule, 'frames'> & { readonly name: string };

/** Puts permitting rules for both directions before all others of a policy. */
export const permitFirst = (policy: Policy, rules: readonly NewRule[]): MergePatch => {
  const first = inRankOrder(policy)[0]?.[1].rank;
  const taken: { [id: string]: MergePatch } = {};
  let before: string | undefined;
  for (const rule of rules) {
    before = rankBetween(before, first);
    const stem = rule.name.toLowerCase().replaceAll(/[^a-z0-9]+/g, '-');
    const id = unusedId({ ...policy, ...taken }, `permit-${stem}`);
    taken[id] = { ...rule, rank: before, action: 'permit', direction: 'both' } as unknown as MergePatch;
  }
  return taken;
};
