import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

export const associationNobodyStarts = defineRule({
  id: 'association-nobody-starts',
  title: 'At least one end of an association starts it',
  severity: 'blocking',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'Two ends that only answer wait for each other forever.',
  seen: 'No IKE packet is ever sent; both gateways show the association as waiting.',
  sources: [{ document: 'RFC 7296', clause: 'section 1.2' }],
  messages: {
    bothAnswer: {
      words: 'nobody starts',
      sentence: (v: { readonly association: string; readonly placeA: string; readonly placeB: string }) =>
        `Nobody starts: ${v.placeA} and ${v.placeB} both only answer`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      if (ends.some((end) => association[end].start !== 'answers')) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'bothAnswer',
          values: { association: association.name, placeA: places.a, placeB: places.b },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'start'] })),
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const association = design.associations[id]!;
    const places = associationPlaces(design, association);
    return ends.map((end) => ({
      id: `start-${end}`,
      label: `Let ${places[end]} start`,
      sentence: `Lets ${places[end]} start ${association.name} as soon as it can.`,
      patch: { associations: { [id]: { [end]: { start: 'starts' } } } },
    }));
  },
});
