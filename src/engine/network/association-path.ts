import type { Entry } from '../model/design.ts';
import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type { Changes } from './changes.ts';
import { agreeApartFrom, agreeIn, changesBetween } from './changes.ts';
import type { Answer, Device, End, Landing, Network } from './network.ts';
import { deviceOfTunnelEnd, entryOf, forwardingMembers, perNetwork, perObject } from './network.ts';

export type Family = 4 | 6;

/** Why one end offers no landing to a path, or why no two landings meet. */
export type NoPath =
  /** The device of this end has no landing that it may use. */
  | { readonly code: 'no-landing'; readonly end: End; readonly device: Id }
  /** The landings named lie on another device. */
  | {
      readonly code: 'via-off-device';
      readonly end: End;
      readonly device: Id;
      readonly landings: readonly Id[];
    }
  /** All landings of this end are on shut ports, or not plugged into the active member of the pair. */
  | {
      readonly code: 'landing-silent';
      readonly end: End;
      readonly device: Id;
      readonly landings: readonly Id[];
    }
  | { readonly code: 'no-common-transport'; readonly a: readonly Id[]; readonly b: readonly Id[] }
  | { readonly code: 'no-common-family'; readonly transports: readonly Id[] };

export type Path =
  | {
      readonly ok: true;
      readonly transport: Id;
      /** Landings at the ends a and b. */
      readonly landingA: Id;
      readonly landingB: Id;
      readonly family: Family;
    }
  | { readonly ok: false; readonly reason: NoPath };

type Via = Entry<'tunnels'>['a']['via'];

export const landingOf = (network: Network, id: Id): Landing => {
  const link = entryOf(network.design.links, id);
  if (link.kind !== 'landing') throw new Error(`${id} is a cable where a landing is expected`);
  return link;
};

/** False where no packet can leave: the port is shut, or only the standby member is plugged in. */
export const landingSpeaks = (network: Network, id: Id): boolean => {
  const landing = landingOf(network, id);
  const device = entryOf(network.design.devices, landing.device);
  if (device.ports[landing.port]?.shut === true) return false;
  return (
    landing.members === undefined ||
    landing.members === 'both' ||
    forwardingMembers(device).some((member) => String(member) === landing.members)
  );
};

/** Address families that a landing can use; both where nothing is known. */
export const landingFamilies = (network: Network, id: Id): readonly Family[] => {
  const landing = landingOf(network, id);
  const own: Family[] = [];
  if (landing.ipv4 !== undefined) own.push(4);
  if (landing.ipv6 !== undefined) own.push(6);
  const transport = entryOf(network.design.transports, landing.transport).families ?? [4, 6];
  return (own.length > 0 ? own : ([4, 6] as const)).filter((family) => transport.includes(family));
};

/** The landings that an end may use, in its order: those of `via`, or all of its device where `via` says nothing. */
const candidates = (
  network: Network,
  end: End,
  device: Id,
  via: Via,
): readonly Id[] | { readonly reason: NoPath } => {
  // A step of `via` may name a cable in a damaged design; it can't be landed on.
  const named = inRankOrder(via)
    .map(([, step]) => step.landing)
    .filter((id) => network.design.links[id]?.kind === 'landing');
  const all = named.length > 0 ? named : (network.landingsByDevice.get(device) ?? []);
  if (all.length === 0) return { reason: { code: 'no-landing', end, device } };
  const own = all.filter((id) => landingOf(network, id).device === device);
  if (own.length === 0) return { reason: { code: 'via-off-device', end, device, landings: all } };
  const speaking = own.filter((id) => landingSpeaks(network, id));
  if (speaking.length === 0) return { reason: { code: 'landing-silent', end, device, landings: own } };
  return speaking;
};

const pathBetween = (
  network: Network,
  a: { readonly device: Id; readonly via?: Via },
  b: { readonly device: Id; readonly via?: Via },
): Path => {
  const atA = candidates(network, 'a', a.device, a.via);
  if ('reason' in atA) return { ok: false, reason: atA.reason };
  const atB = candidates(network, 'b', b.device, b.via);
  if ('reason' in atB) return { ok: false, reason: atB.reason };
  const shared = new Set<Id>();
  for (const landingA of atA)
    for (const landingB of atB) {
      const transport = landingOf(network, landingA).transport;
      if (landingOf(network, landingB).transport !== transport) continue;
      shared.add(transport);
      const farFamilies = landingFamilies(network, landingB);
      const family = landingFamilies(network, landingA).find((candidate) => farFamilies.includes(candidate));
      if (family !== undefined) return { ok: true, transport, landingA, landingB, family };
    }
  if (shared.size > 0) return { ok: false, reason: { code: 'no-common-family', transports: [...shared] } };
  const transports = (list: readonly Id[]): readonly Id[] => [
    ...new Set(list.map((id) => landingOf(network, id).transport)),
  ];
  return { ok: false, reason: { code: 'no-common-transport', a: transports(atA), b: transports(atB) } };
};

const shutPorts = perObject(({ ports }: Device): string =>
  Object.keys(ports)
    .filter((id) => ports[id]!.shut === true)
    .sort()
    .join(' '),
);

/**
 * Whether landings, and what decides whether they speak and in which family, are as before. What is new or gone counts by
 * the links that name it.
 */
export const landingsStay = ({ devices, links, transports }: Changes): boolean =>
  devices.every(
    ({ before, now }) =>
      before === undefined ||
      now === undefined ||
      (agreeIn(before, now, 'kind', 'mode', 'active') && shutPorts(before) === shutPorts(now)),
  ) &&
  links.every(
    ({ before, now }) =>
      (before?.kind !== 'landing' && now?.kind !== 'landing') ||
      agreeApartFrom(before, now, 'name', 'rateUpBps', 'rateDownBps', 'accessOverhead'),
  ) &&
  transports.every(
    ({ before, now }) =>
      before === undefined || now === undefined || agreeIn(before, now, 'families', 'filters'),
  );

const associationPaths = perNetwork((network, earlier?: Answer<Map<Id, Path>>): Map<Id, Path> => {
  if (earlier === undefined) return new Map();
  const changes = changesBetween(earlier.network.design, network.design);
  const kept = landingsStay(changes) ? new Map(earlier.value) : new Map<Id, Path>();
  for (const { id } of changes.associations) kept.delete(id);
  return kept;
});

/** Over which landings an association runs: the first pair, in the order of end a and then of end b, that shares a transport and an address family. */
export const associationPath = (network: Network, id: Id): Path => {
  const paths = associationPaths(network);
  const known = paths.get(id);
  if (known !== undefined) return known;
  const { a, b } = entryOf(network.design.associations, id);
  const path = pathBetween(network, a, b);
  paths.set(id, path);
  return path;
};

/** Over which landings a tunnel outside IPsec runs. */
export const bareTunnelPath = (network: Network, id: Id): Path => {
  const tunnel = entryOf(network.design.tunnels, id);
  return pathBetween(
    network,
    { device: deviceOfTunnelEnd(network, tunnel, 'a'), via: tunnel.a.via },
    { device: deviceOfTunnelEnd(network, tunnel, 'b'), via: tunnel.b.via },
  );
};

/**
 * Over which landings a tunnel runs, its association's or its own. Ends are the tunnel's: where the association was
 * drawn the other way round, its landings change places.
 */
export const tunnelPath = (network: Network, id: Id): Path => {
  const tunnel = entryOf(network.design.tunnels, id);
  if (tunnel.association === undefined) return bareTunnelPath(network, id);
  const path = associationPath(network, tunnel.association);
  const isTurned =
    entryOf(network.design.associations, tunnel.association).a.device !==
    deviceOfTunnelEnd(network, tunnel, 'a');
  return path.ok && isTurned ? { ...path, landingA: path.landingB, landingB: path.landingA } : path;
};
