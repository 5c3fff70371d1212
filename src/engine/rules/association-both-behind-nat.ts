import { associationPath } from '../network/association-path.ts';
import { associationStates } from '../network/can-come-up.ts';
import { defineRule } from './define-rule.ts';
import { meetingFixes } from './meeting-fixes.ts';
import { associationPlaces } from './places.ts';

export const associationBothBehindNat = defineRule({
  id: 'association-both-behind-nat',
  title: 'At least one end of an association can be reached from outside',
  severity: 'blocking',
  looksAt: ['associations', 'links', 'transports', 'devices', 'sites'],
  why: 'A NAT lets nothing in that was not asked for from inside. With one at both ends neither first packet arrives.',
  seen: 'Both ends send the first IKE packet again and again; neither sees the one of the other.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23' }],
  messages: {
    bothBehindNat: {
      words: 'NAT at both',
      sentence: (v: { readonly association: string; readonly placeA: string; readonly placeB: string }) =>
        `${v.placeA} and ${v.placeB} are both behind NAT that forwards nothing`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...associationStates(network)].flatMap(([id, { reasons }]) => {
      if (!reasons.some(({ code }) => code === 'both-behind-nat')) return [];
      const path = associationPath(network, id);
      const association = design.associations[id]!;
      const places = associationPlaces(design, association);
      const landings = path.ok ? [path.landingA, path.landingB] : [];
      return [
        {
          message: 'bothBehindNat',
          values: { association: association.name, placeA: places.a, placeB: places.b },
          elements: [
            { collection: 'associations', id },
            ...landings.map((landing) => ({ collection: 'links' as const, id: landing })),
          ],
          identity: [id],
          properties: landings.map((landing) => ({
            ref: { collection: 'links' as const, id: landing },
            path: ['nat'],
          })),
          basis: landings,
        },
      ];
    });
  },
  fixes: (fault, network) => meetingFixes(network, fault.elements[0]!.id),
});
