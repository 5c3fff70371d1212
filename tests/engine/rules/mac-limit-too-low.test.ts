import { macLimitTooLow } from '#engine/rules/mac-limit-too-low.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const limits = (gateway: number | null, access: number | null) =>
  changed(pairDesign({ segments: ['a', 'b'], hostsPerSite: 2 }), {
    devices: {
      'fw-s0': { ports: { lan1: { macLimit: gateway } } },
      'sw-s0': { ports: { p2: { macLimit: access } } },
    },
  });

testRule(macLimitTooLow, {
  accepted: {
    'no limits': limits(null, null),
    'limits that just do': limits(4, 1),
  },
  rejected: {
    'a limit below the hosts of all segments behind a gateway’s port': {
      design: limits(3, null),
      findings: [
        {
          sentence: 'MAC limit 3 at lan1 of fw-s0, with four hosts behind it',
          words: 'MAC limit low',
          severity: 'degrading',
          elements: ['devices/fw-s0/lan1'],
          properties: ['devices/fw-s0/lan1: macLimit'],
          fixes: ['Set it to 6'],
        },
      ],
    },
    'a limit that takes no host at an access port': {
      design: limits(null, 0),
      findings: [
        { sentence: 'MAC limit 0 at port 2 of sw-s0, with one host behind it', fixes: ['Set it to 2'] },
      ],
    },
  },
});
