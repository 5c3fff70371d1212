import { associationPath } from '../network/association-path.ts';
import { associationStates } from '../network/can-come-up.ts';
import { defineRule } from './define-rule.ts';
import { meetingFixes } from './meeting-fixes.ts';
import { associationPlaces } from './places.ts';

export const associationNeitherReachable = defineRule({
  id: 'association-neither-reachable',
  title: 'A first packet can reach one end of an association',
  severity: 'blocking',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'One end can’t be found because its address changes, the other can’t be entered because its NAT forwards nothing: no first packet arrives.',
  seen: 'The end behind NAT has nobody to call; what the other end sends dies at the NAT.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23' }],
  messages: {
    mixed: {
      words: 'neither reachable',
      sentence: (v: { readonly association: string; readonly dynamic: string; readonly behindNat: string }) =>
        `The address of ${v.dynamic} changes, and ${v.behindNat} is behind NAT`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...associationStates(network)].flatMap(([id, { reasons }]) => {
      const reason = reasons.find(({ code }) => code === 'neither-reachable');
      const path = associationPath(network, id);
      if (reason?.code !== 'neither-reachable' || !path.ok) return [];
      const association = design.associations[id]!;
      const places = associationPlaces(design, association);
      const landings = { a: path.landingA, b: path.landingB };
      const link = (landing: string) => ({ collection: 'links', id: landing }) as const;
      return [
        {
          message: 'mixed',
          values: {
            association: association.name,
            dynamic: places[reason.dynamic],
            behindNat: places[reason.behindNat],
          },
          elements: [{ collection: 'associations', id }, link(landings.a), link(landings.b)],
          identity: [id],
          properties: [
            { ref: link(landings[reason.dynamic]), path: ['dynamic'] },
            { ref: link(landings[reason.behindNat]), path: ['nat'] },
          ],
          basis: [landings.a, landings.b, reason.dynamic],
        },
      ];
    });
  },
  fixes: (fault, network) => meetingFixes(network, fault.elements[0]!.id),
});
