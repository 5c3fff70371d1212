import type { Path } from '../network/association-path.ts';
import { landingsStay } from '../network/association-path.ts';
import type { Changes } from '../network/changes.ts';
import { changesBetween } from '../network/changes.ts';
import type { Answer, Device, End, Network } from '../network/network.ts';
import { ends, entryOf, perNetwork, perObject } from '../network/network.ts';
import { associationEndOf } from '../network/selectors-cover.ts';
import { underlayMtuFor } from '../wire/largest-inner-packet.ts';
import { largestThrough } from '../wire/largest-through.ts';
import type { Stack, TagCount } from '../wire/stack.ts';
import type { TunnelStack } from '../wire/tunnel-stack.ts';
import { tunnelStack, tunnelStackOn } from '../wire/tunnel-stack.ts';

/** What one end of a tunnel lets through with a given number of tags on the inner frame. */
export interface EndCapacity {
  readonly end: End;
  /** Largest IP packet of a host that leaves the outermost packet whole; 0 where not even the smallest does. */
  readonly largestBytes: number;
  /** What the outermost packet may have. */
  readonly mtuBytes: number;
  readonly stack: Stack;
}

const endsOnAssociation = (network: Network, id: string): boolean => {
  const tunnel = entryOf(network.design.tunnels, id);
  if (tunnel.association === undefined) return true;
  const association = entryOf(network.design.associations, tunnel.association);
  return ends.every((end) => associationEndOf(network, tunnel, association, end) !== undefined);
};

const narrowerEnd = (
  network: Network,
  id: string,
  stackOf: (end: End) => TunnelStack | undefined,
): EndCapacity | undefined => {
  if (!endsOnAssociation(network, id)) return undefined;
  const capacities = ends.flatMap((end): readonly EndCapacity[] => {
    const { stack, ownMtuBytes, path } = stackOf(end) ?? {};
    if (stack === undefined || ownMtuBytes === undefined || path === undefined) return [];
    if (entryOf(network.design.transports, path.transport).mtu === undefined) return [];
    const largestBytes = largestThrough(network, stack, ownMtuBytes, 'ipv4');
    return [{ end, largestBytes, mtuBytes: ownMtuBytes, stack }];
  });
  const [a, b] = capacities;
  return b !== undefined && b.largestBytes < a!.largestBytes ? b : a;
};

/** What the tunnel would let through on a path, its own or another that it may turn to. */
export const capacityOnPath = (
  network: Network,
  id: string,
  innerTags: TagCount,
  path: Path,
): EndCapacity | undefined =>
  narrowerEnd(network, id, (end) => tunnelStackOn(network, id, end, innerTags, path));

const portMtus = perObject(({ ports }: Device): string =>
  Object.keys(ports)
    .sort()
    .map((id) => `${id} ${ports[id]!.mtu ?? ''}`)
    .join(),
);

/** Whether what a packet meets under the tunnels takes the sizes that it took. */
const sizesStay = ({ devices, links, transports }: Changes): boolean =>
  devices.every(
    ({ before, now }) => before === undefined || now === undefined || portMtus(before) === portMtus(now),
  ) &&
  links.every(
    ({ before, now }) =>
      before?.kind !== 'landing' || now?.kind !== 'landing' || before.accessOverhead === now.accessOverhead,
  ) &&
  transports.every(({ before, now }) => before === undefined || now === undefined || before.mtu === now.mtu);

type Capacities = Map<TagCount, EndCapacity | undefined>;

// By tunnel, then by tags inside.
const remembered = perNetwork(
  (network, earlier?: Answer<Map<string, Capacities>>): Map<string, Capacities> => {
    if (earlier === undefined) return new Map();
    const changes = changesBetween(earlier.network.design, network.design);
    if (changes.endpoints.length > 0 || !landingsStay(changes) || !sizesStay(changes)) return new Map();
    const kept = new Map(earlier.value);
    for (const { id } of changes.tunnels) kept.delete(id);
    for (const { id } of changes.associations)
      for (const tunnel of network.tunnelsByAssociation.get(id) ?? []) kept.delete(tunnel);
    return kept;
  },
);

/**
 * What a tunnel lets through at its narrower end. Undefined where something it depends on isn't known: no path, no MTU, no
 * agreed ESP proposal, no addresses.
 */
export const tunnelCapacity = (
  network: Network,
  id: string,
  innerTags: TagCount,
): EndCapacity | undefined => {
  const all = remembered(network);
  const known: Capacities = all.get(id) ?? new Map();
  all.set(id, known);
  if (!known.has(innerTags))
    known.set(
      innerTags,
      narrowerEnd(network, id, (end) => tunnelStack(network, id, end, innerTags)),
    );
  return known.get(innerTags);
};

/** The transport MTU that carries this inner packet whole, and the outermost packet around it. */
export const outermostBytes = (innerPacketBytes: number, stack: Stack): number | undefined => {
  const answer = underlayMtuFor(innerPacketBytes, stack);
  return answer.ok ? answer.transportMtuBytes : undefined;
};
