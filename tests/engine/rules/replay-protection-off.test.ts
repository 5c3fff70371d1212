import { replayProtectionOff } from '#engine/rules/replay-protection-off.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const windows = (a: number | null, b: number | null, trusted = false) =>
  changed(pairDesign(), {
    associations: { 'as-s0-s1': { a: { replayWindow: a }, b: { replayWindow: b } } },
    transports: { coast: { trusted } },
  });

testRule(replayProtectionOff, {
  accepted: {
    'windows at both ends': pairDesign(),
    'windows that are not known': windows(null, null),
  },
  rejected: {
    'no check at one end': {
      design: windows(64, 0),
      findings: [
        {
          sentence: 'No replay check on as-s0-s1 at Gullhaven',
          words: 'no replay check',
          severity: 'degrading',
          properties: ['associations/as-s0-s1: b.replayWindow'],
          fixes: ['Window of 64 packets'],
        },
      ],
    },
    'no check at both ends, over a transport that is trusted': {
      design: windows(0, 0, true),
      findings: [
        {
          sentence: 'No replay check on as-s0-s1 at both ends',
          severity: 'advisory',
          fixes: ['Window of 128 packets'],
        },
      ],
    },
  },
});
