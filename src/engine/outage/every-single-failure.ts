import type { ElementRef } from '../model/design.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { casualtiesOf } from './casualties.ts';
import type { Outage } from './outage.ts';
import { outageOf } from './outage.ts';

export interface SingleFailure extends Outage {
  readonly element: ElementRef;
}

/** Everything that can fail on its own, in order of collection and id: pairs by their members. Ports fail as their cables and landings do. */
export const loneElements = ({ design }: Network): readonly ElementRef[] => {
  const all = (collection: 'sites' | 'transports' | 'links' | 'associations' | 'tunnels') =>
    Object.keys(design[collection])
      .sort()
      .map((id): ElementRef => ({ collection, id }));
  return [
    ...all('sites'),
    ...Object.keys(design.devices)
      .sort()
      .flatMap((id): ElementRef[] =>
        design.devices[id]!.kind === 'ha-pair'
          ? [
              { collection: 'devices', id, member: 1 },
              { collection: 'devices', id, member: 2 },
            ]
          : [{ collection: 'devices', id }],
      ),
    ...all('transports'),
    ...all('links'),
    ...all('associations'),
    ...all('tunnels'),
  ];
};

/** What one of them parts when it fails. */
export const singleFailure = (network: Network, element: ElementRef): SingleFailure => {
  const answer = casualtiesOf(network, [element]);
  if (!answer.ok) throw new Error(`an element of the design can't fail: ${element.collection} ${element.id}`);
  return { element, ...outageOf(network, [element], answer.casualties) };
};

/** What every single failure parts, each against the design as it is. Pairs are counted; `outage` lists those of one failure. */
export const everySingleFailure = (design: DesignFacts): readonly SingleFailure[] => {
  const network = indexNetwork(design);
  return loneElements(network).map((element) => singleFailure(network, element));
};

/** The failures that part hosts which are themselves in service, the worst first. */
export const singlePointsOfFailure = (failures: readonly SingleFailure[]): readonly SingleFailure[] =>
  failures
    .filter(({ pairCount }) => pairCount > 0)
    .sort((x, y) => y.pairCount - x.pairCount || (keyOf(x.element) < keyOf(y.element) ? -1 : 1));

const keyOf = ({ collection, id, member }: ElementRef): string => `${collection} ${id} ${member ?? ''}`;
