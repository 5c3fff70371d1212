import type { MergePatch } from '#engine/model/merge-patch.ts';
import { segmentCouldBeRouted } from '#engine/rules/segment-could-be-routed.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const subnets = (s0: readonly string[], s1: readonly string[]): MergePatch => ({
  segments: { a: { sites: { s0: { subnets: [...s0] }, s1: { subnets: [...s1] } } } },
});
const apart = subnets(['10.110.0.0/24'], ['10.110.1.0/24', '2001:db8:1::/64']);

testRule(segmentCouldBeRouted, {
  accepted: {
    'one subnet at all sites': pairDesign(),
    'subnets that overlap': changed(pairDesign(), subnets(['10.110.0.0/16'], ['10.110.1.0/24'])),
    'subnets that are not known': changed(pairDesign(), subnets(['10.110.0.0/24'], [])),
    'a segment that needs more than IP': changed(pairDesign(), apart, {
      segments: { a: { protocols: ['ipv4', 'multicast'] } },
    }),
    'a segment of which nobody says what it needs': changed(pairDesign(), apart, {
      segments: { a: { protocols: null } },
    }),
    'a segment that no tunnel carries': changed(pairDesign(), apart, {
      forwarders: {
        'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
        'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
      },
    }),
  },
  rejected: {
    'other subnets at each site, and nothing but IP': {
      design: changed(pairDesign(), apart, { segments: { a: { protocols: ['ipv4', 'ipv6', 'dhcp'] } } }),
      findings: [
        {
          sentence: 'Segment A has other subnets at each site and could be routed',
          words: 'could be routed',
          severity: 'advisory',
          elements: ['segments/a'],
          fixes: [],
        },
      ],
    },
  },
});
