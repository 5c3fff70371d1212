import type { MergePatch } from '#engine/model/merge-patch.ts';
import { ikeFragmentsDropped } from '#engine/rules/ike-fragments-dropped.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const dropping: MergePatch = { transports: { coast: { filters: ['fragments'] } } };
const certificate = { authentication: { method: 'certificate', vaultEntry: null } } as const;
const both = (more: MergePatch = {}): MergePatch => ({
  associations: {
    'as-s0-s1': {
      a: { ...certificate, ...(more as object) },
      b: { ...certificate, ...(more as object) },
    },
  },
});

testRule(ikeFragmentsDropped, {
  accepted: {
    'a transport that passes fragments': changed(pairDesign(), both({ ikeFragmentation: false })),
    'a pre-shared key, whose messages are short': changed(pairDesign(), dropping),
    'IKE that cuts its messages itself': changed(pairDesign(), dropping, both({ ikeFragmentation: true })),
  },
  rejected: {
    'certificates in messages that IP must cut': {
      design: changed(pairDesign(), dropping, both({ ikeFragmentation: false })),
      findings: [
        {
          sentence: 'Coastal access drops the fragments of as-s0-s1',
          words: 'IKE fragments dropped',
          severity: 'blocking',
          elements: ['associations/as-s0-s1', 'transports/coast'],
          fixes: ['Let IKE fragment'],
        },
      ],
    },
    'certificates where nobody says who cuts': {
      design: changed(pairDesign(), dropping, both()),
      findings: [
        {
          sentence: 'Whether IKE fragments as-s0-s1 itself is not known',
          severity: 'advisory',
          properties: [
            'associations/as-s0-s1: a.ikeFragmentation',
            'associations/as-s0-s1: b.ikeFragmentation',
          ],
          fixes: ['Let IKE fragment'],
        },
      ],
    },
  },
});
