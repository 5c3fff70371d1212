import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { DesignFacts, Device, Network } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import type { Casualties } from './casualties.ts';

// No id may hold a tilde, so that no port of the design is called so.
const deadPort = '~dead';

/** A device after one of its members is lost: the other one stands alone. */
export const deviceAfter = (device: Device, lost: Member | undefined): Device =>
  lost === undefined || device.kind !== 'ha-pair'
    ? device
    : { ...device, mode: 'active-standby', active: lost === 1 ? 2 : 1 };

/**
 * The design as it stands after the casualties: pairs have failed over, tunnels and cables are gone. Landings stay, on a dead
 * port, since a way that names one keeps to what it names.
 */
export const degrade = (design: DesignFacts, casualties: Casualties): DesignFacts => {
  const { devices, members, cables, landings, landingMembers, tunnels } = casualties;
  const kept = Object.fromEntries(
    Object.entries(design.devices).map(([id, device]): [Id, Device] => [
      id,
      deviceAfter(device, members.get(id)),
    ]),
  );
  const links: { [id: Id]: DesignFacts['links'][string] } = {};
  for (const [id, link] of Object.entries(design.links)) {
    if (link.kind === 'cable') {
      if (!cables.has(id)) links[id] = link;
      continue;
    }
    const member = landingMembers.get(id);
    if (landings.has(id)) {
      links[id] = { ...link, port: deadPort };
      const device = kept[link.device]!;
      kept[link.device] = {
        ...device,
        ports: { ...device.ports, [deadPort]: { number: 999, role: 'wan', shut: true } },
      };
    } else links[id] = member === undefined ? link : { ...link, members: member === 1 ? '1' : '2' };
  }
  const isGone = (circuit: { readonly kind: string; readonly tunnel?: Id }): boolean =>
    circuit.kind === 'tunnel' &&
    (tunnels.has(circuit.tunnel!) || design.tunnels[circuit.tunnel!] === undefined);
  return {
    ...design,
    devices: kept,
    links,
    tunnels: Object.fromEntries(Object.entries(design.tunnels).filter(([id]) => !tunnels.has(id))),
    forwarders: Object.fromEntries(
      Object.entries(design.forwarders)
        .filter(([, forwarder]) => !devices.has(forwarder.device))
        .map(([id, forwarder]) => [
          id,
          {
            ...forwarder,
            circuits: Object.fromEntries(
              Object.entries(forwarder.circuits).filter(([, circuit]) => !isGone(circuit)),
            ),
          },
        ]),
    ),
  };
};

/** What decides whether some tunnels come up, and no more: their ends' devices with all landings. */
export const partOfTunnels = (network: Network, tunnels: readonly Id[]): DesignFacts => {
  const { design } = network;
  const endpoints: { [id: Id]: DesignFacts['endpoints'][string] } = {};
  const associations: { [id: Id]: DesignFacts['associations'][string] } = {};
  const devices: { [id: Id]: Device } = {};
  const links: { [id: Id]: DesignFacts['links'][string] } = {};
  const take = (device: Id): void => {
    if (devices[device] !== undefined) return;
    devices[device] = entryOf(design.devices, device);
    for (const landing of network.landingsByDevice.get(device) ?? [])
      links[landing] = entryOf(design.links, landing);
  };
  const entries = tunnels.map((id) => [id, entryOf(design.tunnels, id)] as const);
  for (const [, tunnel] of entries) {
    for (const end of ends) {
      const { endpoint } = tunnel[end];
      endpoints[endpoint] = entryOf(design.endpoints, endpoint);
      take(endpoints[endpoint].device);
    }
    if (tunnel.association === undefined) continue;
    const association = entryOf(design.associations, tunnel.association);
    associations[tunnel.association] = association;
    for (const end of ends) take(association[end].device);
  }
  // A way may name a landing of another device.
  for (const side of [...Object.values(associations), ...entries.map(([, tunnel]) => tunnel)].flatMap(
    (entry) => ends.map((end) => entry[end]),
  ))
    for (const { landing } of Object.values(side.via ?? {})) {
      const link = design.links[landing];
      if (link?.kind !== 'landing') continue;
      links[landing] = link;
      devices[link.device] ??= entryOf(design.devices, link.device);
    }
  return {
    ...design,
    devices,
    links,
    endpoints,
    associations,
    tunnels: Object.fromEntries(entries),
    forwarders: {},
    segments: {},
    demands: {},
    notes: {},
  };
};

/** What decides a spanning tree that no tunnel is part of: some devices and the cables between them. */
export const partOfDevices = (network: Network, devices: ReadonlySet<Id>): DesignFacts => {
  const { design } = network;
  const links: { [id: Id]: DesignFacts['links'][string] } = {};
  for (const device of devices)
    for (const { cable } of network.cablesByDevice.get(device) ?? []) {
      const link = entryOf(design.links, cable);
      if (link.kind === 'cable' && ends.every((end) => devices.has(link[end].device))) links[cable] = link;
    }
  return {
    ...design,
    devices: Object.fromEntries([...devices].map((id) => [id, entryOf(design.devices, id)])),
    links,
    endpoints: {},
    associations: {},
    tunnels: {},
    forwarders: Object.fromEntries(
      [...devices]
        .flatMap((id) => network.forwardersByDevice.get(id) ?? [])
        .map((id) => [id, entryOf(design.forwarders, id)]),
    ),
    demands: {},
    notes: {},
  };
};
