import { portRoutedAndBridged } from '#engine/rules/port-routed-and-bridged.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const bridged = (vlans: 'untagged' | 'all' | readonly number[]) =>
  changed(pairDesign(), {
    forwarders: {
      'br-s0-a': {
        circuits: {
          out: {
            kind: 'port',
            rank: 'z',
            port: 'wan1',
            vlans: typeof vlans === 'string' ? vlans : [...vlans],
          },
        },
      },
    },
  });

testRule(portRoutedAndBridged, {
  accepted: {
    'WAN ports that no forwarder takes': pairDesign(),
    'a VLAN of the WAN port, beside its untagged address': bridged([110]),
  },
  rejected: {
    'a WAN port whose untagged frames are bridged': {
      design: bridged('untagged'),
      findings: [
        {
          sentence: 'wan1 of fw-s0 is on a transport and in br-110',
          words: 'routed and bridged',
          severity: 'blocking',
          elements: ['devices/fw-s0/wan1', 'forwarders/br-s0-a', 'links/ld-s0-coast'],
          properties: ['forwarders/br-s0-a: circuits.out'],
          fixes: ['Take it out of br-110'],
        },
      ],
    },
    'one that is bridged whole': {
      design: bridged('all'),
      findings: [
        { sentence: 'wan1 of fw-s0 is on a transport and in br-110', fixes: ['Take it out of br-110'] },
      ],
    },
  },
});
