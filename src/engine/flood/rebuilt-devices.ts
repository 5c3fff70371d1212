import type { Id } from '../model/scalars.ts';
import { agreeApartFrom, changesBetween } from '../network/changes.ts';
import type { Device, DesignFacts, Network, Tunnel } from '../network/network.ts';
import { ends, perPairOfVersions } from '../network/network.ts';

// What is named here makes no difference to where frames go; anything else, new properties too, is taken to make one.

const portsForwardAlike = (before: Device['ports'], now: Device['ports']): boolean => {
  const ids = Object.keys(now);
  return (
    ids.length === Object.keys(before).length &&
    ids.every((id) =>
      agreeApartFrom(before[id], now[id], 'name', 'mtu', 'speedBps', 'stormLimitPps', 'macLimit', 'bpdus'),
    )
  );
};

const forwardsAlike = (before: Device | undefined, now: Device | undefined): boolean =>
  agreeApartFrom(
    before,
    now,
    'name',
    'notes',
    'managementAddress',
    'memberNames',
    'stateSync',
    'failoverUs',
    'face',
    'addresses',
    'settings',
    'ports',
  ) &&
  before?.settings?.keepInnerTags === now?.settings?.keepInnerTags &&
  portsForwardAlike(before!.ports, now!.ports);

/** Whether a tunnel comes up is another question: see touched-devices.ts. Its VNI says more where it is of several points. */
const tunnelEndsAlike = (
  before: Tunnel['a'] | undefined,
  now: Tunnel['a'] | undefined,
  { design }: Network,
): boolean =>
  agreeApartFrom(before, now, 'vni', 'udpPort', 'outerDf', 'udpChecksum', 'takesZeroChecksum', 'via') &&
  (before?.vni === now?.vni || !isMultipoint(design, design.endpoints[now!.endpoint]?.device));

const isMultipoint = ({ devices, profiles }: DesignFacts, device: Id | undefined): boolean => {
  const profile = device === undefined ? undefined : devices[device]?.profile;
  return profile !== undefined && profiles[profile]?.vniScope === 'multipoint';
};

/** The devices of a tunnel's ends, as far as the design holds them. */
export const endDevices = ({ endpoints }: DesignFacts, tunnel: Tunnel | undefined): readonly Id[] =>
  tunnel === undefined ? [] : ends.flatMap((end) => endpoints[tunnel[end].endpoint]?.device ?? []);

/** Devices at the far ends of a device's cables. */
const neighbours = ({ design, cablesByDevice }: Network, device: Id): readonly Id[] =>
  (cablesByDevice.get(device) ?? []).flatMap(({ cable }) => {
    const link = design.links[cable];
    return link?.kind === 'cable' ? ends.map((end) => link[end].device) : [];
  });

/** Devices in which frames have other ways in, inside or out than they had in an earlier version, gone ones included. */
export const rebuiltDevices = perPairOfVersions((before, now): ReadonlySet<Id> => {
  const rebuilt = new Set<Id>();
  const add = (ids: readonly Id[]): void => {
    for (const id of ids) rebuilt.add(id);
  };
  const changes = changesBetween(before.design, now.design);
  for (const change of changes.devices)
    if (!forwardsAlike(change.before, change.now))
      add([change.id, ...neighbours(before, change.id), ...neighbours(now, change.id)]);
  for (const change of changes.links)
    if (!agreeApartFrom(change.before, change.now, 'name'))
      for (const link of [change.before, change.now])
        if (link?.kind === 'cable') add(ends.map((end) => link[end].device));
  for (const change of changes.forwarders)
    if (!agreeApartFrom(change.before, change.now, 'name', 'gateway', 'querier', 'spanningTree'))
      for (const forwarder of [change.before, change.now]) if (forwarder) add([forwarder.device]);
  for (const { before: old, now: tunnel } of changes.tunnels)
    if (!ends.every((end) => tunnelEndsAlike(old?.[end], tunnel?.[end], now)))
      add([...endDevices(before.design, old), ...endDevices(now.design, tunnel)]);
  for (const change of changes.endpoints)
    if (!agreeApartFrom(change.before, change.now, 'name', 'ipv4', 'ipv6'))
      for (const network of [before, now])
        for (const { tunnel } of network.tunnelsByEndpoint.get(change.id) ?? [])
          add(endDevices(network.design, network.design.tunnels[tunnel]));
  for (const change of changes.profiles)
    if (change.before?.vniScope !== change.now?.vniScope)
      add(now.deviceIds.filter((id) => now.design.devices[id]!.profile === change.id));
  for (const change of changes.segments)
    if (change.before?.sites !== change.now?.sites)
      for (const network of [before, now]) add(network.hostsBySegment.get(change.id) ?? []);
  return rebuilt;
});
