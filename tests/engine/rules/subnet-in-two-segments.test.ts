import { subnetInTwoSegments } from '#engine/rules/subnet-in-two-segments.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const subnets = (a: readonly string[], b: readonly string[]) =>
  changed(pairDesign({ segments: ['a', 'b'] }), {
    segments: {
      a: { sites: { s0: { subnets: a as string[] }, s1: { subnets: a as string[] } } },
      b: { sites: { s0: { subnets: null }, s1: { subnets: b as string[] } } },
    },
  });

testRule(subnetInTwoSegments, {
  accepted: {
    'segments apart, each with one subnet at two sites': pairDesign({ segments: ['a', 'b'] }),
    'neighbouring subnets of both families': subnets(
      ['10.110.0.0/17', '2001:db8:0:1::/64'],
      ['10.110.128.0/17', '2001:db8:0:2::/64'],
    ),
    'no subnets at all': subnets([], []),
  },
  rejected: {
    'one subnet in two segments': {
      design: subnets(['10.110.0.0/16'], ['10.110.0.0/16']),
      findings: [
        {
          sentence: 'Segments A and B both have 10.110.0.0/16',
          words: 'subnets overlap',
          severity: 'degrading',
          elements: ['segments/a', 'segments/b'],
          properties: [
            'segments/a: sites.s0.subnets',
            'segments/a: sites.s1.subnets',
            'segments/b: sites.s1.subnets',
          ],
          fixes: [],
        },
      ],
    },
    'a subnet inside another segment’s, written with its host part': {
      design: subnets(['10.110.4.9/24'], ['10.0.0.0/8']),
      findings: [{ sentence: '10.110.4.9/24 of segment A overlaps 10.0.0.0/8 of B', fixes: [] }],
    },
    'everything inside the default prefix': {
      design: subnets(['2001:db8::/32'], ['::/0']),
      findings: [{ sentence: '2001:db8::/32 of segment A overlaps ::/0 of B', fixes: [] }],
    },
  },
});
