import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Bundle, End, Network, Port } from '../network/network.ts';
import { entryOf, otherEnd, perNetwork, portKey } from '../network/network.ts';
import { portGroupAt } from '../network/port-groups.ts';

/** A cable from a host or a switch to a port of an HA pair that carries segments. */
export interface Uplink {
  readonly cable: Id;
  /** The host or switch, with the end of the cable that is in it. */
  readonly device: Id;
  readonly end: End;
  readonly port: Id;
  readonly pair: Id;
  readonly pairPort: Id;
  readonly member: Member;
}

/** Uplinks whose frames some circuit takes, in order of cable. */
const uplinks = perNetwork((network): readonly Uplink[] => {
  const { devices, links } = network.design;
  const bundles = new Set<Bundle>();
  for (const pair of network.deviceIds)
    if (entryOf(devices, pair).kind === 'ha-pair')
      for (const { cable } of network.cablesByDevice.get(pair) ?? []) {
        const bundle = network.bundleByCable.get(cable);
        if (bundle !== undefined) bundles.add(bundle);
      }
  const inOrder = [...bundles].sort((a, b) => (a.cables[0]! < b.cables[0]! ? -1 : 1));
  return inOrder.flatMap(({ alive }) =>
    alive.flatMap((cable) => {
      const link = links[cable]!;
      if (link.kind !== 'cable') return [];
      return (['a', 'b'] as const).flatMap((end): readonly Uplink[] => {
        const [own, far] = [link[end], link[otherEnd(end)]];
        const { kind } = entryOf(devices, own.device);
        if ((kind !== 'host' && kind !== 'switch') || entryOf(devices, far.device).kind !== 'ha-pair')
          return [];
        const takes = network.circuitsByPort.get(portKey(far.device, far.port)) ?? [];
        return takes.length === 0
          ? []
          : [
              {
                cable,
                device: own.device,
                end,
                port: own.port,
                pair: far.device,
                pairPort: far.port,
                member: far.member ?? 1,
              },
            ];
      });
    }),
  );
});

/** Switches that are cabled to one another belong together: what one reaches, all reach. */
const switchGroups = perNetwork((network): ReadonlyMap<Id, Id> => {
  const { devices } = network.design;
  const groupOf = new Map<Id, Id>();
  const isSwitch = (id: Id): boolean => entryOf(devices, id).kind === 'switch';
  const neighbours = new Map<Id, Id[]>();
  for (const { a, b, alive } of network.bundles)
    if (alive.length > 0 && isSwitch(a.device) && isSwitch(b.device))
      for (const [own, far] of [
        [a.device, b.device],
        [b.device, a.device],
      ] as const)
        neighbours.set(own, [...(neighbours.get(own) ?? []), far]);
  for (const first of network.deviceIds.filter(isSwitch)) {
    if (groupOf.has(first)) continue;
    const open = [first];
    groupOf.set(first, first);
    for (let at = open.pop(); at !== undefined; at = open.pop())
      for (const next of neighbours.get(at) ?? [])
        if (!groupOf.has(next)) {
          groupOf.set(next, first);
          open.push(next);
        }
  }
  return groupOf;
});

export const switchGroupOf = (network: Network, device: Id): Id | undefined =>
  switchGroups(network).get(device);

export const uplinksOf = (network: Network): readonly Uplink[] => uplinks(network);

/** The members of a pair that a group of switches is cabled to. */
export const membersReached = (network: Network, group: Id, pair: Id): ReadonlySet<Member> =>
  new Set(
    uplinks(network)
      .filter((uplink) => uplink.pair === pair && switchGroupOf(network, uplink.device) === group)
      .map(({ member }) => member),
  );

/** Ports of a switch into which nobody has plugged anything, in order of number. */
export const freePorts = (network: Network, device: Id): readonly (readonly [id: Id, port: Port])[] =>
  Object.entries(entryOf(network.design.devices, device).ports)
    .filter(([id, port]) => port.role === 'lan' && port.shut !== true && isUnplugged(network, device, id))
    .sort(([idA, a], [idB, b]) => a.number - b.number || (idA < idB ? -1 : 1));

/** True when no cable is plugged into the port, of this member where it is a pair's. */
export const isUnplugged = (network: Network, device: Id, port: Id, member?: Member): boolean => {
  const group = portGroupAt(network, device, port, member);
  return (
    group !== undefined &&
    (network.cablesByPort.get(portKey(device, port)) ?? []).every((at) => at.member !== (member ?? 1)) &&
    (network.landingsByPort.get(portKey(device, port)) ?? []).length === 0
  );
};
