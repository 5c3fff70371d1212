import type { MergePatch } from '#engine/model/merge-patch.ts';
import { segmentHostsParted } from '#engine/rules/segment-hosts-parted.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign();
const onTunnel = (of: MergePatch): MergePatch => ({ tunnels: { 'tn-s0-s1-a': of } });
const onForwarder = (id: string, of: MergePatch): MergePatch => ({ forwarders: { [id]: of } });
const permit = (frames: string): MergePatch => ({
  only: { rank: 'a0', action: 'permit', direction: 'both', frames },
});
/** A firewall that bridges a recorder towards the standby member of the pair. */
const behindStandby = changed(pairDesign({ hub: 'ha-pair' }), {
  devices: {
    'fw-back': {
      kind: 'firewall',
      site: 's0',
      name: 'fw-back',
      ports: { lan1: { number: 1, role: 'lan', mode: 'trunk' }, lan2: { number: 2, role: 'lan' } },
    },
    rec: { kind: 'host', site: 's0', name: 'rec', segment: 'a', ports: { p1: { number: 1, role: 'lan' } } },
  },
  links: {
    'cb-s0-up2': null,
    'cb-back': {
      kind: 'cable',
      a: { device: 'fw-back', port: 'lan1' },
      b: { device: 'fw-s0', port: 'lan2', member: 2 },
    },
    'cb-rec': { kind: 'cable', a: { device: 'rec', port: 'p1' }, b: { device: 'fw-back', port: 'lan2' } },
  },
  forwarders: {
    'br-s0-a': { circuits: { back: { kind: 'port', rank: 'y', port: 'lan2', vlans: [110] } } },
    'br-back': {
      device: 'fw-back',
      kind: 'bridge',
      name: 'br-back',
      circuits: {
        up: { kind: 'port', rank: 'a0', port: 'lan1', vlans: [110] },
        rec: { kind: 'port', rank: 'a1', port: 'lan2', vlans: 'untagged' },
      },
    },
  },
});

testRule(segmentHostsParted, {
  accepted: {
    'two sites': pair,
    'a hub on a pair': hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] }),
    'a chain': chainDesign(4),
    'an isolated mesh': meshDesign(4, { join: { isolation: 'mesh' } }),
    'a VNI that differs, which is told elsewhere': changed(pair, onTunnel({ b: { vni: 4 } })),
    'an association that nobody starts, which is told elsewhere': changed(pair, {
      associations: { 'as-s0-s1': { a: { start: 'answers' } } },
    }),
    'a VLAN that a port leaves out, which is told elsewhere': changed(pair, {
      devices: { 'sw-s0': { ports: { p1: { allowedVlans: [9] } } } },
    }),
    'a cross-connect without a policy, which is told elsewhere': changed(
      pair,
      onForwarder('br-s0-a', { kind: 'cross-connect' }),
    ),
    'spokes that a hub keeps apart, which is told elsewhere': hubDesign(2, { join: { isolation: 'spokes' } }),
    'a switch on the standby member, which is told elsewhere': changed(pairDesign({ hub: 'ha-pair' }), {
      links: { 'cb-s0-up1': null },
    }),
    'tags that one end discards, which is told elsewhere': changed(
      pair,
      onForwarder('br-s0-a', { circuits: { access: { vlans: 'all' } } }),
      onForwarder('br-s1-a', { circuits: { access: { vlans: 'all' } } }),
      onTunnel({ a: { innerTags: 'keep' }, b: { innerTags: 'strip' } }),
    ),
  },
  rejected: {
    'a firewall on the standby member': {
      design: behindStandby,
      findings: [
        {
          sentence: 'lan2 of fw-s0-2 is on the member that stands by: segment A is parted',
          elements: ['devices/fw-s0/lan2', 'segments/a'],
          fixes: [],
        },
      ],
    },
    'sites that nothing joins': {
      design: changed(
        hubDesign(3),
        {
          ...onForwarder('br-s0-a', { circuits: { 'tn-s0-s3-a': null } }),
          tunnels: { 'tn-s0-s3-a': null },
          associations: { 'as-s0-s3': null },
        },
        onForwarder('br-s3-a', { circuits: { 'tn-s0-s3-a': null } }),
      ),
      findings: [
        {
          sentence: 'Nothing joins two parts of segment A: Head office, Gullhaven and Orrin Point; Skerry',
          words: 'segment parted',
          severity: 'blocking',
          elements: ['sites/s3', 'sites/s0', 'sites/s1', 'sites/s2', 'segments/a'],
          fixes: [],
        },
      ],
    },
    'hosts of one site that nothing joins': {
      design: changed(behindStandby, { links: { 'cb-back': null } }),
      findings: [
        {
          sentence: 'Nothing joins two parts of segment A: h-s0-a and h-s1-a; rec',
          elements: ['devices/rec', 'devices/h-s0-a', 'devices/h-s1-a', 'segments/a'],
          fixes: [],
        },
      ],
    },
    'a host that is not cabled': {
      design: changed(pair, { links: { 'cb-h-s0-a': null } }),
      findings: [
        {
          sentence: 'h-s0-a is not cabled: segment A is parted',
          elements: ['devices/h-s0-a', 'segments/a'],
          fixes: [],
        },
      ],
    },
    'a port that is shut': {
      design: changed(pair, { devices: { 'sw-s0': { ports: { p1: { shut: true } } } } }),
      findings: [
        {
          sentence: 'Port 1 of sw-s0 is shut: segment A is parted',
          fixes: ['Open the port'],
        },
      ],
    },
    'a policy without address resolution': {
      design: changed(pair, onForwarder('br-s0-a', { kind: 'cross-connect', policy: permit('ipv4') })),
      findings: [
        {
          sentence: 'br-110 at Head office lets no ARP requests pass: segment A is parted',
          elements: ['forwarders/br-s0-a', 'segments/a'],
          fixes: ['Permit ARP'],
        },
      ],
    },
    'one that lets it pass one way': {
      design: changed(
        pair,
        onForwarder('br-s0-a', {
          kind: 'cross-connect',
          policy: { only: { rank: 'a0', action: 'permit', direction: 'to-tunnel', frames: 'any' } },
        }),
      ),
      findings: [
        {
          sentence: 'br-110 at Head office lets no ARP requests pass: segment A is parted',
          fixes: ['Permit ARP'],
        },
      ],
    },
    'IPv6 hosts whose bridge drops multicast': {
      design: changed(
        pair,
        { segments: { a: { protocols: ['ipv6'] } } },
        onForwarder('br-s0-a', { multicast: 'drop' }),
      ),
      findings: [
        {
          sentence: 'br-110 at Head office lets no IPv6 neighbour discovery pass: segment A is parted',
          fixes: ['Let multicast through'],
        },
      ],
    },
    'a tunnel that no forwarder holds at one end': {
      design: changed(pair, onForwarder('br-s1-a', { circuits: { 'tn-s0-s1-a': null } })),
      findings: [
        {
          sentence: 'No forwarder at Gullhaven holds tn-s0-s1-a: segment A is parted',
          elements: ['tunnels/tn-s0-s1-a', 'segments/a'],
          fixes: ['Take it into br-110'],
        },
      ],
    },
    'an access port that is isolated together with the tunnel': {
      design: changed(
        pair,
        onForwarder('br-s0-a', {
          circuits: { access: { isolation: 'x' }, 'tn-s0-s1-a': { isolation: 'x' } },
        }),
      ),
      findings: [
        {
          sentence: 'Isolation group x of br-110 at Head office keeps circuits apart: segment A is parted',
          fixes: [],
        },
      ],
    },
  },
});
