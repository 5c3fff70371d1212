import { endpointOnOneMember } from '#engine/rules/endpoint-on-one-member.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const hub = hubDesign(1, { hub: 'ha-pair' });
const owned = (member: 1 | 2) => changed(hub, { endpoints: { 'lo-s0': { member } } });

testRule(endpointOnOneMember, {
  accepted: {
    'an endpoint of the pair': hub,
    'an endpoint of one member that ends no tunnel': changed(hub, {
      endpoints: { spare: { device: 'fw-s0', member: 1, name: 'lo-spare', ipv4: '10.255.9.9/32' } },
    }),
    'a member named on a single gateway, which has none': changed(pairDesign(), {
      endpoints: { 'lo-s0': { member: 1 } },
    }),
    'an endpoint for each member, each with a tunnel to the site': changed(owned(1), {
      endpoints: { 'lo-m2': { device: 'fw-s0', member: 2, name: 'lo-m2', ipv4: '10.255.9.2/32' } },
      tunnels: {
        second: {
          name: 'tn-second',
          a: { endpoint: 'lo-m2', vni: 20_000 },
          b: { endpoint: 'lo-s1', vni: 20_000 },
          association: 'as-s0-s1',
        },
      },
    }),
  },
  rejected: {
    'an endpoint that the active member keeps to itself': {
      design: owned(1),
      findings: [
        {
          sentence: 'lo-s0 belongs to fw-s0-1 alone and doesn’t fail over',
          words: 'one member only',
          severity: 'blocking',
          elements: ['endpoints/lo-s0', 'devices/fw-s0'],
          properties: ['endpoints/lo-s0: member'],
          fixes: ['Give it to fw-s0'],
        },
      ],
    },
    'an endpoint that the standby member keeps to itself': {
      design: owned(2),
      findings: [
        {
          sentence: 'lo-s0 belongs to fw-s0-2 alone and doesn’t fail over',
          fixes: ['Give it to fw-s0'],
        },
      ],
    },
  },
});
