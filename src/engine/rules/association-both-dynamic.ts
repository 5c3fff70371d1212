import { associationPath } from '../network/association-path.ts';
import { associationStates } from '../network/can-come-up.ts';
import { defineRule } from './define-rule.ts';
import { meetingFixes } from './meeting-fixes.ts';
import { associationPlaces } from './places.ts';

export const associationBothDynamic = defineRule({
  id: 'association-both-dynamic',
  title: 'At least one end of an association has a lasting address or name',
  severity: 'blocking',
  looksAt: ['associations', 'links', 'transports', 'devices', 'sites'],
  why: 'Neither end knows where to send the first packet, since both outside addresses change.',
  seen: 'The association works until an address changes, then stays down until somebody looks up the new one by hand.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23' }, 'common practice, no source'],
  messages: {
    bothDynamic: {
      words: 'both dynamic',
      sentence: (v: { readonly association: string; readonly placeA: string; readonly placeB: string }) =>
        `${v.placeA} and ${v.placeB} both have changing addresses and no name`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...associationStates(network)].flatMap(([id, { reasons }]) => {
      if (!reasons.some(({ code }) => code === 'both-dynamic')) return [];
      const path = associationPath(network, id);
      const association = design.associations[id]!;
      const places = associationPlaces(design, association);
      const landings = path.ok ? [path.landingA, path.landingB] : [];
      return [
        {
          message: 'bothDynamic',
          values: { association: association.name, placeA: places.a, placeB: places.b },
          elements: [
            { collection: 'associations', id },
            ...landings.map((landing) => ({ collection: 'links' as const, id: landing })),
          ],
          identity: [id],
          properties: landings.map((landing) => ({
            ref: { collection: 'links' as const, id: landing },
            path: ['dynamic'],
          })),
          basis: landings,
        },
      ];
    });
  },
  fixes: (fault, network) => meetingFixes(network, fault.elements[0]!.id),
});
