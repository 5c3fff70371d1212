import type { Protocol } from '#engine/model/intent.ts';
import { neighboursGiveUpEarly } from '#engine/rules/neighbours-give-up-early.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const waiting = (neighbourTimeoutUs: number, ...protocols: readonly Protocol[]) =>
  changed(pairDesign({ hub: 'ha-pair' }), {
    segments: { a: { protocols: ['ipv4', ...protocols], neighbourTimeoutUs } },
    devices: { 'fw-s0': { failoverUs: 2_000_000 } },
    transports: { coast: { jitterUs: 3_000 } },
  });

testRule(neighboursGiveUpEarly, {
  accepted: {
    'neighbours that outlive a failover': waiting(3_000_000, 'bfd', 'ospf'),
    'a segment on which nobody watches a neighbour': waiting(300_000, 'dhcp'),
    'timers that nobody has stated': pairDesign({ hub: 'ha-pair' }),
    'a pair of which no time is known': changed(waiting(300_000, 'vrrp'), {
      devices: { 'fw-s0': { failoverUs: null } },
    }),
  },
  rejected: {
    'BFD that is faster than a failover': {
      design: waiting(900_000, 'bfd'),
      findings: [
        {
          sentence: 'Neighbours on segment A give up after 900 ms, fw-s0 fails over in 2 s',
          words: 'neighbours too hasty',
          severity: 'degrading',
          elements: ['segments/a', 'devices/fw-s0'],
          properties: ['segments/a: neighbourTimeoutUs', 'devices/fw-s0: failoverUs'],
          fixes: ['Wait 3 s'],
        },
      ],
    },
    'a gateway group whose messages are closer than the transport is even': {
      design: changed(waiting(150_000, 'vrrp'), {
        devices: { 'fw-s0': { failoverUs: null } },
        transports: { coast: { jitterUs: 60_000 } },
      }),
      findings: [
        {
          sentence: 'Neighbours on segment A give up after 150 ms, Coastal access is uneven by up to 60 ms',
          properties: ['segments/a: neighbourTimeoutUs', 'transports/coast: jitterUs'],
          fixes: ['Wait 270 ms'],
        },
      ],
    },
  },
});
