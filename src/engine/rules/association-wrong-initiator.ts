import { associationPath } from '../network/association-path.ts';
import { associationStates } from '../network/can-come-up.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

export const associationWrongInitiator = defineRule({
  id: 'association-wrong-initiator',
  title: 'The end that can’t be reached from outside starts the association',
  severity: 'blocking',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'A first packet can’t be sent to an end behind NAT or with a changing address. If that end only answers, nobody ever reaches it.',
  seen: 'The other end sends the first IKE packet again and again without an answer; nothing arrives at this one.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23' }],
  messages: {
    behindNat: {
      words: 'wrong end starts',
      sentence: (v: { readonly association: string; readonly place: string }) =>
        `${v.place} only answers, but NAT lets nobody in to ask`,
    },
    dynamic: {
      words: 'wrong end starts',
      sentence: (v: { readonly association: string; readonly place: string }) =>
        `${v.place} only answers, but its address changes`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...associationStates(network)].flatMap(([id, { reasons }]) => {
      const reason = reasons.find(({ code }) => code === 'wrong-initiator');
      const path = associationPath(network, id);
      if (reason?.code !== 'wrong-initiator' || !path.ok) return [];
      const association = design.associations[id]!;
      const ref = { collection: 'associations', id } as const;
      const landing = {
        collection: 'links',
        id: reason.end === 'a' ? path.landingA : path.landingB,
      } as const;
      return [
        {
          message: reason.because === 'dynamic' ? 'dynamic' : 'behindNat',
          values: {
            association: association.name,
            place: associationPlaces(design, association)[reason.end],
          },
          elements: [ref, landing],
          identity: [id],
          properties: [
            { ref, path: [reason.end, 'start'] },
            { ref: landing, path: [reason.because === 'dynamic' ? 'dynamic' : 'nat'] },
          ],
          basis: [reason.end, landing.id],
        },
      ];
    });
  },
  fixes: (fault, { design }) => {
    const id = fault.elements[0]!.id;
    const { association, place } = fault.values;
    const end = associationPlaces(design, design.associations[id]!).a === place ? 'a' : 'b';
    return [
      {
        id: 'start',
        label: `Let ${place} start`,
        sentence: `Lets ${place} start ${association}, since only it can send a first packet that arrives.`,
        patch: { associations: { [id]: { [end]: { start: 'starts' } } } },
      },
    ];
  },
});
