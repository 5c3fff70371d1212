import type { MergePatch } from '#engine/model/merge-patch.ts';
import { vlanMissingOnPath } from '#engine/rules/vlan-missing-on-path.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign();
const port = (device: string, id: string, settings: MergePatch): MergePatch => ({
  devices: { [device]: { ports: { [id]: settings } } },
});

testRule(vlanMissingOnPath, {
  accepted: {
    'VLANs allowed all the way': hubDesign(3, { segments: ['a', 'b'] }),
    'a trunk without the VLAN that nobody needs it on': changed(pair, {
      devices: {
        'sw-hall': {
          kind: 'switch',
          site: 's0',
          name: 'sw-hall',
          ports: { p1: { number: 1, role: 'lan', mode: 'trunk', allowedVlans: [999] } },
        },
        'sw-s0': { ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } },
      },
      links: {
        'cb-hall': {
          kind: 'cable',
          a: { device: 'sw-hall', port: 'p1' },
          b: { device: 'sw-s0', port: 'p9' },
        },
      },
    }),
    'a VNI that differs, which is another rule’s': changed(pair, {
      tunnels: { 'tn-s0-s1-a': { b: { vni: 9 } } },
    }),
    'sites that nothing joins, which is another rule’s': changed(pair, {
      forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': null } } },
    }),
  },
  rejected: {
    'a trunk of the switch that leaves the VLAN out': {
      design: changed(pair, port('sw-s0', 'p1', { allowedVlans: [120] })),
      findings: [
        {
          sentence: 'VLAN 110 of segment A is not allowed at port 1 of sw-s0',
          words: 'VLAN missing',
          severity: 'blocking',
          elements: ['devices/sw-s0/p1', 'segments/a'],
          properties: ['devices/sw-s0/p1: allowedVlans'],
          fixes: ['Allow VLAN 110'],
        },
      ],
    },
    'both ends of a trunk, each once': {
      design: changed(
        pair,
        port('sw-s0', 'p1', { allowedVlans: [120] }),
        port('fw-s0', 'lan1', { allowedVlans: [120] }),
      ),
      findings: [
        { sentence: 'VLAN 110 of segment A is not allowed at lan1 of fw-s0', fixes: ['Allow VLAN 110'] },
        { sentence: 'VLAN 110 of segment A is not allowed at port 1 of sw-s0', fixes: ['Allow VLAN 110'] },
      ],
    },
    'an access port in another VLAN': {
      design: changed(pair, port('sw-s1', 'p2', { vlan: 990 })),
      findings: [
        {
          sentence: 'Port 2 of sw-s1 is in VLAN 990, where segment A has VLAN 110',
          words: 'wrong VLAN',
          properties: ['devices/sw-s1/p2: vlan'],
          fixes: ['Set it to VLAN 110'],
        },
      ],
    },
    'a host on a trunk without native VLAN': {
      design: changed(pair, port('sw-s1', 'p2', { mode: 'trunk', vlan: null, allowedVlans: [110] })),
      findings: [
        {
          sentence: 'Port 2 of sw-s1 drops the untagged frames of segment A',
          fixes: ['Make it an access port'],
        },
      ],
    },
    'a host that sends tags into an access port': {
      design: changed(pair, port('h-s1-a', 'p1', { mode: 'trunk', allowedVlans: [110] })),
      findings: [
        {
          sentence: 'Port 2 of sw-s1 takes no tags; segment A comes with 110',
          fixes: ['Let h-s1-a send untagged'],
        },
      ],
    },
    'an uplink that is an access port': {
      design: changed(pair, port('sw-s1', 'p1', { mode: 'access', vlan: 1, allowedVlans: null })),
      findings: [
        {
          sentence: 'Port 1 of sw-s1 takes no tags; segment A comes with 110',
          fixes: ['Make it a trunk'],
        },
      ],
    },
    'a gateway whose forwarder does not take the VLAN': {
      design: changed(pair, { forwarders: { 'br-s1-a': { circuits: { access: { vlans: [111] } } } } }),
      findings: [
        {
          sentence: 'No forwarder takes VLAN 110 of segment A at lan1 of fw-s1',
          words: 'VLAN unclaimed',
          fixes: ['Take it into br-110'],
        },
      ],
    },
  },
});
