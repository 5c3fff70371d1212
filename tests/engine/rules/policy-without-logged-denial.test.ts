import { policyWithoutLoggedDenial } from '#engine/rules/policy-without-logged-denial.ts';
import { filtered, logTheRest, permit } from '../../support/cross-connect.ts';
import { pairDesign } from '../../support/designs.ts';
import { testRule } from '../../support/rule-tester.ts';

const all = permit({ frames: 'any' });
const ip = [permit({ frames: 'arp' }), permit({ frames: 'ipv4' })];
const other = {
  forwarders: {
    'br-s0-a': {
      kind: 'cross-connect',
      policy: { only: { rank: 'a', action: 'permit', direction: 'both', frames: 'any' } },
    },
  },
} as const;

testRule(policyWithoutLoggedDenial, {
  accepted: {
    bridges: pairDesign(),
    'a policy that ends with a logged denial': filtered([...ip, logTheRest]),
    'a policy that permits nothing, which another check tells': filtered([
      { action: 'deny', direction: 'both', frames: 'any' },
    ]),
  },
  rejected: {
    'a policy that ends with a permission': {
      design: filtered(ip),
      findings: [
        {
          sentence: 'br-110 at Gullhaven drops the rest without a log',
          words: 'drops not logged',
          severity: 'advisory',
          elements: ['forwarders/br-s1-a'],
          properties: ['forwarders/br-s1-a: policy'],
          fixes: ['Deny and log the rest'],
        },
      ],
    },
    'two policies, once, one of them with a denial that logs nothing': {
      design: filtered([all, { ...logTheRest, log: false }], {}, other),
      findings: [{ sentence: 'Two policies drop the rest without a log', fixes: ['Deny and log the rest'] }],
    },
    'a denial that logs a part of the rest': {
      design: filtered([...ip, { ...logTheRest, protocol: 17 }]),
      findings: [
        { sentence: 'br-110 at Gullhaven drops the rest without a log', fixes: ['Deny and log the rest'] },
      ],
    },
  },
});
