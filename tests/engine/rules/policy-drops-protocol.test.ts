import { protocols } from '#engine/model/intent.ts';
import { policyDropsProtocol } from '#engine/rules/policy-drops-protocol.ts';
import { filtered, logTheRest, permit } from '../../support/cross-connect.ts';
import { pairDesign } from '../../support/designs.ts';
import { testRule } from '../../support/rule-tester.ts';

const subnets = { sources: ['10.110.0.0/16'], destinations: ['10.110.0.0/16'] };
const ipOnly = [permit({ frames: 'arp' }), permit({ frames: 'ipv4', ...subnets }), logTheRest];
const needing = (...needed: string[]) => ({ protocols: needed });

testRule(policyDropsProtocol, {
  accepted: {
    bridges: pairDesign(),
    'IPv4 alone, where nothing else is needed': filtered(ipOnly, needing('ipv4', 'bfd')),
    'everything needed where everything is permitted': filtered([permit({ frames: 'any' })], {
      protocols: [...protocols],
    }),
    'OSPF by its protocol number': filtered(
      [permit({ frames: 'ipv4', protocol: 89 }), ...ipOnly],
      needing('ipv4', 'ospf'),
    ),
    'OSPF by its group': filtered(
      [permit({ frames: 'ipv4', destinations: ['224.0.0.0/24'] }), ...ipOnly],
      needing('ipv4', 'ospf'),
    ),
    'a stream that flows one way': filtered(
      [permit({ frames: 'multicast', direction: 'to-tunnel' }), ...ipOnly],
      needing('ipv4', 'multicast'),
    ),
    'real-time Ethernet by an EtherType': filtered(
      [permit({ frames: 'ethertype', ethertype: 0x8892 }), ...ipOnly],
      needing('real-time-ethernet'),
    ),
  },
  rejected: {
    'OSPF between subnets that leave its group out': {
      design: filtered(ipOnly, needing('ipv4', 'ospf')),
      findings: [
        {
          sentence: 'br-110 at Gullhaven drops OSPF of segment A',
          words: 'need filtered',
          severity: 'blocking',
          elements: ['forwarders/br-s1-a', 'segments/a'],
          properties: ['forwarders/br-s1-a: policy', 'segments/a: protocols'],
          fixes: ['Permit it first'],
        },
      ],
    },
    'what is no IP': {
      design: filtered(ipOnly, needing('lldp', 'is-is')),
      findings: [
        { sentence: 'br-110 at Gullhaven drops IS-IS and LLDP of segment A', fixes: ['Permit it first'] },
      ],
    },
    'the other family': {
      design: filtered(ipOnly, needing('ipv4', 'ipv6')),
      findings: [{ sentence: 'br-110 at Gullhaven drops IPv6 of segment A', fixes: ['Permit it first'] }],
    },
    'leases, groups and redundancy at once': {
      design: filtered(ipOnly, needing('dhcp', 'igmp', 'vrrp', 'pim')),
      findings: [
        { sentence: 'br-110 at Gullhaven drops four protocols of segment A', fixes: ['Permit it first'] },
      ],
    },
    'OSPF denied before it is permitted': {
      design: filtered(
        [{ action: 'deny', direction: 'both', frames: 'multicast' }, permit({ frames: 'any' })],
        needing('ospf'),
      ),
      findings: [{ sentence: 'br-110 at Gullhaven drops OSPF of segment A', fixes: ['Permit it first'] }],
    },
    'real-time Ethernet, of which nobody knows the EtherType here': {
      design: filtered(ipOnly, needing('real-time-ethernet')),
      findings: [{ sentence: 'br-110 at Gullhaven drops real-time Ethernet of segment A', fixes: [] }],
    },
  },
});
