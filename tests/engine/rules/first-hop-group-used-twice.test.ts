import { firstHopGroupUsedTwice } from '#engine/rules/first-hop-group-used-twice.ts';
import { chainDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const gateway = (host: number, group: number, address: string) => ({
  gateway: { addresses: [`10.110.0.${host}/16`], mtu: 1396, redundancy: { group, address } },
});
const groups = (a: object, b: object) =>
  changed(pairDesign(), { forwarders: { 'br-s0-a': a as never, 'br-s1-a': b as never } });

testRule(firstHopGroupUsedTwice, {
  accepted: {
    'one group with one address': groups(gateway(2, 10, '10.110.0.1'), gateway(3, 10, '10.110.0.1')),
    'two groups': groups(gateway(2, 10, '10.110.0.1'), gateway(3, 11, '10.110.0.4')),
    'one number for IPv4 and for IPv6': groups(gateway(2, 10, '10.110.0.1'), gateway(3, 10, '2001:db8::1')),
    'a group whose address is not known': groups(gateway(2, 10, '10.110.0.1'), {
      gateway: { redundancy: { group: 10 } },
    }),
  },
  rejected: {
    'one number for two addresses': {
      design: groups(gateway(2, 1, '10.110.0.1'), gateway(3, 1, '10.110.0.4')),
      findings: [
        {
          sentence: 'Group 1 is 10.110.0.1 at Head office, 10.110.0.4 at Gullhaven',
          words: 'group used twice',
          severity: 'blocking',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          properties: [
            'forwarders/br-s0-a: gateway.redundancy.group',
            'forwarders/br-s1-a: gateway.redundancy.group',
          ],
          fixes: ['Group 2 for 10.110.0.4'],
        },
      ],
    },
    'one number for three addresses': {
      design: changed(chainDesign(3), {
        forwarders: {
          'br-s0-a': gateway(2, 1, '10.110.0.1'),
          'br-s1-a': gateway(3, 1, '10.110.0.4'),
          'br-s2-a': gateway(5, 1, '10.110.0.6'),
        },
      }),
      findings: [
        {
          sentence: 'Group 1 is 10.110.0.1 at Head office, 10.110.0.4 at Gullhaven',
          fixes: ['Renumber all but one'],
        },
      ],
    },
  },
});
