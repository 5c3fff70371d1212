import { crossConnectCircuits } from '#engine/rules/cross-connect-circuits.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const policy = {
  all: { rank: 'a0', action: 'permit', direction: 'both', frames: 'any' },
} as const;
const crossConnect = (id: string) => ({ forwarders: { [id]: { kind: 'cross-connect', policy } } });

testRule(crossConnectCircuits, {
  accepted: {
    'one port and one tunnel': changed(pairDesign(), crossConnect('br-s0-a')),
    'a bridge of any number': hubDesign(3),
  },
  rejected: {
    'one port and two tunnels': {
      design: changed(hubDesign(2), crossConnect('br-s0-a')),
      findings: [
        {
          sentence: 'br-110 at Head office joins one port and two tunnels',
          words: 'not one-to-one',
          severity: 'blocking',
          elements: ['forwarders/br-s0-a'],
          properties: ['forwarders/br-s0-a: circuits'],
          fixes: ['Make it a bridge'],
        },
      ],
    },
    'a port alone, and offers the tunnel that nobody uses': {
      design: changed(pairDesign(), crossConnect('br-s0-a'), {
        forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': null } } },
      }),
      findings: [
        {
          sentence: 'br-110 at Head office joins one port and no tunnels',
          fixes: ['Join tn-s0-s1-a'],
        },
      ],
    },
    'a tunnel alone': {
      design: changed(pairDesign(), crossConnect('br-s0-a'), {
        forwarders: { 'br-s0-a': { circuits: { access: null } } },
      }),
      findings: [{ sentence: 'br-110 at Head office joins no ports and one tunnel', fixes: [] }],
    },
    'more than one, but no bridge where the segment must be filtered': {
      design: changed(hubDesign(2), crossConnect('br-s0-a'), { segments: { a: { mustBeFiltered: true } } }),
      findings: [{ sentence: 'br-110 at Head office joins one port and two tunnels', fixes: [] }],
    },
  },
});
