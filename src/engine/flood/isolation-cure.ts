import type { Json, MergePatch } from '../model/merge-patch.ts';
import { applyPatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { CircuitAt, Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { findStorms } from './find-storms.ts';
import { floodGraph } from './flood-graph.ts';
import type { Storm } from './storm.ts';

export interface IsolationCure {
  readonly group: string;
  /** The forwarders of the mesh, in order of id. */
  readonly forwarders: readonly Id[];
  readonly patch: MergePatch;
}

type Ring = Pick<Storm, 'tunnels' | 'cables'>;

/** The circuits of a full mesh, one tunnel for each two forwarders; undefined where the ring is anything else. */
const fullMesh = (network: Network, storm: Ring): readonly CircuitAt[] | undefined => {
  if (storm.cables.length > 0) return undefined;
  const pairs = new Set<string>();
  const circuits: CircuitAt[] = [];
  const forwarders = new Set<Id>();
  for (const tunnel of storm.tunnels) {
    const own = network.circuitsByTunnel.get(tunnel) ?? [];
    const [a, b] = own;
    if (own.length !== 2 || a === undefined || b === undefined || a.forwarder === b.forwarder)
      return undefined;
    pairs.add([a.forwarder, b.forwarder].sort().join(' '));
    circuits.push(a, b);
    for (const { forwarder } of own) {
      if (entryOf(network.design.forwarders, forwarder).kind !== 'bridge') return undefined;
      forwarders.add(forwarder);
    }
  }
  const legs = (forwarders.size * (forwarders.size - 1)) / 2;
  return pairs.size === legs && storm.tunnels.length === legs ? circuits : undefined;
};

/** A group name that no other circuit of these forwarders has. */
const freeGroup = (network: Network, forwarders: readonly Id[], own: ReadonlySet<CircuitAt>): string => {
  const taken = new Set(
    forwarders.flatMap((id) =>
      (network.circuitsByForwarder.get(id) ?? [])
        .filter((at) => !own.has(at))
        .map(({ circuit }) => circuit.isolation),
    ),
  );
  let group = 'mesh';
  for (let n = 2; taken.has(group); n += 1) group = `mesh-${n}`;
  return group;
};

/**
 * The isolation group that makes a full mesh safe: no forwarder passes from one tunnel of the mesh to another, and none has
 * to (RFC 4762 section 4.4). Checked by looking for storms in the design with it; undefined where the storm is no full mesh
 * or stays.
 */
export const isolationCure = (network: Network, storm: Ring): IsolationCure | undefined => {
  const circuits = fullMesh(network, storm);
  if (circuits === undefined) return undefined;
  const forwarders = [...new Set(circuits.map(({ forwarder }) => forwarder))].sort();
  const group = freeGroup(network, forwarders, new Set(circuits));
  const patch: { [forwarder: string]: { circuits: { [circuit: string]: Json } } } = {};
  for (const { forwarder, id } of circuits)
    (patch[forwarder] ??= { circuits: {} }).circuits[id] = { isolation: group };
  const cured = indexNetwork(applyPatch(network.design, { forwarders: patch }));
  const touched = new Set(storm.tunnels);
  const stays = findStorms(floodGraph(cured)).some(({ tunnels }) => tunnels.some((id) => touched.has(id)));
  return stays ? undefined : { group, forwarders, patch: { forwarders: patch } };
};
