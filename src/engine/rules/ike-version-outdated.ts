import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';

export const ikeVersionOutdated = defineRule({
  id: 'ike-version-outdated',
  title: 'Associations are made by IKE version 2',
  severity: 'degrading',
  looksAt: ['associations'],
  why: 'IKE version 1 has been historic since 2023: nobody mends it, and its usual settings are weak.',
  seen: 'Nothing, until newer software of one end drops it; then the association doesn’t come back after an update.',
  sources: [{ document: 'RFC 9395', clause: 'section 3' }],
  messages: {
    outdated: {
      words: 'IKEv1 in use',
      sentence: (v: { readonly association: string }) => `${v.association} is made by IKEv1`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const old = ends.filter((end) => association[end].ikeVersion === 1);
      // Versions that differ are a fault of their own, which stops the association altogether.
      if (old.length === 0 || ends.some((end) => association[end].ikeVersion === 2)) return [];
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'outdated',
          values: { association: association.name },
          elements: [ref],
          properties: old.map((end) => ({ ref, path: [end, 'ikeVersion'] })),
        },
      ];
    }),
  fixes: ({ elements, values }) => [
    {
      id: 'version-2',
      label: 'IKEv2 at both ends',
      sentence: `Lets both ends of ${values.association} speak IKE version 2.`,
      patch: { associations: { [elements[0]!.id]: { a: { ikeVersion: 2 }, b: { ikeVersion: 2 } } } },
    },
  ],
});
