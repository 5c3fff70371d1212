import { authenticationMismatch } from '#engine/rules/authentication-mismatch.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const certificate = { authentication: { method: 'certificate', vaultEntry: null } };

testRule(authenticationMismatch, {
  accepted: {
    'one key at both ends': pairDesign(),
    'certificates at both ends': changed(pairDesign(), {
      associations: { [id]: { a: certificate, b: certificate } },
    }),
    'an end of which nothing is known': changed(pairDesign(), {
      associations: { [id]: { a: { authentication: null } } },
    }),
  },
  rejected: {
    'a certificate at one end and a key at the other': {
      design: changed(pairDesign(), { associations: { [id]: { a: certificate } } }),
      findings: [
        {
          sentence: 'Certificate at Head office, key "ipsec s0 s1" at Gullhaven',
          words: 'authentication differs',
          severity: 'blocking',
          elements: [`associations/${id}`],
          properties: [`associations/${id}: a.authentication`, `associations/${id}: b.authentication`],
          fixes: ['Certificate at Gullhaven', 'Same key at Head office'],
        },
      ],
    },
    'two keys': {
      design: changed(pairDesign(), {
        associations: { [id]: { b: { authentication: { vaultEntry: 'ipsec s1 s0' } } } },
      }),
      findings: [
        {
          sentence: 'Key "ipsec s0 s1" at Head office, key "ipsec s1 s0" at Gullhaven',
          fixes: ['Same key at Gullhaven', 'Same key at Head office'],
        },
      ],
    },
  },
});
