import { endpointAddressDuplicate } from '#engine/rules/endpoint-address-duplicate.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const address = (id: string, ipv4: string) => ({ endpoints: { [id]: { ipv4 } } });

testRule(endpointAddressDuplicate, {
  accepted: {
    'an address for each endpoint': hubDesign(3),
    'two members of a pair that share an address on purpose': changed(hubDesign(1, { hub: 'ha-pair' }), {
      endpoints: {
        'lo-m1': { device: 'fw-s0', member: 1, name: 'lo-m1', ipv4: '10.255.1.1/32' },
        'lo-m2': { device: 'fw-s0', member: 2, name: 'lo-m2', ipv4: '10.255.1.1/32' },
      },
    }),
  },
  rejected: {
    'a typing error, and offers first what the selectors name': {
      design: changed(pairDesign(), address('lo-s0', '10.255.0.2/32')),
      findings: [
        {
          sentence: 'lo-s0 on fw-s0 and lo-s1 on fw-s1 both have 10.255.0.2',
          words: 'same address',
          severity: 'blocking',
          elements: ['endpoints/lo-s0', 'endpoints/lo-s1'],
          properties: ['endpoints/lo-s0: ipv4', 'endpoints/lo-s1: ipv4'],
          fixes: ['Set lo-s0 to 10.255.0.1'],
        },
      ],
    },
    'one address planned for two spokes, selectors and all': {
      design: changed(hubDesign(2), address('lo-s2', '10.255.0.2/32'), {
        associations: {
          'as-s0-s2': {
            a: { selectors: { loopbacks: { remote: '10.255.0.2/32' } } },
            b: { selectors: { loopbacks: { local: '10.255.0.2/32' } } },
          },
        },
      }),
      findings: [
        {
          sentence: 'lo-s1 on fw-s1 and lo-s2 on fw-s2 both have 10.255.0.2',
          fixes: ['Set lo-s1 to 10.255.0.3', 'Set lo-s2 to 10.255.0.3'],
        },
      ],
    },
    'a spare endpoint with the address of one in use, and offers to move the spare one first': {
      design: changed(pairDesign(), {
        endpoints: { spare: { device: 'fw-s1', name: 'lo-spare', ipv4: '10.255.0.1/32' } },
      }),
      findings: [
        {
          sentence: 'lo-s0 on fw-s0 and lo-spare on fw-s1 both have 10.255.0.1',
          fixes: ['Set lo-spare to 10.255.0.3', 'Set lo-s0 to 10.255.0.3'],
        },
      ],
    },
    'one address at three endpoints': {
      design: changed(hubDesign(2), address('lo-s1', '10.255.0.1/32'), address('lo-s2', '10.255.0.1/32')),
      findings: [
        {
          sentence: 'lo-s0 on fw-s0, lo-s1 on fw-s1 and lo-s2 on fw-s2 all have 10.255.0.1',
          fixes: ['Readdress two endpoints'],
        },
      ],
    },
    'an IPv6 address in two spellings': {
      design: changed(hubDesign(1), {
        endpoints: {
          x: { device: 'fw-s0', name: 'lo-x', ipv6: '2001:db8::a/128' },
          y: { device: 'fw-s1', name: 'lo-y', ipv6: '2001:db8:0:0::000a/128' },
        },
      }),
      findings: [
        {
          sentence: 'lo-x on fw-s0 and lo-y on fw-s1 both have 2001:db8:0:0:0:0:0:a',
          fixes: ['Set lo-x to 2001:db8::b', 'Set lo-y to 2001:db8::b'],
        },
      ],
    },
  },
});
