import { associationProposalsDiffer } from '#engine/rules/association-proposals-differ.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const at = (
  end: 'a' | 'b',
  layer: 'ikeProposals' | 'espProposals',
  patch: Record<string, string | number | null>,
) => ({
  associations: { [id]: { [end]: { [layer]: { first: patch } } } },
});
const roomy = { segments: { a: { mtu: 1300 } } };

testRule(associationProposalsDiffer, {
  accepted: {
    'equal proposals': pairDesign(),
    'an end whose proposals are not known': changed(pairDesign(), {
      associations: { [id]: { a: { ikeProposals: null, espProposals: null } } },
    }),
    'a second proposal in common': changed(pairDesign(), {
      associations: {
        [id]: {
          a: {
            espProposals: {
              second: { rank: 'a5', encryption: 'aes-gcm-16', keyBits: 256, group: 19 },
              first: { encryption: 'aes-cbc', integrity: 'hmac-sha2-256-128' },
            },
          },
        },
      },
    }),
  },
  rejected: {
    'one group at each end, and offers the stronger first': {
      design: changed(pairDesign(), at('a', 'ikeProposals', { group: 2 })),
      findings: [
        {
          sentence: 'IKE group 2 at Head office, 19 at Gullhaven',
          words: 'proposals differ',
          severity: 'blocking',
          elements: [`associations/${id}`],
          properties: [`associations/${id}: a.ikeProposals`, `associations/${id}: b.ikeProposals`],
          fixes: ['Add group 19 at Head office', 'Add group 2 at Gullhaven'],
        },
      ],
    },
    'one encryption at each end': {
      design: changed(
        pairDesign(),
        roomy,
        at('b', 'espProposals', { encryption: 'aes-cbc', integrity: 'hmac-sha2-256-128' }),
      ),
      findings: [
        {
          sentence: 'ESP encryption AES-GCM at Head office, AES-CBC at Gullhaven',
          fixes: ['Add AES-GCM at Gullhaven', 'Add AES-CBC at Head office'],
        },
      ],
    },
    'several parts, in IKE and in ESP': {
      design: changed(
        pairDesign(),
        at('a', 'ikeProposals', { group: 20, prf: 'hmac-sha2-512' }),
        at('a', 'espProposals', { keyBits: 128 }),
      ),
      findings: [
        {
          sentence: 'ESP key length 128 bits at Head office, 256 bits at Gullhaven',
          fixes: ['Add 256-bit keys at Head office', 'Add 128-bit keys at Gullhaven'],
        },
        {
          sentence: 'IKE pseudorandom function and group differ between the ends',
          fixes: ['Add HMAC-SHA2-512 at Gullhaven', 'Add HMAC-SHA2-256 at Head office'],
        },
      ],
    },
    'proposals whose parts all occur at both ends, but in no whole one': {
      design: changed(pairDesign(), {
        associations: {
          [id]: {
            a: {
              ikeProposals: {
                first: { group: 19, prf: 'hmac-sha2-512' },
                second: {
                  rank: 'a5',
                  encryption: 'aes-gcm-16',
                  keyBits: 256,
                  prf: 'hmac-sha2-256',
                  group: 20,
                },
              },
            },
            b: {
              ikeProposals: {
                second: {
                  rank: 'a5',
                  encryption: 'aes-gcm-16',
                  keyBits: 256,
                  prf: 'hmac-sha2-512',
                  group: 20,
                },
              },
            },
          },
        },
      }),
      findings: [
        {
          sentence: 'No IKE proposal is alike at Head office and Gullhaven',
          fixes: ['Add AES-GCM at Gullhaven', 'Add AES-GCM at Head office'],
        },
      ],
    },
  },
});
