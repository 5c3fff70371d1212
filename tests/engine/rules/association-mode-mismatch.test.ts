import { associationModeMismatch } from '#engine/rules/association-mode-mismatch.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const modes = (a: string | null, b: string | null) =>
  changed(pairDesign(), { associations: { 'as-s0-s1': { a: { mode: a }, b: { mode: b } } } });

testRule(associationModeMismatch, {
  accepted: {
    'tunnel mode at both ends': pairDesign(),
    'transport mode at both ends': modes('transport', 'transport'),
    'a mode that is not known': modes('transport', null),
  },
  rejected: {
    'transport mode that meets tunnel mode': {
      design: modes('tunnel', 'transport'),
      findings: [
        {
          sentence: 'Transport mode at Gullhaven, tunnel mode at Head office',
          words: 'modes differ',
          severity: 'degrading',
          elements: ['associations/as-s0-s1'],
          properties: ['associations/as-s0-s1: a.mode', 'associations/as-s0-s1: b.mode'],
          fixes: ['Tunnel mode at both ends'],
        },
      ],
    },
  },
});
