import type { Id } from '../model/scalars.ts';
import type { Path } from '../network/association-path.ts';
import { landingOf, tunnelPath } from '../network/association-path.ts';
import { negotiate } from '../network/negotiate.ts';
import type { End, Network } from '../network/network.ts';
import { ends, entryOf, otherEnd, perNetwork } from '../network/network.ts';
import { tunnelFamily } from '../network/selectors-cover.ts';
import type { IpVersion } from '../reference/ip.ts';
import { ipMtuOf, LEAST_TRANSPORT_MTU_BYTES } from '../wire/largest-inner-packet.ts';
import type { Esp, Stack } from '../wire/stack.ts';
import { bareStack, LEAST_ACCESS_PAYLOAD_BYTES } from '../wire/stack.ts';

/** What one end of a tunnel puts around a frame, and what the way to the other end carries. */
export interface TunnelPipe {
  readonly path: Extract<Path, { ok: true }>;
  /** Without the tags of the frame inside; absent where addresses or the agreed transform aren't known. */
  readonly stack?: Stack;
  /** Largest outermost packet; absent where neither the transport's nor a port's MTU is known. */
  readonly mtuBytes?: number;
  /** Whether the sending gateway meets the limit itself, at its own WAN port. */
  readonly limitedBy: 'gateway' | 'underway';
  /** True where the transport's own MTU is known. */
  readonly isTransportKnown: boolean;
}

const ipVersion = (family: 4 | 6): IpVersion => (family === 4 ? 'ipv4' : 'ipv6');

const espOf = (
  network: Network,
  association: Id,
  outerIp: IpVersion,
  natTraversal: boolean,
): Esp | undefined => {
  const entry = entryOf(network.design.associations, association);
  const { esp } = negotiate(entry);
  if (esp.state !== 'agreed') return undefined;
  const { encryption, integrity } = esp.proposal;
  // RFC 4106 section 8.2, RFC 7634 section 2: a combined-mode transform takes no other integrity beside it.
  const isCombined = encryption.startsWith('aes-gcm') || encryption === 'chacha20-poly1305';
  const suite = {
    transform: encryption,
    ...(integrity === undefined || isCombined ? {} : { integrity }),
    natTraversal,
  };
  // RFC 7296 section 1.3.1: transport mode only where both ends ask for it, else tunnel mode.
  return ends.every((end) => entry[end].mode === 'transport')
    ? { mode: 'transport', ...suite }
    : { mode: 'tunnel', ...suite, outerIp };
};

const pipeOf = (network: Network, id: Id, from: End): TunnelPipe | undefined => {
  const { design } = network;
  const tunnel = entryOf(design.tunnels, id);
  const path = tunnelPath(network, id);
  if (!path.ok) return undefined;
  const transportMtu = entryOf(design.transports, path.transport).mtu;
  const landings = { a: landingOf(network, path.landingA), b: landingOf(network, path.landingB) };
  const family = tunnelFamily(network, tunnel);
  const hasNat = ends.some((end) => landings[end].nat !== undefined);
  const esp: Esp | undefined =
    tunnel.association === undefined
      ? { mode: 'none' }
      : espOf(network, tunnel.association, ipVersion(path.family), hasNat);
  const portMtu = (end: End): number | undefined =>
    entryOf(design.devices, landings[end].device).ports[landings[end].port]?.mtu;
  const limitAt = (end: End, limits: readonly (number | undefined)[]): number => {
    const least = Math.min(...limits.filter((limit) => limit !== undefined));
    const port = portMtu(end);
    const access: Stack = {
      ...bareStack,
      accessOverhead: landings[end].accessOverhead ?? 'none',
      ...(port !== undefined && port >= LEAST_ACCESS_PAYLOAD_BYTES ? { accessPayloadBytes: port } : {}),
    };
    return ipMtuOf(least, access).ipMtuBytes;
  };
  const own = limitAt(from, [portMtu(from)]);
  const far = limitAt(otherEnd(from), [portMtu(otherEnd(from)), transportMtu]);
  const mtuBytes = Math.max(LEAST_TRANSPORT_MTU_BYTES, Math.min(own, far));
  return {
    path,
    ...(esp === undefined || family === undefined
      ? {}
      : {
          stack: {
            ...bareStack,
            vxlanOver: ipVersion(family),
            esp,
            accessOverhead: landings[from].accessOverhead ?? 'none',
          },
        }),
    ...(Number.isFinite(mtuBytes) ? { mtuBytes } : {}),
    limitedBy: own <= far ? 'gateway' : 'underway',
    isTransportKnown: transportMtu !== undefined,
  };
};

const remembered = perNetwork((_network) => new Map<string, TunnelPipe | undefined>());

/** The pipe from one end of a tunnel to the other; undefined where no transport joins them. */
export const tunnelPipe = (network: Network, id: Id, from: End): TunnelPipe | undefined => {
  const known = remembered(network);
  const key = `${from} ${id}`;
  if (!known.has(key)) known.set(key, pipeOf(network, id, from));
  return known.get(key);
};
