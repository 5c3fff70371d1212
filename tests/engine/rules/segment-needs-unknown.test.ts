import { segmentNeedsUnknown } from '#engine/rules/segment-needs-unknown.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const two = pairDesign({ segments: ['a', 'b'] });
const silent = { ports: { p1: { mtu: null } } };

testRule(segmentNeedsUnknown, {
  accepted: {
    'segments that say what they need': two,
    'one whose hosts say how long packets get': changed(two, { segments: { a: { mtu: null } } }),
    'one that no tunnel carries': changed(two, {
      segments: { a: { protocols: null } },
      forwarders: {
        'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
        'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
      },
    }),
  },
  rejected: {
    'protocols of one and packet sizes of another, as one finding': {
      design: changed(two, {
        segments: { a: { protocols: [] }, b: { mtu: null } },
        devices: { 'h-s0-b': silent, 'h-s1-b': silent },
      }),
      findings: [
        {
          sentence: 'What Segment A and Segment B must carry is not stated',
          words: 'needs not stated',
          severity: 'advisory',
          elements: ['segments/a', 'segments/b'],
          properties: ['segments/a: protocols', 'segments/b: mtu'],
          fixes: [],
        },
      ],
    },
  },
});
