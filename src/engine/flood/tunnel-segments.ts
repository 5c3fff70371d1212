import type { Id } from '../model/scalars.ts';
import type { Answer, Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import { floodGraph } from './flood-graph.ts';
import { segmentReaches } from './segment-nodes.ts';

/**
 * The segments that each tunnel carries, in order of letter: what either end sends into it when each site's VLANs are
 * followed through circuits. A tunnel that can't come up carries what its ends would send. [] where nothing gets in.
 */
export const tunnelSegments: (network: Network) => ReadonlyMap<Id, readonly Id[]> = perNetwork(
  (network, earlier?: Answer<ReadonlyMap<Id, readonly Id[]>>) => {
    const graph = floodGraph(network);
    if (earlier !== undefined && floodGraph(earlier.network).identity === graph.identity)
      return earlier.value;
    const { firstTunnelElement } = network;
    const lists = network.tunnelIds.map((): Id[] => []);
    for (const { segment, nodes } of segmentReaches(graph))
      for (const node of nodes) {
        const element = graph.element[node]!;
        if (element < firstTunnelElement) continue;
        const list = lists[element - firstTunnelElement]!;
        if (list.length === 0 || list[list.length - 1] !== segment) list.push(segment);
      }
    return new Map(network.tunnelIds.map((id, i) => [id, lists[i]!]));
  },
);
