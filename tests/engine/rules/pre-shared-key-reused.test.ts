import { preSharedKeyReused } from '#engine/rules/pre-shared-key-reused.ts';
import { hubDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const key = (vaultEntry: string) => ({
  a: { authentication: { vaultEntry } },
  b: { authentication: { vaultEntry } },
});
const certificate = { authentication: { method: 'certificate', vaultEntry: null } };

testRule(preSharedKeyReused, {
  accepted: {
    'a key for each': hubDesign(3),
    certificates: changed(hubDesign(2), {
      associations: {
        'as-s0-s1': { a: certificate, b: certificate },
        'as-s0-s2': { a: certificate, b: certificate },
      },
    }),
    'an end that names another association’s key, which another check tells': changed(hubDesign(2), {
      associations: { 'as-s0-s2': { b: { authentication: { vaultEntry: 'ipsec s0 s1' } } } },
    }),
  },
  rejected: {
    'two associations with one key': {
      design: changed(hubDesign(2), { associations: { 'as-s0-s2': key('ipsec s0 s1') } }),
      findings: [
        {
          sentence: 'as-s0-s1 and as-s0-s2 share the key "ipsec s0 s1"',
          words: 'key used twice',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'associations/as-s0-s2'],
          fixes: ['A key for each'],
        },
      ],
    },
    'three associations with one key, and an end that names none': {
      design: changed(hubDesign(3), {
        associations: {
          'as-s0-s1': { b: { authentication: null } },
          'as-s0-s2': key('ipsec s0 s1'),
          'as-s0-s3': key('ipsec s0 s1'),
        },
      }),
      findings: [{ sentence: 'Three associations share the key "ipsec s0 s1"', fixes: ['A key for each'] }],
    },
  },
});
