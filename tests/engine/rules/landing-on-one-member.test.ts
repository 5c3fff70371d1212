import type { MergePatch } from '#engine/model/merge-patch.ts';
import { landingOnOneMember } from '#engine/rules/landing-on-one-member.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });
const alone: MergePatch = { links: { 'ld-s0-coast': { members: '1' } } };
const second: MergePatch = {
  devices: { 'fw-s0': { ports: { wan9: { number: 9, role: 'wan' } } } },
  links: {
    'ld-s0-second': {
      kind: 'landing',
      device: 'fw-s0',
      port: 'wan9',
      transport: 'coast',
      ipv4: '198.51.100.90',
      members: '2',
    },
  },
};

testRule(landingOnOneMember, {
  accepted: {
    'a landing of both members': pair,
    'a landing of a member that nothing uses': changed(pair, second),
    'a landing for each member, both of which the association may use': changed(pair, alone, second, {
      associations: { 'as-s0-s1': { a: { via: { next: { rank: 'z', landing: 'ld-s0-second' } } } } },
    }),
    'a pair of which both members are active': changed(pair, alone, {
      devices: { 'fw-s0': { mode: 'active-active' } },
    }),
  },
  rejected: {
    'a landing of the active member alone, for all that runs over it': {
      design: changed(hubDesign(2, { hub: 'ha-pair' }), alone),
      findings: [
        {
          sentence: 'fw-s0-1 alone lands on Coastal access, not fw-s0-2',
          words: 'one member only',
          severity: 'blocking',
          elements: ['links/ld-s0-coast', 'devices/fw-s0', 'associations/as-s0-s1', 'associations/as-s0-s2'],
          properties: ['links/ld-s0-coast: members'],
          fixes: ['Plug in both members'],
        },
      ],
    },
    'one under a tunnel outside IPsec': {
      design: changed(
        pairDesign({ hub: 'ha-pair', join: { protectedBy: false } }),
        { devices: { 'fw-s0': { active: 2 } }, links: { 'ld-s0-coast': { members: '2' } } },
        { transports: { coast: { kind: 'own-routed', trusted: true } } },
      ),
      findings: [
        {
          sentence: 'fw-s0-2 alone lands on Coastal access, not fw-s0-1',
          elements: ['links/ld-s0-coast', 'devices/fw-s0', 'tunnels/tn-s0-s1-a'],
          fixes: ['Plug in both members'],
        },
      ],
    },
  },
});
