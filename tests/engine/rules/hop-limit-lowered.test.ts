import { hopLimitLowered } from '#engine/rules/hop-limit-lowered.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const lowering = (protocols: readonly string[], routing: boolean | null = true, ttl = 'lowered') =>
  changed(pairDesign({ segments: ['a', 'b'] }), {
    profiles: { gateway: { name: 'Gateway', multicastTtl: ttl } },
    devices: { 'fw-s1': { profile: 'gateway', settings: { multicastRouting: routing } } },
    segments: { b: { protocols: protocols as string[] } },
  });

testRule(hopLimitLowered, {
  accepted: {
    'devices without a profile': pairDesign(),
    'a TTL that is kept': lowering(['ospf'], true, 'kept'),
    'a gateway that routes no multicast': lowering(['ospf'], false),
    'segments that need none of these protocols': lowering(['ipv4', 'multicast']),
    'a segment that leaves the site through no tunnel': changed(lowering(['ospf']), {
      forwarders: { 'br-s1-b': { circuits: { 'tn-s0-s1-b': null } } },
    }),
  },
  rejected: {
    'OSPF through a gateway that lowers its TTL': {
      design: lowering(['ipv4', 'ospf']),
      findings: [
        {
          sentence: 'fw-s1 lowers the TTL of OSPF of segment B',
          words: 'TTL lowered',
          severity: 'blocking',
          elements: ['devices/fw-s1', 'segments/b'],
          properties: ['devices/fw-s1: settings.multicastRouting', 'profiles/gateway: multicastTtl'],
          fixes: ['Multicast routing off'],
        },
      ],
    },
    'several protocols through a gateway of which only the profile is known': {
      design: lowering(['vrrp', 'pim', 'igmp'], null),
      findings: [{ sentence: 'fw-s1 lowers the TTL of three protocols of segment B', fixes: [] }],
    },
  },
});
