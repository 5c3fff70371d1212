import { associationNobodyStarts } from '#engine/rules/association-nobody-starts.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const start = (a: string | null, b: string | null) => ({
  associations: { [id]: { a: { start: a }, b: { start: b } } },
});

testRule(associationNobodyStarts, {
  accepted: {
    'one end that starts': pairDesign(),
    'one end that starts on first traffic': changed(pairDesign(), start('on-traffic', 'answers')),
    'an end whose role is not known': changed(pairDesign(), start(null, 'answers')),
  },
  rejected: {
    'two ends that only answer': {
      design: changed(pairDesign(), start('answers', 'answers')),
      findings: [
        {
          sentence: 'Nobody starts: Head office and Gullhaven both only answer',
          words: 'nobody starts',
          severity: 'blocking',
          elements: [`associations/${id}`],
          properties: [`associations/${id}: a.start`, `associations/${id}: b.start`],
          fixes: ['Let Head office start', 'Let Gullhaven start'],
        },
      ],
    },
    'two ends that only answer, and lets the one start that only can': {
      design: changed(pairDesign(), start('answers', 'answers'), {
        links: { 'ld-s1-coast': { dynamic: true } },
      }),
      findings: [
        {
          sentence: 'Nobody starts: Head office and Gullhaven both only answer',
          fixes: ['Let Gullhaven start'],
        },
      ],
    },
  },
});
