import { expectedForwarding } from '../flood/expected-forwarding.ts';
import type { Id } from '../model/scalars.ts';
import { perObject, portKey, type Device, type Network } from '../network/network.ts';
import { perFacts } from './facts.ts';

/** Hosts of the design whose frames a port takes in: those behind a gateway's circuits, or plugged into a switch's port. */
export const hostsBehindPort = (network: Network, device: string, port: string): ReadonlySet<string> => {
  const { design } = network;
  const hosts = new Set<string>();
  for (const { forwarder, id, circuit } of network.circuitsByPort.get(portKey(device, port)) ?? []) {
    if (circuit.kind !== 'port') continue;
    const learned = expectedForwarding(network, forwarder).find((each) => each.circuit === id);
    for (const host of learned?.hosts ?? []) hosts.add(host);
  }
  for (const { cable, end } of network.cablesByPort.get(portKey(device, port)) ?? []) {
    const link = design.links[cable]!;
    if (link.kind !== 'cable') continue;
    const far = link[end === 'a' ? 'b' : 'a'].device;
    if (design.devices[far]!.kind === 'host') hosts.add(far);
  }
  return hosts;
};

/** A port with a limit of some kind, and the hosts behind it. */
export interface LimitedPort {
  readonly device: string;
  readonly port: string;
  readonly limit: number;
  readonly hosts: number;
}

const portsWithLimits = perObject(({ ports }: Device): readonly Id[] =>
  Object.keys(ports)
    .filter((id) => ports[id]!.macLimit !== undefined || ports[id]!.stormLimitPps !== undefined)
    .sort(),
);

/** How many hosts the design has, and which devices have a port with a limit. */
const hostsAndLimits = perFacts(['devices'], ({ design, deviceIds }) => {
  const limited: Id[] = [];
  let hostCount = 0;
  for (const id of deviceIds) {
    const device = design.devices[id]!;
    if (device.kind === 'host') hostCount += 1;
    if (portsWithLimits(device).length > 0) limited.push(id);
  }
  return { hostCount, limited };
});

/**
 * Ports on which a limit is set that counts hosts or their frames, in order of device and port; those left out that all
 * hosts of the design would not exceed.
 */
export const limitedPorts = (
  network: Network,
  field: 'macLimit' | 'stormLimitPps',
): readonly LimitedPort[] => {
  const { hostCount, limited } = hostsAndLimits(network);
  return limited.flatMap((device) => {
    const entry = network.design.devices[device]!;
    return portsWithLimits(entry).flatMap((port) => {
      const limit = entry.ports[port]![field];
      return limit === undefined || limit >= hostCount
        ? []
        : [{ device, port, limit, hosts: hostsBehindPort(network, device, port).size }];
    });
  });
};
