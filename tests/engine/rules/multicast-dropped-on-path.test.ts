import type { Protocol } from '#engine/model/intent.ts';
import { multicastDroppedOnPath } from '#engine/rules/multicast-dropped-on-path.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const dropping = (...protocols: readonly Protocol[]) =>
  changed(pairDesign(), {
    segments: { a: { protocols: [...protocols] } },
    forwarders: { 'br-s0-a': { multicast: 'drop' } },
  });

testRule(multicastDroppedOnPath, {
  accepted: {
    'a segment that needs none': dropping('ipv4'),
    'a segment of IPv6 alone, which is another rule’s': dropping('ipv6'),
    'a forwarder that floods it': changed(dropping('ipv4', 'ospf'), {
      forwarders: { 'br-s0-a': { multicast: 'flood' } },
    }),
    'a forwarder that no tunnel reaches': changed(dropping('ipv4', 'ospf'), {
      forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': null } } },
    }),
  },
  rejected: {
    'OSPF whose hellos a bridge drops': {
      design: dropping('ipv4', 'ospf'),
      findings: [
        {
          sentence: 'br-110 at Head office drops multicast of segment A',
          words: 'multicast dropped',
          severity: 'blocking',
          elements: ['forwarders/br-s0-a', 'segments/a'],
          properties: ['forwarders/br-s0-a: multicast', 'segments/a: protocols'],
          fixes: ['Pass it on'],
        },
      ],
    },
    'IPv6 beside IPv4, whose neighbours are found by multicast': {
      design: dropping('ipv4', 'ipv6'),
      findings: [{ sentence: 'br-110 at Head office drops multicast of segment A', fixes: ['Pass it on'] }],
    },
  },
});
