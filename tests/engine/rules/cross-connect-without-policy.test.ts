import { describe, expect, it } from 'vitest';
import { indexNetwork } from '#engine/network/index-network.ts';
import { crossConnectWithoutPolicy } from '#engine/rules/cross-connect-without-policy.ts';
import { firstPolicy } from '#engine/rules/first-policy.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const crossConnect = (policy: Record<string, object>) =>
  changed(pairDesign(), {
    forwarders: { 'br-s0-a': { kind: 'cross-connect', policy: policy as never } },
  });
const permit = { rank: 'a0', action: 'permit', direction: 'both', frames: 'arp' };
const deny = { rank: 'a1', action: 'deny', direction: 'both', frames: 'any', log: true };

testRule(crossConnectWithoutPolicy, {
  accepted: {
    'a bridge, which filters nothing': pairDesign(),
    'a policy that permits something': crossConnect({ permit, deny }),
  },
  rejected: {
    'a cross-connect without a policy': {
      design: crossConnect({}),
      findings: [
        {
          sentence: 'br-110 at Head office has no policy: nothing passes',
          words: 'no policy',
          severity: 'blocking',
          elements: ['forwarders/br-s0-a'],
          properties: ['forwarders/br-s0-a: policy'],
          fixes: ['Write a first policy'],
        },
      ],
    },
    'a policy that only denies': {
      design: crossConnect({ deny }),
      findings: [
        {
          sentence: 'The policy of br-110 at Head office permits nothing',
          words: 'nothing permitted',
          fixes: ['Write a first policy'],
        },
      ],
    },
  },
});

describe('firstPolicy', () => {
  const design = changed(pairDesign(), {
    segments: {
      a: {
        protocols: ['ipv4', 'ipv6', 'ospf'],
        sites: { s0: { subnets: ['10.110.0.0/16', '2001:db8:110::/64'] } },
      },
    },
  });

  it('permits what the segment needs between its own subnets, and denies and logs the rest last', () => {
    const rules = Object.values(firstPolicy(indexNetwork(design).design, ['a'])) as unknown as readonly {
      readonly rank: string;
      readonly action: string;
      readonly frames: string;
      readonly sources?: readonly string[];
      readonly log?: boolean;
    }[];
    expect(rules.map(({ action, frames, sources }) => [action, frames, sources ?? []])).toEqual([
      ['permit', 'arp', []],
      ['permit', 'ipv4', ['10.110.0.0/16']],
      ['permit', 'ipv6', []],
      ['permit', 'ipv6', ['2001:db8:110::/64']],
      ['permit', 'multicast', []],
      ['deny', 'any', []],
    ]);
    expect(rules.map(({ rank }) => rank)).toEqual(rules.map(({ rank }) => rank).sort());
    expect(rules.at(-1)!.log).toBe(true);
  });

  it('permits all IPv4 where no subnet is known', () => {
    expect(firstPolicy(indexNetwork(pairDesign()).design, [])).toMatchObject({
      ipv4: { action: 'permit', frames: 'ipv4' },
    });
    expect(firstPolicy(indexNetwork(pairDesign()).design, [])).not.toHaveProperty('ipv4.sources');
  });
});
