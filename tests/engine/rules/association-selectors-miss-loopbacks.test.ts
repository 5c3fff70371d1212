import { associationSelectorsMissLoopbacks } from '#engine/rules/association-selectors-miss-loopbacks.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const selectorAtHead = (patch: Record<string, string | number>) => ({
  associations: { [id]: { a: { selectors: { loopbacks: patch } } } },
});

testRule(associationSelectorsMissLoopbacks, {
  accepted: {
    'selectors for exactly the endpoints': pairDesign(),
    'selectors for a range around them': changed(pairDesign(), selectorAtHead({ local: '10.255.0.0/24' })),
    'selectors for VXLAN alone': changed(pairDesign(), selectorAtHead({ udpPort: 4789 })),
    'an end whose selectors are not known': changed(pairDesign(), {
      associations: { [id]: { a: { selectors: null } } },
    }),
    'endpoints that share an address, which is the cause': changed(pairDesign(), {
      endpoints: { 'lo-s1': { ipv4: '10.255.0.1/32' } },
    }),
    'a tunnel that ends on another device, which is the cause': changed(hubDesign(2), {
      tunnels: { 'tn-s0-s2-a': { association: id } },
    }),
    'an endpoint inside a segment, which is the cause': changed(pairDesign(), {
      endpoints: { 'lo-s1': { ipv4: '10.110.7.7/32' } },
    }),
  },
  rejected: {
    'selectors that leave out an endpoint at one end': {
      design: changed(pairDesign(), selectorAtHead({ local: '10.99.0.0/24' })),
      findings: [
        {
          sentence: 'Selectors at Head office leave out 10.255.0.1 to 10.255.0.2',
          words: 'selectors miss endpoints',
          severity: 'blocking',
          elements: [`associations/${id}`, 'tunnels/tn-s0-s1-a'],
          properties: [`associations/${id}: a.selectors`],
          fixes: ['Add the endpoints'],
        },
      ],
    },
    'selectors for another UDP port': {
      design: changed(pairDesign(), selectorAtHead({ udpPort: 500 })),
      findings: [
        {
          sentence: 'Selectors at Head office leave out 10.255.0.1 to 10.255.0.2',
          fixes: ['Add the endpoints'],
        },
      ],
    },
    'an endpoint that moved, at both ends and for two tunnels as one fault': {
      design: changed(pairDesign({ segments: ['a', 'b'] }), {
        endpoints: { 'lo-s1': { ipv4: '10.255.0.77/32' } },
      }),
      findings: [
        {
          sentence: 'Selectors at both ends leave out 10.255.0.1 to 10.255.0.77',
          elements: [`associations/${id}`, 'tunnels/tn-s0-s1-a', 'tunnels/tn-s0-s1-b'],
          fixes: ['Add the endpoints'],
        },
      ],
    },
  },
});
