import { replayWindowTooSmall } from '#engine/rules/replay-window-too-small.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

// 1,000 Mbit/s for 3 ms are 250 packets of 1,500 bytes.
const several = (coast: object, window: number | null, landing: object = {}) =>
  changed(pairDesign(), {
    transports: {
      coast: { paths: 'several', rateBps: 1_000_000_000, jitterUs: 3_000, mtu: 1500, ...coast } as never,
    },
    associations: { 'as-s0-s1': { a: { replayWindow: 4096 }, b: { replayWindow: window } } },
    links: { 'ld-s1-coast': landing as never },
  });

testRule(replayWindowTooSmall, {
  accepted: {
    'one path': several({ paths: 'one' }, 64),
    'a window that is wide enough': several({}, 251),
    'a window that is not known': several({}, null),
    'no window, which another check tells': several({}, 0),
    'a transport whose rate is not known': several({ rateBps: null }, 64),
    'an end that receives too slowly to be overtaken': several({}, 64, { rateDownBps: 100_000_000 }),
  },
  rejected: {
    'a window narrower than what may overtake': {
      design: several({}, 250),
      findings: [
        {
          sentence: 'Replay window 250 at Gullhaven, but 250 packets may overtake',
          words: 'replay window small',
          severity: 'degrading',
          elements: ['associations/as-s0-s1'],
          properties: ['associations/as-s0-s1: b.replayWindow'],
          fixes: ['Window of 256 packets'],
        },
      ],
    },
    'paths so far apart that no window would do': {
      design: several({ rateBps: 100_000_000_000, jitterUs: 60_000 }, 4096),
      findings: [
        { sentence: 'Replay window 4096 at Head office, but 500000 packets may overtake', fixes: [] },
        { sentence: 'Replay window 4096 at Gullhaven, but 500000 packets may overtake', fixes: [] },
      ],
    },
  },
});
