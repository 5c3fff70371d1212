import { tunnelFamiliesDiffer } from '#engine/rules/tunnel-families-differ.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';
const onlyV6 = { endpoints: { 'lo-s1': { ipv4: null, ipv6: '2001:db8::2/128' } } };

testRule(tunnelFamiliesDiffer, {
  accepted: {
    'IPv4 at both ends': pairDesign(),
    'an endpoint with both families': changed(pairDesign(), {
      endpoints: { 'lo-s1': { ipv6: '2001:db8::2/128' } },
    }),
    'an endpoint whose address is not known yet': changed(pairDesign(), {
      endpoints: { 'lo-s1': { ipv4: null } },
    }),
  },
  rejected: {
    'IPv4 at one end and IPv6 at the other': {
      design: changed(pairDesign(), onlyV6, {
        tunnels: { [id]: { family: null } },
        segments: { a: { mtu: 1360 } },
      }),
      findings: [
        {
          sentence: 'Only IPv4 at Head office, only IPv6 at Gullhaven',
          words: 'IPv4 meets IPv6',
          severity: 'blocking',
          elements: [`tunnels/${id}`, 'endpoints/lo-s0', 'endpoints/lo-s1'],
          properties: ['endpoints/lo-s0: ipv4', 'endpoints/lo-s1: ipv6'],
          mark: { kind: 'cut', tunnel: id },
          fixes: ['Give lo-s1 10.255.0.2', 'Give lo-s0 2001:db8::3'],
        },
      ],
    },
    'two tunnels between such endpoints as one fault, without offering IPv6 where its header leaves too little room':
      {
        design: changed(pairDesign({ segments: ['a', 'b'] }), onlyV6),
        findings: [
          {
            sentence: 'Only IPv4 at Head office, only IPv6 at Gullhaven',
            elements: [`tunnels/${id}`, 'tunnels/tn-s0-s1-b', 'endpoints/lo-s0', 'endpoints/lo-s1'],
            fixes: ['Give lo-s1 10.255.0.2'],
          },
        ],
      },
    'a tunnel that asks for a family which its ends do not have': {
      design: changed(pairDesign(), { tunnels: { [id]: { family: 6 } } }),
      findings: [
        {
          sentence: 'Head office has no IPv6 address for tn-s0-s1-a',
          words: 'family missing',
          properties: [`tunnels/${id}: family`, `tunnels/${id}: a.endpoint`],
          fixes: ['Run over IPv4'],
        },
      ],
    },
  },
});
