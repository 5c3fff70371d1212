import { inRankOrder } from '../model/rank.ts';
import type { Association, End } from '../network/network.ts';

/** The key-exchange groups that an end proposes for its child keys, in its order. */
export const childGroups = (association: Association, end: End): readonly number[] => [
  ...new Set(
    inRankOrder(association[end].espProposals).flatMap(([, { group }]) =>
      group === undefined ? [] : [group],
    ),
  ),
];

/** Whether an end makes each new child key by an exchange of its own: as it says, or by a group in its proposals; undefined where neither tells. */
export const hasForwardSecrecy = (association: Association, end: End): boolean | undefined =>
  association[end].perfectForwardSecrecy ?? (childGroups(association, end).length > 0 ? true : undefined);
