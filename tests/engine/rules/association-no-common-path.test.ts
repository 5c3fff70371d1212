import { associationNoCommonPath } from '#engine/rules/association-no-common-path.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const ring = { name: 'Terminal ring', kind: 'own-routed', mtu: 1700, families: [4] } as const;
/** Both sites also land on a transport of their own. */
const withRing = changed(pairDesign(), {
  transports: { ring },
  devices: {
    'fw-s0': { ports: { wan2: { number: 9, name: 'wan2', role: 'wan', mtu: 1700 } } },
    'fw-s1': { ports: { wan2: { number: 9, name: 'wan2', role: 'wan', mtu: 1700 } } },
  },
  links: {
    'ld-s0-ring': { kind: 'landing', device: 'fw-s0', port: 'wan2', transport: 'ring', ipv4: '10.64.8.1' },
    'ld-s1-ring': { kind: 'landing', device: 'fw-s1', port: 'wan2', transport: 'ring', ipv4: '10.64.8.2' },
  },
});
const viaRingAtOneEnd = {
  associations: { 'as-s0-s1': { b: { via: { first: { landing: 'ld-s1-ring' } } } } },
};

testRule(associationNoCommonPath, {
  accepted: {
    'two landings on one transport': pairDesign(),
    'ends that do not say which landing they use': changed(pairDesign(), {
      associations: { 'as-s0-s1': { a: { via: null }, b: { via: null } } },
    }),
  },
  rejected: {
    'ends on different transports, and offers those that they share': {
      design: changed(withRing, viaRingAtOneEnd),
      findings: [
        {
          sentence: 'No path: Head office on Coastal access, Gullhaven on Terminal ring',
          words: 'no common path',
          severity: 'blocking',
          elements: ['associations/as-s0-s1', 'devices/fw-s0', 'devices/fw-s1'],
          properties: ['associations/as-s0-s1: a.via', 'associations/as-s0-s1: b.via'],
          fixes: ['Use Coastal access', 'Use Terminal ring'],
        },
      ],
    },
    'ends that share a transport but no address family': {
      design: changed(pairDesign(), { links: { 'ld-s1-coast': { ipv4: null, ipv6: '2001:db8:9::1' } } }),
      findings: [
        {
          sentence: 'No path: no common address family on Coastal access',
          words: 'no common family',
          fixes: [],
        },
      ],
    },
    'an end whose device lands nowhere': {
      design: changed(pairDesign(), {
        links: { 'ld-s1-coast': null },
        associations: { 'as-s0-s1': { b: { via: null } } },
      }),
      findings: [
        {
          sentence: 'No path: Gullhaven has no WAN port on any transport',
          words: 'no WAN port',
          fixes: [],
        },
      ],
    },
    'an end that names the landing of another device': {
      design: changed(pairDesign(), {
        associations: { 'as-s0-s1': { b: { via: { first: { landing: 'ld-s0-coast' } } } } },
      }),
      findings: [
        {
          sentence: 'No path: Gullhaven names only WAN ports of other devices',
          fixes: ['Use Coastal access'],
        },
      ],
    },
    'an end whose WAN port is shut': {
      design: changed(pairDesign(), { devices: { 'fw-s1': { ports: { wan1: { shut: true } } } } }),
      findings: [
        {
          sentence: 'No path: every WAN port it may use at Gullhaven is shut',
          words: 'WAN port shut',
          fixes: ['Open wan1'],
        },
      ],
    },
    'an end of which only the standby member is plugged in': {
      design: changed(hubDesign(1, { hub: 'ha-pair' }), { links: { 'ld-s0-coast': { members: '2' } } }),
      findings: [
        {
          sentence: 'No path: the active member at Head office has no open WAN port',
          words: 'WAN port silent',
          fixes: ['Plug in both members'],
        },
      ],
    },
  },
});
