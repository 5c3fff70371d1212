import type { MergePatch } from '#engine/model/merge-patch.ts';
import { segmentsMerged } from '#engine/rules/segments-merged.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const two = pairDesign({ segments: ['a', 'b'] });
const cabled = (native: number, far: MergePatch): MergePatch => ({
  devices: {
    'sw-s0': {
      ports: { p8: { number: 8, role: 'lan', mode: 'trunk', nativeVlan: native, allowedVlans: [] } },
    },
    'sw-hall': {
      kind: 'switch',
      site: 's0',
      name: 'sw-hall',
      ports: { p1: { number: 1, role: 'lan', ...(far as object) } },
    },
  },
  links: {
    'cb-hall': { kind: 'cable', a: { device: 'sw-s0', port: 'p8' }, b: { device: 'sw-hall', port: 'p1' } },
  },
});
/** One forwarder at each site takes all VLANs with their tags, into one tunnel. */
const trunked = (vlans: { readonly a: number; readonly b: number }): MergePatch => ({
  segments: {
    a: { sites: { s1: { vlan: vlans.a } } },
    b: { sites: { s1: { vlan: vlans.b } } },
  },
  tunnels: {
    'tn-s0-s1-a': { a: { innerTags: 'keep' }, b: { innerTags: 'keep' } },
    'tn-s0-s1-b': null,
  },
  forwarders: {
    'br-s0-a': { circuits: { access: { vlans: [110, 120] } } },
    'br-s1-a': { circuits: { access: { vlans: [110, 120] } } },
    'br-s0-b': null,
    'br-s1-b': null,
  },
});
const tagTwice: MergePatch = {
  forwarders: {
    'br-s0-a': { circuits: { extra: { kind: 'port', rank: 'z', port: 'lan2', vlans: [120] } } },
  },
};

const like = two.tunnels['tn-s0-s1-a']!;
const held = { circuits: { astray: { kind: 'tunnel', rank: 'z', tunnel: 'tn-astray' } } };
const astray = {
  tunnels: {
    'tn-astray': { ...like, name: 'tn-astray', a: { ...like.a, vni: 12_000 }, b: { ...like.b, vni: 12_000 } },
  },
  forwarders: { 'br-s0-a': held, 'br-s1-b': held },
} as unknown as MergePatch;

testRule(segmentsMerged, {
  accepted: {
    'two segments side by side': two,
    'a VLAN of which the same segment has other numbers elsewhere': changed(two, {
      segments: { a: { sites: { s1: { vlan: 210 } } } },
    }),
    'a trunk of both through one tunnel': changed(two, trunked({ a: 110, b: 120 })),
    'native VLANs that agree': changed(two, cabled(110, { mode: 'access', vlan: 110 })),
    'native VLANs of no segment': changed(two, cabled(1, { mode: 'trunk', nativeVlan: 99 })),
    'two segments in one forwarder that keeps them apart': changed(two, tagTwice, {
      forwarders: {
        'br-s0-a': { circuits: { access: { isolation: 'own' }, extra: { isolation: 'own' } } },
      },
    }),
    'a tunnel between different segments that can’t come up': changed(two, {
      forwarders: {
        'br-s1-a': { circuits: { access: { vlans: [120] } } },
        'br-s1-b': { circuits: { access: { vlans: [110] } } },
      },
      tunnels: { 'tn-s0-s1-a': { b: { vni: 4711 } }, 'tn-s0-s1-b': { b: { vni: 4712 } } },
    }),
  },
  rejected: {
    'one VLAN for two segments at a site': {
      design: changed(two, { segments: { b: { sites: { s1: { vlan: 110 } } } } }),
      findings: [
        {
          sentence: 'Segments A and B are both VLAN 110 at Gullhaven',
          words: 'VLAN used twice',
          severity: 'blocking',
          elements: ['sites/s1', 'segments/a', 'segments/b'],
          properties: ['segments/a: sites.s1.vlan', 'segments/b: sites.s1.vlan'],
          fixes: [],
        },
      ],
    },
    'a cable whose ends put untagged frames into different segments': {
      design: changed(two, cabled(110, { mode: 'access', vlan: 120 })),
      findings: [
        {
          sentence: 'Untagged is VLAN 110 at sw-s0, 120 at sw-hall',
          words: 'native VLANs differ',
          elements: ['links/cb-hall', 'devices/sw-s0/p8', 'devices/sw-hall/p1'],
          properties: ['devices/sw-s0/p8: nativeVlan', 'devices/sw-hall/p1: vlan'],
          fixes: ['Set sw-hall to 110', 'Set sw-s0 to 120'],
        },
      ],
    },
    'a forwarder that takes VLANs of two segments': {
      design: changed(two, tagTwice),
      findings: [
        {
          sentence: 'br-110 at Head office merges segments A and B',
          words: 'segments merged',
          elements: ['forwarders/br-s0-a', 'segments/a', 'segments/b'],
          properties: [
            'forwarders/br-s0-a: circuits.access.vlans',
            'forwarders/br-s0-a: circuits.extra.vlans',
          ],
          fixes: ['Take B out of br-110'],
        },
      ],
    },
    'a tunnel between forwarders of different segments': {
      design: changed(two, astray),
      findings: [
        {
          sentence: 'tn-astray merges segments A and B',
          elements: ['tunnels/tn-astray', 'segments/a', 'segments/b'],
          fixes: ['Remove tn-astray'],
        },
      ],
    },
    'a trunk through a tunnel whose tags mean other segments at its far end': {
      design: changed(two, trunked({ a: 120, b: 110 })),
      findings: [
        {
          sentence: 'Tag 110 in tn-s0-s1-a is segment A at Head office, B at Gullhaven',
          elements: ['tunnels/tn-s0-s1-a', 'segments/a', 'segments/b'],
          fixes: [],
        },
      ],
    },
  },
});
