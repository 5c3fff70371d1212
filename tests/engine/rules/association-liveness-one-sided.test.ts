import { associationLivenessOneSided } from '#engine/rules/association-liveness-one-sided.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const liveness = (a: string | null, b: string | null) =>
  changed(pairDesign(), {
    associations: {
      [id]: { ...(a === '' ? {} : { a: { liveness: a } }), ...(b === '' ? {} : { b: { liveness: b } }) },
    },
  });

testRule(associationLivenessOneSided, {
  accepted: {
    'both ends that check': pairDesign(),
    'both ends that do not': liveness('off', 'off'),
    'an end of which nothing is known': liveness(null, ''),
    'an end that does not, beside one of which nothing is known': liveness(null, 'off'),
  },
  rejected: {
    'one end that does not check': {
      design: liveness('', 'off'),
      findings: [
        {
          sentence: 'Only Head office checks that its peer is alive',
          words: 'liveness one-sided',
          severity: 'degrading',
          elements: [`associations/${id}`],
          properties: [`associations/${id}: b.liveness`],
          fixes: ['Check at both ends'],
        },
      ],
    },
  },
});
