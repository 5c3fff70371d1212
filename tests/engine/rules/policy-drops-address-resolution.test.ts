import { policyDropsAddressResolution } from '#engine/rules/policy-drops-address-resolution.ts';
import { filtered, logTheRest, permit } from '../../support/cross-connect.ts';
import { pairDesign } from '../../support/designs.ts';
import { testRule } from '../../support/rule-tester.ts';

const [arp, ipv4, ipv6] = ['arp', 'ipv4', 'ipv6'].map((frames) => permit({ frames }));
const both = { protocols: ['ipv4', 'ipv6'] };

testRule(policyDropsAddressResolution, {
  accepted: {
    bridges: pairDesign(),
    'IPv4 with ARP': filtered([arp!, ipv4!, logTheRest]),
    everything: filtered([permit({ frames: 'any' })]),
    'IPv6 whole, neighbour discovery with it': filtered([ipv6!], both),
    'no IP at all': filtered([permit({ frames: 'ethertype', ethertype: 0x88cc })]),
    'a policy that permits nothing, which another check tells': filtered([logTheRest]),
    'ARP by its EtherType': filtered([permit({ frames: 'ethertype', ethertype: 0x0806 }), ipv4!]),
  },
  rejected: {
    'IPv4 without ARP': {
      design: filtered([ipv4!, logTheRest]),
      findings: [
        {
          sentence: 'br-110 at Gullhaven permits IPv4 without ARP',
          words: 'resolution dropped',
          severity: 'blocking',
          elements: ['forwarders/br-s1-a'],
          properties: ['forwarders/br-s1-a: policy'],
          fixes: ['Permit it first'],
        },
      ],
    },
    'ARP one way only': {
      design: filtered([permit({ frames: 'arp', direction: 'to-tunnel' }), ipv4!, logTheRest]),
      findings: [{ sentence: 'br-110 at Gullhaven permits IPv4 without ARP', fixes: ['Permit it first'] }],
    },
    'IPv6 between subnets, which leaves out the groups of neighbour discovery': {
      design: filtered([permit({ frames: 'ipv6', destinations: ['2001:db8:110::/64'] }), logTheRest], both),
      findings: [
        {
          sentence: 'br-110 at Gullhaven permits IPv6 without neighbour discovery',
          fixes: ['Permit it first'],
        },
      ],
    },
    'IP of both families and neither resolution': {
      design: filtered([
        { action: 'deny', direction: 'both', frames: 'multicast' },
        { action: 'deny', direction: 'both', frames: 'arp' },
        permit({ frames: 'any' }),
      ]),
      findings: [
        {
          sentence: 'br-110 at Gullhaven permits IP without ARP or neighbour discovery',
          fixes: ['Permit it first'],
        },
      ],
    },
  },
});
