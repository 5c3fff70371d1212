import { ikeVersionMismatch } from '#engine/rules/ike-version-mismatch.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const versions = (a: 1 | 2 | null, b: 1 | 2 | null) =>
  changed(pairDesign(), { associations: { [id]: { a: { ikeVersion: a }, b: { ikeVersion: b } } } });

testRule(ikeVersionMismatch, {
  accepted: {
    'IKEv2 at both ends': pairDesign(),
    'an end whose version is not known': versions(null, 1),
  },
  rejected: {
    'IKEv2 at one end and IKEv1 at the other': {
      design: versions(2, 1),
      findings: [
        {
          sentence: 'IKEv2 at Head office, IKEv1 at Gullhaven',
          words: 'IKE versions differ',
          severity: 'blocking',
          elements: [`associations/${id}`],
          properties: [`associations/${id}: a.ikeVersion`, `associations/${id}: b.ikeVersion`],
          fixes: ['Use IKEv2 at both ends'],
        },
      ],
    },
  },
});
