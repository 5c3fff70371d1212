import { bridgeWhereFilterRequired } from '#engine/rules/bridge-where-filter-required.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const filtered = { segments: { a: { mustBeFiltered: true } } };
const policy = { all: { rank: 'a0', action: 'permit', direction: 'both', frames: 'any' } } as const;

testRule(bridgeWhereFilterRequired, {
  accepted: {
    'a segment that need not be filtered': pairDesign(),
    'a cross-connect with a policy at one end': changed(pairDesign(), filtered, {
      forwarders: { 'br-s1-a': { kind: 'cross-connect', policy } },
    }),
    'another segment on a bridge': changed(pairDesign({ segments: ['a', 'b'] }), filtered, {
      forwarders: { 'br-s1-a': { kind: 'cross-connect', policy } },
    }),
    'a tunnel whose far end leads the segment nowhere': changed(pairDesign(), filtered, {
      forwarders: { 'br-s1-a': { circuits: { 'tn-s0-s1-a': null } } },
    }),
  },
  rejected: {
    'bridges at both ends': {
      design: changed(pairDesign(), filtered),
      findings: [
        {
          sentence: 'Segment A must be filtered, but tn-s0-s1-a bridges it',
          words: 'not filtered',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s1-a', 'segments/a', 'forwarders/br-s0-a', 'forwarders/br-s1-a'],
          properties: ['segments/a: mustBeFiltered', 'forwarders/br-s0-a: kind', 'forwarders/br-s1-a: kind'],
          fixes: ['Filter at Head office', 'Filter at Gullhaven'],
        },
      ],
    },
    'a hub that only passes the segment on between its tunnels': {
      design: changed(hubDesign(2), filtered, {
        forwarders: {
          'br-s0-a': { circuits: { access: null } },
          'br-s2-a': { kind: 'cross-connect', policy },
        },
      }),
      findings: [
        {
          sentence: 'Segment A must be filtered, but tn-s0-s1-a bridges it',
          fixes: ['Filter at Gullhaven'],
        },
      ],
    },
    'a hub, which can be filtered only at its spokes': {
      design: changed(hubDesign(2), filtered),
      findings: [
        {
          sentence: 'Segment A must be filtered, but tn-s0-s1-a bridges it',
          fixes: ['Filter at Gullhaven'],
        },
        {
          sentence: 'Segment A must be filtered, but tn-s0-s2-a bridges it',
          fixes: ['Filter at Orrin Point'],
        },
      ],
    },
  },
});
