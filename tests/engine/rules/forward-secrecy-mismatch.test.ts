import { forwardSecrecyMismatch } from '#engine/rules/forward-secrecy-mismatch.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const secrecy = (a: object, b: object) =>
  changed(pairDesign(), { associations: { 'as-s0-s1': { a, b } as never } });
const group = (number: number | null) => ({ espProposals: { first: { group: number } } });

testRule(forwardSecrecyMismatch, {
  accepted: {
    'both ends with one group': pairDesign(),
    'neither end': secrecy({ perfectForwardSecrecy: false }, { perfectForwardSecrecy: false }),
    'an end of which nothing is known': secrecy({ perfectForwardSecrecy: null, ...group(null) }, {}),
    'a group that one end leaves open': secrecy(group(null), {}),
    'two groups of which one is common': secrecy(
      { espProposals: { second: { rank: 'b', encryption: 'aes-gcm-16', keyBits: 256, group: 20 } } },
      group(20),
    ),
  },
  rejected: {
    'forward secrecy at one end only': {
      design: secrecy({}, { perfectForwardSecrecy: false }),
      findings: [
        {
          sentence: 'Only Head office asks for forward secrecy of child keys',
          words: 'rekey will fail',
          severity: 'degrading',
          elements: ['associations/as-s0-s1'],
          properties: [
            'associations/as-s0-s1: a.perfectForwardSecrecy',
            'associations/as-s0-s1: b.perfectForwardSecrecy',
          ],
          fixes: ['Group 19 at Gullhaven'],
        },
      ],
    },
    'groups for child keys with nothing in common': {
      design: secrecy(group(20), {}),
      findings: [
        {
          sentence: 'Rekey group 20 at Head office, 19 at Gullhaven',
          properties: ['associations/as-s0-s1: a.espProposals', 'associations/as-s0-s1: b.espProposals'],
          fixes: ['Group 20 at Gullhaven', 'Group 19 at Head office'],
        },
      ],
    },
    'an end that says it by a group alone': {
      design: secrecy({ perfectForwardSecrecy: null }, { perfectForwardSecrecy: false, ...group(null) }),
      findings: [
        {
          sentence: 'Only Head office asks for forward secrecy of child keys',
          fixes: ['Group 19 at Gullhaven'],
        },
      ],
    },
  },
});
