import { livenessShorterThanFailover } from '#engine/rules/liveness-shorter-than-failover.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });
const waiting = (intervalSeconds: number, tries: number, failoverUs = 5_500_000) =>
  changed(pair, {
    devices: { 'fw-s0': { failoverUs } },
    associations: { 'as-s0-s1': { b: { liveness: { intervalSeconds, tries } } } },
  });

testRule(livenessShorterThanFailover, {
  accepted: {
    'a peer that waits long enough': waiting(2, 3),
    'a pair whose failover takes nobody knows how long': changed(waiting(1, 3), {
      devices: { 'fw-s0': { failoverUs: null } },
    }),
    'a pair whose members share no state, where waiting saves nothing': changed(waiting(1, 3), {
      devices: { 'fw-s0': { stateSync: false } },
    }),
    'a single gateway': pairDesign(),
  },
  rejected: {
    'a peer that gives up after three seconds': {
      design: waiting(1, 3),
      findings: [
        {
          sentence: 'Gullhaven waits 3 s for fw-s0, which fails over in 5.5 s',
          words: 'gives up early',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'devices/fw-s0'],
          properties: ['associations/as-s0-s1: b.liveness', 'devices/fw-s0: failoverUs'],
          fixes: ['Try 7 times'],
        },
      ],
    },
    'one that gives up at the very moment': {
      design: waiting(3, 2, 6_000_000),
      findings: [
        { sentence: 'Gullhaven waits 6 s for fw-s0, which fails over in 6 s', fixes: ['Try 4 times'] },
      ],
    },
  },
});
