import type { Collection } from '../model/design.ts';
import type { Network, PortCircuit } from '../network/network.ts';
import { entryOf, segmentsAt } from '../network/network.ts';
import { perEntry, perFacts } from './facts.ts';

/** What decides which segments a tunnel carries: every collection that says how frames travel. */
export const segmentPathFacts = [
  'devices',
  'links',
  'endpoints',
  'associations',
  'tunnels',
  'forwarders',
  'segments',
  'transports',
  'profiles',
  'sites',
] as const satisfies readonly Collection[];

/** The segments whose frames a port's circuit takes in, by the VLANs that its site gives them. */
export const segmentsOfCircuit = (
  network: Network,
  device: string,
  { port, vlans }: PortCircuit,
): readonly string[] => {
  const { site, ports } = entryOf(network.design.devices, device);
  if (vlans === 'all')
    return Object.keys(network.design.segments).filter(
      (id) => network.design.segments[id]!.sites[site]?.vlan !== undefined,
    );
  const untagged = ports[port]?.mode === 'trunk' ? ports[port].nativeVlan : ports[port]?.vlan;
  const taken = vlans === 'untagged' ? (untagged === undefined ? [] : [untagged]) : vlans;
  return taken.flatMap((vlan) => segmentsAt(network, site, vlan));
};

/** What decides which segments a circuit takes in. */
export const circuitFacts = ['forwarders', 'gateways', 'addressing'] as const;

/** The segments that each forwarder serves, in order of id. */
export const segmentsByForwarder = perFacts(
  circuitFacts,
  (network): ReadonlyMap<string, readonly string[]> =>
    new Map([...network.circuitsByForwarder.keys()].map((id) => [id, segmentsOfForwarder(network, id)])),
);

const segmentsOfForwarder = perEntry(
  'forwarders',
  ['gateways', 'addressing'],
  (network, forwarder): readonly string[] =>
    [
      ...new Set(
        network.circuitsByForwarder
          .get(forwarder)!
          .flatMap(({ device, circuit }) =>
            circuit.kind === 'port' ? segmentsOfCircuit(network, device, circuit) : [],
          ),
      ),
    ].sort(),
);
