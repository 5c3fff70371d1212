import { expectedForwarding } from '../flood/expected-forwarding.ts';
import type { Id } from '../model/scalars.ts';
import { perObject, portKey, type Device, type Network } from '../network/network.ts';

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

/**
 * Ports on which a limit is set that counts hosts or their frames, in order of device and port; those left out that all
 * hosts of the design would not exceed.
 */
export const limitedPorts = (
  network: Network,
  field: 'macLimit' | 'stormLimitPps',
): readonly LimitedPort[] => {
  const { devices } = network.design;
  const hostCount = network.deviceIds.filter((id) => devices[id]!.kind === 'host').length;
  return network.deviceIds.flatMap((device) => {
    const entry = devices[device]!;
    return portsWithLimits(entry).flatMap((port) => {
      const limit = entry.ports[port]![field];
      return limit === undefined || limit >= hostCount
        ? []
        : [{ device, port, limit, hosts: hostsBehindPort(network, device, port).size }];
    });
  });
};
