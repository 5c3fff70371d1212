import { forwardSecrecyOff } from '#engine/rules/forward-secrecy-off.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const secrecy = (a: boolean | null, b: boolean | null, group: number | null = null) => {
  const end = (perfectForwardSecrecy: boolean | null) => ({
    perfectForwardSecrecy,
    espProposals: { first: { group } },
  });
  return changed(pairDesign(), { associations: { 'as-s0-s1': { a: end(a), b: end(b) } } });
};

testRule(forwardSecrecyOff, {
  accepted: {
    'forward secrecy at both ends': pairDesign(),
    'what is not known': secrecy(null, null),
    'one end only, which another check tells': secrecy(true, false),
  },
  rejected: {
    'no forward secrecy at either end': {
      design: secrecy(false, false),
      findings: [
        {
          sentence: 'as-s0-s1 renews child keys without forward secrecy',
          words: 'no forward secrecy',
          severity: 'advisory',
          elements: ['associations/as-s0-s1'],
          fixes: ['Turn it on at both ends'],
        },
      ],
    },
  },
});
