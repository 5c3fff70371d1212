import type { MergePatch } from '#engine/model/merge-patch.ts';
import { portVlanClaimedTwice } from '#engine/rules/port-vlan-claimed-twice.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const two = pairDesign({ segments: ['a', 'b'] });
const circuits = (forwarder: string, of: MergePatch): MergePatch => ({
  forwarders: { [forwarder]: { circuits: of } },
});

testRule(portVlanClaimedTwice, {
  accepted: {
    'a forwarder for each VLAN of a port': two,
    'untagged frames beside VLANs': changed(two, circuits('br-s0-a', { access: { vlans: 'untagged' } })),
    'the same VLAN of another port': changed(
      two,
      circuits('br-s0-a', { access: { vlans: [120], port: 'lan2' } }),
    ),
  },
  rejected: {
    'a VLAN in the lists of two forwarders': {
      design: changed(two, circuits('br-s0-a', { access: { vlans: [110, 120] } })),
      findings: [
        {
          sentence: 'VLAN 120 at lan1 of fw-s0 goes to both br-110 and br-120',
          words: 'claimed twice',
          severity: 'blocking',
          elements: ['devices/fw-s0/lan1', 'forwarders/br-s0-a', 'forwarders/br-s0-b'],
          properties: [
            'forwarders/br-s0-a: circuits.access.vlans',
            'forwarders/br-s0-b: circuits.access.vlans',
          ],
          // Without VLAN 120 nothing at the head office would serve segment B.
          fixes: ['Leave it to br-120'],
        },
      ],
    },
    'a forwarder that takes everything beside one that takes a VLAN': {
      design: changed(two, circuits('br-s0-a', { access: { vlans: 'all' } }), {
        tunnels: { 'tn-s0-s1-a': { a: { innerTags: 'strip' } } },
      }),
      findings: [{ sentence: 'VLAN 120 at lan1 of fw-s0 goes to both br-110 and br-120', fixes: [] }],
    },
    'two that take untagged frames': {
      design: changed(
        two,
        circuits('br-s0-a', { bare: { kind: 'port', rank: 'y', port: 'lan2', vlans: 'untagged' } }),
        circuits('br-s0-b', { bare: { kind: 'port', rank: 'y', port: 'lan2', vlans: 'untagged' } }),
      ),
      findings: [
        {
          sentence: 'Untagged frames at lan2 of fw-s0 go to both br-110 and br-120',
          fixes: ['Leave it to br-110', 'Leave it to br-120'],
        },
      ],
    },
    'two ports of one aggregate in two forwarders': {
      design: changed(
        two,
        circuits('br-s0-b', { more: { kind: 'port', rank: 'y', port: 'lan2', vlans: [110] } }),
        {
          devices: { 'fw-s0': { ports: { lan1: { aggregation: 'lag1' }, lan2: { aggregation: 'lag1' } } } },
        },
      ),
      findings: [
        {
          sentence: 'VLAN 110 at lan1 of fw-s0 goes to both br-110 and br-120',
          fixes: ['Leave it to br-110'],
        },
      ],
    },
    'two circuits of one forwarder': {
      design: changed(
        two,
        circuits('br-s0-a', { again: { kind: 'port', rank: 'y', port: 'lan1', vlans: [110] } }),
      ),
      findings: [
        { sentence: 'VLAN 110 at lan1 of fw-s0 goes to br-110 by two circuits', fixes: ['Keep one circuit'] },
      ],
    },
  },
});
