import { activeActiveSharesAssociation } from '#engine/rules/active-active-shares-association.ts';
import { hubDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = (spokes: number, mode: string, members: string | null = null) =>
  changed(hubDesign(spokes, { hub: 'ha-pair' }), {
    devices: { 'fw-s0': { mode } },
    links: { 'ld-s0-coast': { members } },
  });

testRule(activeActiveSharesAssociation, {
  accepted: {
    'a pair of which one member stands by': pair(1, 'active-standby'),
    'an association that lands on one member': pair(1, 'active-active', '1'),
  },
  rejected: {
    'two active members on one association': {
      design: pair(1, 'active-active'),
      findings: [
        {
          sentence: 'Both members of fw-s0 send on as-s0-s1',
          words: 'keys shared',
          severity: 'blocking',
          elements: ['devices/fw-s0', 'associations/as-s0-s1'],
          properties: ['devices/fw-s0: mode'],
          fixes: ['One active member'],
        },
      ],
    },
    'two active members on three associations, once': {
      design: pair(3, 'active-active', 'both'),
      findings: [
        { sentence: 'Both members of fw-s0 send on three associations', fixes: ['One active member'] },
      ],
    },
  },
});
