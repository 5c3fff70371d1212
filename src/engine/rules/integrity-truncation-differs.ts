import { negotiate } from '../network/negotiate.ts';
import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { strongEspProposal } from './strong-suite.ts';

export const integrityTruncationDiffers = defineRule({
  id: 'integrity-truncation-differs',
  title: 'Both ends cut the integrity value to the same length',
  severity: 'blocking',
  looksAt: ['associations', 'gateways', 'profiles', 'sites'],
  why: 'Some equipment cuts HMAC-SHA2-256 to 96 bits, as an early draft said, instead of 128. Keys are made, but each end refuses every packet of the other.',
  seen: 'The association is up at both ends, and both count an integrity failure for every packet.',
  sources: [
    { document: 'RFC 8221', clause: 'section 6' },
    { document: 'RFC 4868', clause: 'section 2.3' },
  ],
  messages: {
    differ: {
      words: 'integrity length differs',
      sentence: (v: {
        readonly bitsA: number;
        readonly placeA: string;
        readonly bitsB: number;
        readonly placeB: string;
      }) => `HMAC-SHA2-256 cut to ${v.bitsA} bits at ${v.placeA}, ${v.bitsB} at ${v.placeB}`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const { esp } = negotiate(association);
      if (esp.state !== 'agreed' || esp.proposal.integrity !== 'hmac-sha2-256-128') return [];
      const [bitsA, bitsB] = ends.map((end) => {
        const { profile } = design.devices[association[end].device]!;
        return profile === undefined ? undefined : design.profiles[profile]!.hmacSha256Bits;
      });
      if (bitsA === undefined || bitsB === undefined || bitsA === bitsB) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'differ',
          values: { bitsA, placeA: places.a, bitsB, placeB: places.b },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'espProposals', esp[end], 'integrity'] })),
          basis: [bitsA, bitsB],
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const { esp } = negotiate(design.associations[id]!);
    if (esp.state !== 'agreed') return [];
    const { encryption, keyBits } = strongEspProposal;
    return [
      {
        id: 'combined',
        label: 'AES-GCM at both ends',
        sentence: 'Replaces the proposal by AES-GCM, which needs no HMAC, at both ends.',
        patch: {
          associations: {
            [id]: Object.fromEntries(
              ends.map((end) => [
                end,
                { espProposals: { [esp[end]]: { encryption, keyBits, integrity: null } } },
              ]),
            ),
          },
        },
      },
    ];
  },
});
