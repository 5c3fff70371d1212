import { associationPath } from '../network/association-path.ts';
import type { AssociationReason } from '../network/can-come-up.ts';
import { associationStates } from '../network/can-come-up.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { associationPlaces } from './places.ts';

/** What is the matter with both landings of an association, and the field of a landing that says so. */
const fieldOf = { 'both-behind-nat': 'nat', 'both-dynamic': 'dynamic' } as const satisfies {
  readonly [code in AssociationReason['code']]?: string;
};

/** The associations of which neither end can be reached for one and the same reason, as faults without their message. */
export const hiddenAlike = (network: Network, code: keyof typeof fieldOf) => {
  const { design } = network;
  return [...associationStates(network)].flatMap(([id, { reasons }]) => {
    if (!reasons.some((reason) => reason.code === code)) return [];
    const path = associationPath(network, id);
    const association = entryOf(design.associations, id);
    const places = associationPlaces(design, association);
    const landings = path.ok ? [path.landingA, path.landingB] : [];
    const links = landings.map((landing) => ({ collection: 'links' as const, id: landing }));
    return [
      {
        values: { association: association.name, placeA: places.a, placeB: places.b },
        elements: [{ collection: 'associations' as const, id }, ...links],
        identity: [id],
        properties: links.map((ref) => ({ ref, path: [fieldOf[code]] })),
        basis: landings,
      },
    ];
  });
};
