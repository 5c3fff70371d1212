import { hostAddressDuplicate } from '#engine/rules/host-address-duplicate.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const addresses = (hosts: { readonly [host: string]: readonly string[] }, segments = ['a']) =>
  changed(pairDesign({ segments, hostsPerSite: 2 }), {
    devices: Object.fromEntries(
      Object.entries(hosts).map(([host, list]) => [host, { addresses: list as string[] }]),
    ),
  });

testRule(hostAddressDuplicate, {
  accepted: {
    'an address for each host': pairDesign({ hostsPerSite: 3 }),
    'one address in two segments': addresses({ 'h-s0-a': ['10.99.0.1/16'], 'h-s0-b': ['10.99.0.1/16'] }, [
      'a',
      'b',
    ]),
  },
  rejected: {
    'two hosts with one address, one of them with another prefix length': {
      design: addresses({ 'h-s0-a': ['10.110.7.7/16'], 'h-s1-a': ['10.110.8.8/16', '10.110.7.7/24'] }),
      findings: [
        {
          sentence: 'h-s0-a and h-s1-a have 10.110.7.7 in segment A',
          words: 'address used twice',
          severity: 'blocking',
          elements: ['devices/h-s0-a', 'devices/h-s1-a'],
          properties: ['devices/h-s0-a: addresses', 'devices/h-s1-a: addresses'],
          fixes: [],
        },
      ],
    },
    'three hosts with one address': {
      design: addresses({
        'h-s0-a': ['10.110.7.7/16'],
        'h-s0-a1': ['10.110.7.7/16'],
        'h-s1-a': ['10.110.7.7/16'],
      }),
      findings: [{ sentence: 'Three hosts have 10.110.7.7 in segment A', fixes: [] }],
    },
  },
});
