import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf, portKey } from '../network/network.ts';
import { landingOf } from '../network/association-path.ts';
import { defineRule } from './define-rule.ts';
import { portLabel, portRef } from './port-label.ts';

/** Circuits that take the untagged frames of a port which has an outside address of its own. */
const bridgedLandings = (network: Network) =>
  [...network.landingsByPort].flatMap(([key, landings]) =>
    landings.flatMap((landing) => {
      const { device, port } = landingOf(network, landing);
      const circuits = (network.circuitsByPort.get(portKey(device, port)) ?? []).filter(
        ({ circuit }) => circuit.kind === 'port' && (circuit.vlans === 'untagged' || circuit.vlans === 'all'),
      );
      return circuits.length === 0 ? [] : [{ key, landing, device, port, circuits }];
    }),
  );

export const portRoutedAndBridged = defineRule({
  id: 'port-routed-and-bridged',
  title: 'A port on a transport is in no forwarder',
  severity: 'blocking',
  looksAt: ['landings', 'forwarders', 'gateways'],
  why: 'A port in a forwarder hands every frame to it and keeps none for an address of its own: either the outside address can’t be reached, or the frames are not bridged.',
  seen: 'The gateway refuses one of the two settings; where it doesn’t, tunnels over the port drop as soon as the forwarder is up, and frames of the segment get out on the transport.',
  sources: ['common practice, no source'],
  messages: {
    both: {
      words: 'routed and bridged',
      sentence: (v: { readonly port: string; readonly forwarder: string }) =>
        `${v.port} is on a transport and in ${v.forwarder}`,
    },
  },
  check: (network) =>
    bridgedLandings(network).map(({ landing, device, port, circuits }) => {
      const [first] = circuits;
      return {
        message: 'both',
        values: {
          port: portLabel(network.design, device, port),
          forwarder: entryOf(network.design.forwarders, first!.forwarder).name,
        },
        elements: [
          portRef(device, port),
          ...circuits.map(({ forwarder }) => ({ collection: 'forwarders' as const, id: forwarder })),
          { collection: 'links' as const, id: landing },
        ],
        identity: [landing, ...circuits.map(({ forwarder, id }) => `${forwarder}/${id}`)],
        properties: circuits.map(({ forwarder, id }) => ({
          ref: { collection: 'forwarders' as const, id: forwarder },
          path: ['circuits', id],
        })),
      };
    }),
  fixes: (fault, network) => {
    const found = bridgedLandings(network).find(({ landing }) => landing === fault.identity?.[0]);
    if (found === undefined) return [];
    const forwarders: { [id: Id]: { circuits: { [id: Id]: null } } } = {};
    for (const { forwarder, id } of found.circuits)
      (forwarders[forwarder] ??= { circuits: {} }).circuits[id] = null;
    return [
      {
        id: 'unbridge',
        label: `Take it out of ${fault.values.forwarder}`,
        sentence: `Takes ${fault.values.port} out of ${fault.values.forwarder}; it stays on its transport.`,
        patch: { forwarders },
      },
    ];
  },
});
