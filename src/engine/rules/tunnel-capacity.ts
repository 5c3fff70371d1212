import type { Path } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends, entryOf, perNetwork } from '../network/network.ts';
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

const remembered = perNetwork((_network) => new Map<string, EndCapacity | undefined>());

/**
 * What a tunnel lets through at its narrower end. Undefined where something it depends on isn't known: no path, no MTU, no
 * agreed ESP proposal, no addresses.
 */
export const tunnelCapacity = (
  network: Network,
  id: string,
  innerTags: TagCount,
): EndCapacity | undefined => {
  const known = remembered(network);
  const key = `${innerTags} ${id}`;
  if (!known.has(key))
    known.set(
      key,
      narrowerEnd(network, id, (end) => tunnelStack(network, id, end, innerTags)),
    );
  return known.get(key);
};

/** The transport MTU that carries this inner packet whole, and the outermost packet around it. */
export const outermostBytes = (innerPacketBytes: number, stack: Stack): number | undefined => {
  const answer = underlayMtuFor(innerPacketBytes, stack);
  return answer.ok ? answer.transportMtuBytes : undefined;
};
