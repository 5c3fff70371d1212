import { associationWithoutLiveness } from '#engine/rules/association-without-liveness.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const off = { liveness: 'off' } as const;

testRule(associationWithoutLiveness, {
  accepted: {
    'both ends check': pairDesign(),
    'one end checks, which is another rule’s': changed(pairDesign(), {
      associations: { 'as-s0-s1': { a: off } },
    }),
    'an end of which nothing is known': changed(pairDesign(), {
      associations: { 'as-s0-s1': { a: off, b: { liveness: null } } },
    }),
  },
  rejected: {
    'no end checks': {
      design: changed(pairDesign(), { associations: { 'as-s0-s1': { a: off, b: off } } }),
      findings: [
        {
          sentence: 'No end of as-s0-s1 checks that its peer is alive',
          words: 'nobody checks',
          severity: 'degrading',
          elements: ['associations/as-s0-s1'],
          properties: ['associations/as-s0-s1: a.liveness', 'associations/as-s0-s1: b.liveness'],
          fixes: ['Check at both ends'],
        },
      ],
    },
  },
});
