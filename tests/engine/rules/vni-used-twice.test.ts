import type { Design } from '#engine/model/design.ts';
import { vniUsedTwice } from '#engine/rules/vni-used-twice.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const sameVni = { vni: () => 7000 };
const withScope = (design: Design, vniScope: 'endpoint' | 'peer' | 'multipoint'): Design =>
  changed(design, {
    profiles: { usual: { name: 'Usual gateway', vniScope } },
    devices: Object.fromEntries(
      Object.entries(design.devices)
        .filter(([, device]) => device.kind === 'firewall')
        .map(([id]) => [id, { profile: 'usual' }]),
    ),
  });
const hub = hubDesign(2, { join: sameVni });

testRule(vniUsedTwice, {
  accepted: {
    'a VNI for each tunnel': hubDesign(3),
    'one VNI towards several peers, where the equipment tells them apart by peer': withScope(hub, 'peer'),
    'one VNI for a whole mesh, where it is a single multipoint circuit': withScope(
      meshDesign(3, { join: { ...sameVni, isolation: 'mesh' } }),
      'multipoint',
    ),
    'one VNI on two UDP ports': changed(hub, {
      tunnels: { 'tn-s0-s2-a': { a: { udpPort: 4790 }, b: { udpPort: 4790 } } },
    }),
    'tunnels without a VNI': changed(hub, {
      tunnels: {
        'tn-s0-s1-a': { a: { vni: null }, b: { vni: null } },
        'tn-s0-s2-a': { a: { vni: null }, b: { vni: null } },
      },
    }),
  },
  rejected: {
    'one VNI for two tunnels of an endpoint': {
      design: hub,
      findings: [
        {
          sentence: 'VNI 7000 is used by tn-s0-s1-a and tn-s0-s2-a at lo-s0',
          words: 'VNI used twice',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s1-a', 'tunnels/tn-s0-s2-a', 'endpoints/lo-s0'],
          properties: ['tunnels/tn-s0-s1-a: a.vni', 'tunnels/tn-s0-s2-a: a.vni'],
          fixes: ['Set tn-s0-s2-a to 10000'],
        },
      ],
    },
    'one VNI for two tunnels between the same endpoints, whatever the scope': {
      design: withScope(pairDesign({ segments: ['a', 'b'], join: sameVni }), 'peer'),
      findings: [
        {
          sentence: 'VNI 7000 is used by tn-s0-s1-a and tn-s0-s1-b at lo-s0 and lo-s1',
          fixes: ['Set tn-s0-s1-b to 10000'],
        },
      ],
    },
    'one VNI for a whole mesh as one fault': {
      design: meshDesign(4, { join: { ...sameVni, isolation: 'mesh' } }),
      findings: [
        {
          sentence: 'VNI 7000 is used by six tunnels at four endpoints',
          fixes: ['Renumber five tunnels'],
        },
      ],
    },
    'a multipoint VNI split over two bridges': {
      design: withScope(
        changed(hubDesign(2, { join: sameVni }), {
          forwarders: {
            'br-s0-a': { circuits: { 'tn-s0-s2-a': null } },
            'br-other': {
              device: 'fw-s0',
              kind: 'bridge',
              name: 'br-other',
              circuits: { far: { kind: 'tunnel', rank: 'a0', tunnel: 'tn-s0-s2-a' } },
            },
          },
        }),
        'multipoint',
      ),
      findings: [
        {
          sentence: 'VNI 7000 is used by tn-s0-s1-a and tn-s0-s2-a at lo-s0',
          fixes: ['Set tn-s0-s2-a to 10000'],
        },
      ],
    },
  },
});
