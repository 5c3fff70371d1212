import { landingInsideSegment } from '#engine/rules/landing-inside-segment.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

testRule(landingInsideSegment, {
  accepted: { 'outside addresses beyond every segment': pairDesign() },
  rejected: {
    'an outside address inside a segment’s subnet': {
      design: changed(pairDesign(), {
        transports: { coast: { kind: 'private-routed' } },
        links: { 'ld-s1-coast': { ipv4: '10.110.9.9' } },
      }),
      findings: [
        {
          sentence: 'Outside address 10.110.9.9 at Gullhaven lies in segment A',
          words: 'inside a segment',
          severity: 'blocking',
          elements: ['links/ld-s1-coast', 'segments/a'],
          properties: ['links/ld-s1-coast: ipv4'],
          fixes: [],
        },
      ],
    },
  },
});
