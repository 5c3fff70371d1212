import { associationPath, landingOf } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import type { Fix } from './finding.ts';
import { associationRunner, isHidden, otherPathFixes } from './other-path.ts';
import { associationPlaces } from './places.ts';

/**
 * Changes that let two ends of which neither can be reached meet: a port forwarded where there is NAT, with the other end
 * starting, or landings of which one can be reached.
 */
export const meetingFixes = (network: Network, id: string): readonly Fix[] => {
  const { design } = network;
  const association = design.associations[id]!;
  const path = associationPath(network, id);
  if (!path.ok) return [];
  const places = associationPlaces(design, association);
  const landings = { a: path.landingA, b: path.landingB };
  const forwarded = ends.flatMap((end): Fix[] => {
    const { nat, dynamic, dynamicName } = landingOf(network, landings[end]);
    if (nat === undefined || (dynamic === true && dynamicName === undefined)) return [];
    return [
      {
        id: `forward-${end}`,
        label: `Forward to ${places[end]}`,
        sentence: `States that the NAT in front of ${places[end]} forwards UDP 500 and 4500, which you must have set up, and lets ${places[otherEnd(end)]} start.`,
        patch: {
          links: { [landings[end]]: { nat: { forwarded: true } } },
          associations: { [id]: { [otherEnd(end)]: { start: 'starts' } } },
        },
      },
    ];
  });
  return [
    ...forwarded,
    ...otherPathFixes(
      network,
      associationRunner(network, id),
      path,
      ({ a, b }) => !isHidden(network, a) || !isHidden(network, b),
    ),
  ];
};
