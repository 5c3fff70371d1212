import { policyOneDirection } from '#engine/rules/policy-one-direction.ts';
import { filtered, logTheRest, permit } from '../../support/cross-connect.ts';
import { pairDesign } from '../../support/designs.ts';
import { testRule } from '../../support/rule-tester.ts';

const arp = permit({ frames: 'arp' });
const into = { direction: 'to-tunnel' };

testRule(policyOneDirection, {
  accepted: {
    bridges: pairDesign(),
    'packets both ways': filtered([arp, permit({ frames: 'ipv4' }), logTheRest]),
    'a rule for each way': filtered([
      arp,
      permit({ frames: 'ipv4', ...into, destinations: ['10.110.0.0/24'] }),
      permit({ frames: 'ipv4', direction: 'from-tunnel', sources: ['10.110.0.0/24'] }),
    ]),
    'groups one way beside packets both ways': filtered([
      arp,
      permit({ frames: 'ipv4', ...into, destinations: ['239.0.0.0/8'] }),
    ]),
  },
  rejected: {
    'packets into the tunnel only': {
      design: filtered([arp, permit({ frames: 'ipv4', ...into }), logTheRest]),
      findings: [
        {
          sentence: 'br-110 at Gullhaven permits IPv4 only into the tunnel',
          words: 'one way only',
          severity: 'degrading',
          elements: ['forwarders/br-s1-a'],
          properties: ['forwarders/br-s1-a: policy'],
          fixes: ['Permit both ways'],
        },
      ],
    },
    'everything out of the tunnel only': {
      design: filtered([permit({ frames: 'any', direction: 'from-tunnel' })]),
      findings: [
        {
          sentence: 'br-110 at Gullhaven permits IP only out of the tunnel',
          fixes: ['Permit both ways'],
        },
      ],
    },
    'packets of one subnet, whose way back needs a rule of its own': {
      design: filtered([arp, permit({ frames: 'ipv4', ...into, sources: ['10.110.1.0/24'] })]),
      findings: [{ sentence: 'br-110 at Gullhaven permits IPv4 only into the tunnel', fixes: [] }],
    },
    'each family another way': {
      design: filtered([
        arp,
        permit({ frames: 'ipv4', ...into }),
        permit({ frames: 'ipv6', direction: 'from-tunnel' }),
      ]),
      findings: [
        {
          sentence: 'br-110 at Gullhaven permits IPv4 only into the tunnel',
          fixes: ['Permit both ways'],
        },
      ],
    },
  },
});
