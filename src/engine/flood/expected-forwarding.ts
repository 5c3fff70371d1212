import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import { floodGraph } from './flood-graph.ts';
import type { FrameClass } from './frame-classes.ts';
import { classBit } from './frame-classes.ts';
import type { Direction } from './places.ts';
import { startsOf, walk } from './reach.ts';

/** What a forwarder learns behind one of its circuits once every host has sent a broadcast. */
export interface LearnedOnCircuit {
  readonly circuit: Id;
  /** In order of id. */
  readonly hosts: readonly Id[];
  /** Those of them that are learned on another circuit, too: their entries move to and fro. */
  readonly moving: readonly Id[];
}

type Table = Map<Id, Map<Id, Set<Id>>>;

const learned = (network: Network, frame: FrameClass): Table => {
  const graph = floodGraph(network);
  const { places, arrive } = graph.forwarding;
  const table: Table = new Map();
  const note = (forwarder: Id, circuit: Id, host: Id): void => {
    const circuits = table.get(forwarder) ?? new Map<Id, Set<Id>>();
    table.set(forwarder, circuits);
    const hosts = circuits.get(circuit) ?? new Set<Id>();
    circuits.set(circuit, hosts);
    hosts.add(host);
  };
  for (const place of places.all) {
    if (place.kind !== 'host') continue;
    const starts = startsOf(network, graph, { host: place.device });
    for (const node of walk(graph, starts, classBit(frame), undefined).order) {
      if (places.all[graph.into[node]!]?.kind !== 'forwarder') continue;
      arrive(graph.element[node]!, graph.direction[node] as Direction, graph.tags[node]!, (into, ordinal) => {
        const circuit = into.kind === 'forwarder' ? into.circuits[ordinal] : undefined;
        if (circuit !== undefined) note(circuit.at.forwarder, circuit.at.id, place.device);
      });
    }
  }
  return table;
};

const byArp = perNetwork((network) => learned(network, 'arp'));

/**
 * The forwarding table that a tester should see at a forwarder after every host has sent a broadcast: for each of its
 * circuits, in their order, the hosts behind it. Both members of an active pair are taken together.
 */
export const expectedForwarding = (network: Network, forwarder: Id): readonly LearnedOnCircuit[] => {
  const circuits = byArp(network).get(forwarder);
  const onHowMany = new Map<Id, number>();
  for (const hosts of circuits?.values() ?? [])
    for (const host of hosts) onHowMany.set(host, (onHowMany.get(host) ?? 0) + 1);
  return (network.circuitsByForwarder.get(forwarder) ?? []).map(({ id }) => {
    const hosts = [...(circuits?.get(id) ?? [])].sort();
    return { circuit: id, hosts, moving: hosts.filter((host) => onHowMany.get(host)! > 1) };
  });
};
