import { associationEndOf, tunnelFamily } from '../network/selectors-cover.ts';
import type { Path } from '../network/association-path.ts';
import { landingOf, tunnelPath } from '../network/association-path.ts';
import { negotiate } from '../network/negotiate.ts';
import type { End, Landing, Network } from '../network/network.ts';
import { ends, entryOf, perNetwork } from '../network/network.ts';
import type { IpVersion } from '../reference/ip.ts';
import { largestInnerPacket, underlayMtuFor } from '../wire/largest-inner-packet.ts';
import type { Esp, Stack, TagCount } from '../wire/stack.ts';
import { bareStack } from '../wire/stack.ts';

/** What one end of a tunnel lets through with a given number of tags on the inner frame. */
export interface EndCapacity {
  readonly end: End;
  /** Largest IP packet of a host that leaves the outermost packet whole; 0 where not even the smallest does. */
  readonly largestBytes: number;
  /** What the outermost packet may have. */
  readonly mtuBytes: number;
  readonly stack: Stack;
}

const ipVersion = (family: 4 | 6): IpVersion => (family === 4 ? 'ipv4' : 'ipv6');

const espOf = (network: Network, id: string, family: 4 | 6, hasNat: boolean): Esp | undefined => {
  const { association } = entryOf(network.design.tunnels, id);
  if (association === undefined) return { mode: 'none' };
  const entry = entryOf(network.design.associations, association);
  const { esp } = negotiate(entry);
  if (esp.state !== 'agreed') return undefined;
  const { encryption, integrity } = esp.proposal;
  const suite = {
    transform: encryption,
    // A combined-mode transform brings its own integrity; one named beside it is not used.
    ...(integrity === undefined || encryption.startsWith('aes-gcm') || encryption === 'chacha20-poly1305'
      ? {}
      : { integrity }),
    natTraversal: hasNat,
  };
  // RFC 7296 section 1.3.1: transport mode only where both ends ask for it, else tunnel mode.
  return ends.every((end) => entry[end].mode === 'transport')
    ? { mode: 'transport', ...suite }
    : { mode: 'tunnel', ...suite, outerIp: ipVersion(family) };
};

const portMtu = (network: Network, landing: Landing): number =>
  entryOf(network.design.devices, landing.device).ports[landing.port]?.mtu ?? Infinity;

const answers = perNetwork((_network) => new Map<string, ReturnType<typeof largestInnerPacket>>());

/** Most tunnels of a design are built alike: each stack is searched once. */
const largestThrough = (
  network: Network,
  transportMtuBytes: number,
  stack: Stack,
): ReturnType<typeof largestInnerPacket> => {
  const known = answers(network);
  const key = JSON.stringify([transportMtuBytes, stack]);
  const answer = known.get(key) ?? largestInnerPacket({ transportMtuBytes, innerIpVersion: 'ipv4', stack });
  known.set(key, answer);
  return answer;
};

/** What the tunnel would let through on a path, its own or another that it may turn to. */
export const capacityOnPath = (
  network: Network,
  id: string,
  innerTags: TagCount,
  path: Path,
): EndCapacity | undefined => {
  const tunnel = entryOf(network.design.tunnels, id);
  const family = tunnelFamily(network, tunnel);
  if (!path.ok || family === undefined) return undefined;
  if (
    tunnel.association !== undefined &&
    ends.some(
      (end) =>
        associationEndOf(network, tunnel, entryOf(network.design.associations, tunnel.association!), end) ===
        undefined,
    )
  )
    return undefined;
  const transportMtuBytes = entryOf(network.design.transports, path.transport).mtu;
  if (transportMtuBytes === undefined) return undefined;
  const landings = { a: landingOf(network, path.landingA), b: landingOf(network, path.landingB) };
  const esp = espOf(
    network,
    id,
    path.family,
    ends.some((end) => landings[end].nat !== undefined),
  );
  if (esp === undefined) return undefined;
  const capacities = ends.map((end): EndCapacity => {
    const port = portMtu(network, landings[end]);
    const stack: Stack = {
      ...bareStack,
      innerTags,
      vxlanOver: ipVersion(family),
      esp,
      accessOverhead: landings[end].accessOverhead ?? 'none',
      ...(Number.isFinite(port) && port >= 576 ? { accessPayloadBytes: port } : {}),
    };
    const ownLimit = Math.min(transportMtuBytes, port);
    const answer = largestThrough(network, ownLimit, stack);
    return {
      end,
      largestBytes: answer.ok ? answer.largestInnerPacketBytes : 0,
      mtuBytes: answer.ok ? answer.ipMtuBytes : ownLimit,
      stack,
    };
  });
  return capacities.reduce((least, other) => (other.largestBytes < least.largestBytes ? other : least));
};

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
  if (!known.has(key)) known.set(key, capacityOnPath(network, id, innerTags, tunnelPath(network, id)));
  return known.get(key);
};

/** The transport MTU that carries this inner packet whole, and the outermost packet around it. */
export const outermostBytes = (innerPacketBytes: number, stack: Stack): number | undefined => {
  const answer = underlayMtuFor(innerPacketBytes, stack);
  return answer.ok ? answer.transportMtuBytes : undefined;
};
