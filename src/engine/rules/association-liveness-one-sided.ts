import { ends, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

export const associationLivenessOneSided = defineRule({
  id: 'association-liveness-one-sided',
  title: 'Both ends of an association check that the other is alive, or neither does',
  severity: 'degrading',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'The end that doesn’t check keeps sending into keys that the other has long dropped.',
  seen: 'After a failure one gateway shows the association as up and the other as down; traffic from the first vanishes until its keys run out.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.4' }],
  messages: {
    oneSided: {
      words: 'liveness one-sided',
      sentence: (v: { readonly place: string; readonly association: string }) =>
        `Only ${v.place} checks that its peer is alive`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const off = ends.find((end) => association[end].liveness === 'off');
      if (off === undefined) return [];
      const far = association[otherEnd(off)].liveness;
      // What the other end does isn't known, or it is off too, which is a decision.
      if (far === undefined || far === 'off') return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'oneSided',
          values: { place: places[otherEnd(off)], association: association.name },
          elements: [ref],
          properties: [{ ref, path: [off, 'liveness'] }],
          basis: [off],
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const association = design.associations[id]!;
    return ends.flatMap((end) => {
      const { liveness } = association[otherEnd(end)];
      if (association[end].liveness !== 'off' || liveness === undefined || liveness === 'off') return [];
      const place = associationPlaces(design, association)[end];
      return [
        {
          id: 'check-both',
          label: 'Check at both ends',
          sentence: `Lets ${place} check every ${liveness.intervalSeconds} s, ${liveness.tries} tries, as ${fault.values.place} does.`,
          patch: { associations: { [id]: { [end]: { liveness } } } },
        },
      ];
    });
  },
});
