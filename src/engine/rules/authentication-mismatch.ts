import type { MergePatch } from '../model/merge-patch.ts';
import type { Association } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { sentenceCase } from './wording.ts';

type Authentication = NonNullable<Association['a']['authentication']>;

const described = (authentication: Authentication): string =>
  authentication.method === 'certificate' ? 'certificate' : `key "${authentication.vaultEntry}"`;

const same = (a: Authentication, b: Authentication): boolean =>
  a.method === 'pre-shared-key' && b.method === 'pre-shared-key'
    ? a.vaultEntry === b.vaultEntry
    : a.method === b.method;

export const authenticationMismatch = defineRule({
  id: 'authentication-mismatch',
  title: 'Both ends of an association prove themselves in the same way',
  severity: 'blocking',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'Each end must be able to check what the other presents. A key against a certificate, or two different keys, ends in refusal.',
  seen: 'IKE gets as far as its second exchange and stops there: authentication failed.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.15' }],
  messages: {
    differ: {
      words: 'authentication differs',
      sentence: (v: {
        readonly byA: string;
        readonly placeA: string;
        readonly byB: string;
        readonly placeB: string;
      }) => sentenceCase(`${v.byA} at ${v.placeA}, ${v.byB} at ${v.placeB}`),
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const { authentication: a } = association.a;
      const { authentication: b } = association.b;
      if (a === undefined || b === undefined || same(a, b)) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'differ',
          values: { byA: described(a), placeA: places.a, byB: described(b), placeB: places.b },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'authentication'] })),
          basis: [described(a), described(b)],
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const association = design.associations[id]!;
    const places = associationPlaces(design, association);
    return ends.flatMap((from) => {
      const { authentication } = association[from];
      const to = otherEnd(from);
      if (authentication === undefined) return [];
      const patch: MergePatch =
        authentication.method === 'certificate'
          ? { method: 'certificate', vaultEntry: null }
          : { ...authentication };
      return [
        {
          id: `as-${from}`,
          label: `${authentication.method === 'certificate' ? 'Certificate' : 'Same key'} at ${places[to]}`,
          sentence: `Lets ${places[to]} use the ${described(authentication)} too, as ${places[from]} does.`,
          patch: { associations: { [id]: { [to]: { authentication: patch } } } },
        },
      ];
    });
  },
});
