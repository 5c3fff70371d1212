import { findStorms } from '../flood/find-storms.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import type { Storm } from '../flood/storm.ts';
import { elementsOf } from '../flood/storm.ts';
import type { ElementRef } from '../model/design.ts';
import type { Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';

/** `mesh`: of tunnels alone; `customer-cable`: through a cable from one site to another; `local`: any other. */
export type StormKind = 'mesh' | 'customer-cable' | 'local';

/** Cables of a storm that lead from one site to another. */
export const cablesBetweenSites = ({ design }: Network, storm: Storm): readonly string[] =>
  storm.cables.filter((id) => {
    const cable = design.links[id]!;
    return (
      cable.kind === 'cable' && design.devices[cable.a.device]!.site !== design.devices[cable.b.device]!.site
    );
  });

const kindOf = (network: Network, storm: Storm): StormKind =>
  storm.cables.length === 0
    ? 'mesh'
    : cablesBetweenSites(network, storm).length > 0
      ? 'customer-cable'
      : 'local';

const byKind = perNetwork((network) => {
  const storms: { readonly [K in StormKind]: Storm[] } = { mesh: [], 'customer-cable': [], local: [] };
  for (const storm of findStorms(floodGraph(network))) storms[kindOf(network, storm)].push(storm);
  return storms;
});

export const stormsOf = (network: Network, kind: StormKind): readonly Storm[] => byKind(network)[kind];

/** What a finding about a storm says of itself, whichever kind it is. */
export const stormBody = (storm: Storm, first: readonly ElementRef[] = []) => {
  const isFirst = (ref: ElementRef): boolean =>
    first.some(({ collection, id }) => collection === ref.collection && id === ref.id);
  return {
    elements: [...first, ...elementsOf(storm).filter((ref) => !isFirst(ref))],
    identity: [...storm.tunnels, ...storm.cables],
    basis: [storm.copies, storm.frames],
    mark: { kind: 'loop' as const, steps: storm.steps },
  };
};

/** The storm that a finding is about. */
export const stormOfFault = (
  network: Network,
  kind: StormKind,
  { identity = [] }: { readonly identity?: readonly string[] },
): Storm => stormsOf(network, kind).find(({ key }) => key === identity.join(' '))!;
