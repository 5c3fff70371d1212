import type { Design, Entry } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { applyPatch } from '../model/merge-patch.ts';
import { firstPolicy } from '../rules/first-policy.ts';
import { permitFirst } from '../rules/permit-first.ts';

type Policy = NonNullable<Entry<'forwarders'>['policy']>;

const hex = (etherType: number): string => `0x${etherType.toString(16).padStart(4, '0')}`;

/**
 * A cross-connect's policy that passes what a segment's protocols need between its subnets, and denies and logs the rest.
 * EtherTypes of real-time protocols are the form's, since the protocol's name alone doesn't tell them.
 */
export const crossConnectPolicy = (design: Design, segment: Id, etherTypes: readonly number[]): Policy => {
  const policy = firstPolicy(design, [segment]) as unknown as Policy;
  const more = permitFirst(
    policy,
    etherTypes.map((ethertype) => ({
      name: `Real-time Ethernet ${hex(ethertype)}`,
      frames: 'ethertype' as const,
      ethertype,
    })),
  );
  return applyPatch(policy, more);
};
