import type { MergePatch } from '#engine/model/merge-patch.ts';
import { segmentIpv6BelowMinimum } from '#engine/rules/segment-ipv6-below-minimum.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const six = (mtu: number): MergePatch => ({ segments: { a: { protocols: ['ipv4', 'ipv6'], mtu } } });
const narrow = (kind: 'internet' | 'own-routed'): MergePatch => ({
  transports: { coast: { mtu: 1380, kind, trusted: kind === 'own-routed' } },
});

testRule(segmentIpv6BelowMinimum, {
  accepted: {
    'IPv6 at its least': changed(pairDesign(), six(1280)),
    'a small segment without IPv6': changed(pairDesign(), { segments: { a: { mtu: 1200 } } }),
    'packets that don’t fit anyway, which is another rule’s': changed(
      pairDesign(),
      six(1300),
      narrow('internet'),
    ),
  },
  rejected: {
    'a segment that commits to less, though more would fit': {
      design: changed(pairDesign(), six(1200)),
      findings: [
        {
          sentence: 'IPv6 of segment A has 1200 bytes, 1280 are the least',
          words: 'below IPv6 minimum',
          severity: 'blocking',
          elements: ['segments/a'],
          properties: ['segments/a: mtu', 'segments/a: protocols'],
          fixes: ['Raise Segment A to 1280'],
        },
      ],
    },
    'tunnels that take less, over a transport of another’s': {
      design: changed(pairDesign(), six(1276), narrow('internet')),
      findings: [{ sentence: 'IPv6 of segment A has 1276 bytes, 1280 are the least', fixes: [] }],
    },
    'tunnels that take less, over a transport of one’s own': {
      design: changed(pairDesign(), narrow('own-routed'), {
        segments: { a: { mtu: 1276, sites: { s0: { subnets: ['10.110.0.0/16', '2001:db8:110::/64'] } } } },
      }),
      findings: [
        {
          sentence: 'IPv6 of segment A has 1276 bytes, 1280 are the least',
          fixes: ['Raise Coastal access to 1384'],
        },
      ],
    },
  },
});
