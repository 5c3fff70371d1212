import { endpointInsideSegment } from '#engine/rules/endpoint-inside-segment.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const inside = { endpoints: { 'lo-s1': { ipv4: '10.110.3.3/32' } } };

testRule(endpointInsideSegment, {
  accepted: { 'endpoints in a range of their own': pairDesign() },
  rejected: {
    'an endpoint with an address of the segment': {
      design: changed(pairDesign(), inside),
      findings: [
        {
          sentence: 'lo-s1 has 10.110.3.3, inside 10.110.0.0/16 of Segment A',
          words: 'inside a segment',
          severity: 'blocking',
          elements: ['endpoints/lo-s1', 'segments/a'],
          properties: ['endpoints/lo-s1: ipv4'],
          fixes: ['Set lo-s1 to 10.255.0.2'],
        },
      ],
    },
    'the same with selectors that name it too': {
      design: changed(pairDesign(), inside, {
        associations: {
          'as-s0-s1': {
            a: { selectors: { loopbacks: { remote: '10.110.3.3/32' } } },
            b: { selectors: { loopbacks: { local: '10.110.3.3/32' } } },
          },
        },
      }),
      findings: [
        {
          sentence: 'lo-s1 has 10.110.3.3, inside 10.110.0.0/16 of Segment A',
          fixes: ['Set lo-s1 to 10.255.0.2'],
        },
      ],
    },
    'all endpoints inside, with nothing known to move to': {
      design: changed(pairDesign(), inside, {
        endpoints: { 'lo-s0': { ipv4: '10.110.3.4/32' } },
        associations: { 'as-s0-s1': { a: { selectors: null }, b: { selectors: null } } },
      }),
      findings: [
        { sentence: 'lo-s0 has 10.110.3.4, inside 10.110.0.0/16 of Segment A', fixes: [] },
        { sentence: 'lo-s1 has 10.110.3.3, inside 10.110.0.0/16 of Segment A', fixes: [] },
      ],
    },
  },
});
