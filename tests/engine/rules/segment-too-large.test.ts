import { segmentTooLarge } from '#engine/rules/segment-too-large.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const hosts = (hostsExpected: number) => ({ segments: { a: { hostsExpected } } });

testRule(segmentTooLarge, {
  accepted: {
    'a segment of which nobody says how large it gets': pairDesign(),
    'a thousand hosts': changed(pairDesign(), hosts(1000)),
    'more, but in a segment that no tunnel carries': changed(pairDesign(), hosts(5000), {
      forwarders: {
        'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
        'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
      },
    }),
  },
  rejected: {
    'more than a thousand hosts': {
      design: changed(pairDesign(), hosts(1001)),
      findings: [
        {
          sentence: 'Segment A joins 1001 hosts in one broadcast domain',
          words: 'many hosts',
          severity: 'advisory',
          elements: ['segments/a'],
          properties: ['segments/a: hostsExpected'],
          fixes: [],
        },
      ],
    },
  },
});
