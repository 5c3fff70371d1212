import { stormLimitTooLow } from '#engine/rules/storm-limit-too-low.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const limits = (gateway: number | null, access: number | null) =>
  changed(pairDesign({ hostsPerSite: 60 }), {
    devices: {
      'fw-s0': { ports: { lan1: { stormLimitPps: gateway } } },
      'sw-s0': { ports: { p2: { stormLimitPps: access } } },
    },
  });

testRule(stormLimitTooLow, {
  accepted: {
    'limits with room': pairDesign(),
    'limits that just do': limits(60, 1),
  },
  rejected: {
    'a limit below one broadcast for each host behind a gateway’s port': {
      design: limits(59, 500),
      findings: [
        {
          sentence: 'Storm limit 59/s at lan1 of fw-s0, with 60 hosts behind it',
          words: 'storm limit low',
          severity: 'degrading',
          elements: ['devices/fw-s0/lan1'],
          properties: ['devices/fw-s0/lan1: stormLimitPps'],
          fixes: ['Set it to 600/s'],
        },
      ],
    },
    'a limit that lets nothing pass': {
      design: limits(null, 0),
      findings: [
        {
          sentence: 'Storm limit 0/s at port 2 of sw-s0, with one host behind it',
          fixes: ['Set it to 500/s'],
        },
      ],
    },
  },
});
