import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

export const ikeVersionMismatch = defineRule({
  id: 'ike-version-mismatch',
  title: 'Both ends of an association speak the same version of IKE',
  severity: 'blocking',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'The two versions don’t understand each other, so that no association comes up. IKEv1 is historic besides.',
  seen: 'The answering end drops the first packet or complains of its version.',
  sources: [
    { document: 'RFC 9395', clause: 'section 3' },
    { document: 'RFC 7296', clause: 'section 2.5' },
  ],
  messages: {
    differ: {
      words: 'IKE versions differ',
      sentence: (v: {
        readonly versionA: number;
        readonly placeA: string;
        readonly versionB: number;
        readonly placeB: string;
      }) => `IKEv${v.versionA} at ${v.placeA}, IKEv${v.versionB} at ${v.placeB}`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const { ikeVersion: versionA } = association.a;
      const { ikeVersion: versionB } = association.b;
      if (versionA === undefined || versionB === undefined || versionA === versionB) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'differ',
          values: { versionA, placeA: places.a, versionB, placeB: places.b },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'ikeVersion'] })),
          basis: [versionA, versionB],
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    return [
      {
        id: 'use-2',
        label: 'Use IKEv2 at both ends',
        sentence: `Lets both ends of ${design.associations[id]!.name} use IKEv2.`,
        patch: { associations: { [id]: { a: { ikeVersion: 2 }, b: { ikeVersion: 2 } } } },
      },
    ];
  },
});
