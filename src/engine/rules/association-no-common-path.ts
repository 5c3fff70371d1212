import { associationPath } from '../network/association-path.ts';
import { defineRule } from './define-rule.ts';
import { noPathFixes, noPathMessages, sayNoPath } from './no-path.ts';
import { associationRunner } from './other-path.ts';

export const associationNoCommonPath = defineRule({
  id: 'association-no-common-path',
  title: 'Both ends of an association land on one transport with one address family',
  severity: 'blocking',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'The two gateways have no way to each other, so that the association and every tunnel inside it stay down.',
  seen: 'The first IKE packet is never answered, or never leaves.',
  sources: [{ document: 'RFC 7296', clause: 'section 2' }],
  messages: noPathMessages,
  check: (network) =>
    Object.entries(network.design.associations).flatMap(([id, association]) => {
      const path = associationPath(network, id);
      if (path.ok) return [];
      const ref = { collection: 'associations', id } as const;
      const { reason } = path;
      return [
        {
          ...sayNoPath(network, associationRunner(network, id), reason),
          elements: [
            ref,
            { collection: 'devices', id: association.a.device },
            { collection: 'devices', id: association.b.device },
          ],
          identity: [id],
          properties: [
            { ref, path: ['a', 'via'] },
            { ref, path: ['b', 'via'] },
          ],
          basis: [JSON.stringify(reason)],
        },
      ];
    }),
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const path = associationPath(network, id);
    return path.ok ? [] : noPathFixes(network, associationRunner(network, id), path.reason);
  },
});
