import type { Collection, ElementRef } from '../model/design.ts';
import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { portKey } from '../network/network.ts';
import type { Answer, Problem } from '../wire/problem.ts';
import { refuse } from '../wire/problem.ts';

/** Everything that is out of service once some elements have failed, before anything reacts to it. */
export interface Casualties {
  readonly devices: ReadonlySet<Id>;
  /** Of pairs that keep their other member. */
  readonly members: ReadonlyMap<Id, Member>;
  readonly cables: ReadonlySet<Id>;
  readonly landings: ReadonlySet<Id>;
  /** Landings of pairs that are left with the plug of one member. */
  readonly landingMembers: ReadonlyMap<Id, Member>;
  readonly tunnels: ReadonlySet<Id>;
  readonly associations: ReadonlySet<Id>;
}

const failing = ['sites', 'devices', 'links', 'tunnels', 'associations', 'transports'] as const;
const canFail = (collection: Collection): collection is (typeof failing)[number] =>
  (failing as readonly string[]).includes(collection);

const problemsWith = (network: Network, ref: ElementRef, index: number): readonly Problem[] => {
  const { design } = network;
  const at = `failed.${index}`;
  const { collection, id, port, member } = ref;
  if (!canFail(collection))
    return [
      { field: `${at}.collection`, value: collection, expected: `what can fail: ${failing.join(', ')}` },
    ];
  if (!Object.hasOwn(design[collection], id))
    return [{ field: `${at}.id`, value: id, expected: `the id of one of the design's ${collection}` }];
  const device = collection === 'devices' ? design.devices[id]! : undefined;
  const problems: Problem[] = [];
  if (port !== undefined && (device === undefined || !Object.hasOwn(device.ports, port)))
    problems.push({
      field: `${at}.port`,
      value: port,
      expected: device === undefined ? 'no port: only devices have some' : `the id of a port of ${id}`,
    });
  if (member !== undefined && device?.kind !== 'ha-pair')
    problems.push({
      field: `${at}.member`,
      value: member,
      expected: 'no member: only an HA pair has members',
    });
  return problems;
};

/** What fails with the elements named: a site with its devices, a device with its cables, a pair once both members are gone. */
export const casualtiesOf = (
  network: Network,
  failed: readonly ElementRef[],
): Answer<{ readonly casualties: Casualties }> => {
  const problems = failed.flatMap((ref, index) => problemsWith(network, ref, index));
  if (problems.length > 0) return refuse(problems);
  const { design } = network;
  const devices = new Set<Id>();
  const lostMembers = new Map<Id, Set<Member>>();
  const cables = new Set<Id>();
  const landings = new Set<Id>();
  const lostPlugs = new Map<Id, Set<Member>>();
  const tunnels = new Set<Id>();
  const associations = new Set<Id>();

  const lose = (lost: Map<Id, Set<Member>>, id: Id, member: Member): number => {
    const set = lost.get(id) ?? new Set();
    lost.set(id, set.add(member));
    return set.size;
  };
  const failPlug = (landing: Id, member: Member): void => {
    const entry = design.links[landing]!;
    if (entry.kind !== 'landing') return;
    const only = entry.members === '1' || entry.members === '2' ? Number(entry.members) : undefined;
    if (only === undefined ? lose(lostPlugs, landing, member) === 2 : only === member) landings.add(landing);
  };
  const failMember = (device: Id, member: Member): void => {
    for (const at of network.cablesByDevice.get(device) ?? []) if (at.member === member) cables.add(at.cable);
    for (const landing of network.landingsByDevice.get(device) ?? []) failPlug(landing, member);
    if (lose(lostMembers, device, member) === 2) devices.add(device);
  };
  const failDevice = (id: Id): void => {
    devices.add(id);
    for (const { cable } of network.cablesByDevice.get(id) ?? []) cables.add(cable);
    for (const landing of network.landingsByDevice.get(id) ?? []) landings.add(landing);
  };
  const failPort = (device: Id, port: Id, member: Member | undefined): void => {
    for (const at of network.cablesByPort.get(portKey(device, port)) ?? [])
      if (member === undefined || at.member === member) cables.add(at.cable);
    for (const landing of network.landingsByPort.get(portKey(device, port)) ?? [])
      if (member === undefined) landings.add(landing);
      else failPlug(landing, member);
  };

  for (const { collection, id, port, member } of failed) {
    if (collection === 'sites') for (const device of network.devicesBySite.get(id) ?? []) failDevice(device);
    else if (collection === 'transports')
      for (const landing of network.landingsByTransport.get(id) ?? []) landings.add(landing);
    else if (collection === 'tunnels') tunnels.add(id);
    else if (collection === 'associations') associations.add(id);
    else if (collection === 'links') (design.links[id]!.kind === 'cable' ? cables : landings).add(id);
    else if (port !== undefined) failPort(id, port, member);
    else if (member !== undefined) failMember(id, member);
    else failDevice(id);
  }

  for (const device of devices) {
    failDevice(device);
    for (const { association } of network.associationsByDevice.get(device) ?? [])
      associations.add(association);
    for (const { tunnel } of network.tunnelsByDevice.get(device) ?? []) tunnels.add(tunnel);
  }
  for (const association of associations)
    for (const tunnel of network.tunnelsByAssociation.get(association) ?? []) tunnels.add(tunnel);
  const members = new Map<Id, Member>();
  for (const [device, lost] of lostMembers) if (!devices.has(device)) members.set(device, [...lost][0]!);
  const landingMembers = new Map<Id, Member>();
  for (const [landing, lost] of lostPlugs)
    if (!landings.has(landing)) landingMembers.set(landing, lost.has(1) ? 2 : 1);
  return {
    ok: true,
    casualties: { devices, members, cables, landings, landingMembers, tunnels, associations },
  };
};
