import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Path } from '../network/association-path.ts';
import { landingOf, tunnelPath } from '../network/association-path.ts';
import { negotiate } from '../network/negotiate.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf, otherEnd, perNetwork } from '../network/network.ts';
import { associationEndOf, tunnelFamily } from '../network/selectors-cover.ts';
import type { IpVersion } from '../reference/ip.ts';
import { ipMtuOf } from './largest-inner-packet.ts';
import type { Esp, Stack, TagCount } from './stack.ts';
import { bareStack, LEAST_ACCESS_PAYLOAD_BYTES, outermostIpVersion } from './stack.ts';

/** A property of the design that nobody has filled in. */
export interface Missing {
  readonly ref: ElementRef;
  readonly path: readonly string[];
}

/** What one end of a tunnel puts around a frame, and how long the outermost packet may become on the way. */
export interface TunnelStack {
  readonly path: Extract<Path, { ok: true }>;
  /** Absent where the addresses or the agreed transform aren't known. */
  readonly stack?: Stack;
  /** Largest outermost packet; absent where no MTU on the way is known. */
  readonly mtuBytes?: number;
  /** The same as far as the sending end's own access and the transport go; absent where neither is known. */
  readonly ownMtuBytes?: number;
  /** The sending gateway at its own WAN port, or a router underway. */
  readonly limitedBy: 'gateway' | 'underway';
  /**
   * True where longer packets are cut instead of dropped. A DF bit that isn't stated is taken to be set, and so is that of
   * the hosts' own packets, as TCP sends them.
   */
  readonly isCut: boolean;
  readonly missing: readonly Missing[];
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

/**
 * Whether a gateway minds the DF of the packet inside though the one outside has it clear: one that answers its sender has
 * looked, and drops it first. Seen of one kernel's VXLAN driver; of a limit underway it knows nothing.
 */
export const mindsInnerDf = (
  habit: Network['design']['profiles'][string]['oversizeDf'],
  limitedBy: TunnelStack['limitedBy'],
): boolean => habit === 'icmp' && limitedBy === 'gateway';

/** Whether outermost packets from this end that are too long are cut. RFC 4301 section 8.1: DF is copied, set or cleared. */
const cuts = (
  network: Network,
  id: Id,
  from: End,
  stack: Stack,
  { transport, limitedBy }: { readonly transport: Id } & Pick<TunnelStack, 'limitedBy'>,
): boolean => {
  const { design } = network;
  // RFC 8200 section 4.5: only the source cuts IPv6, and RFC 7348 section 4.3 has a tunnel endpoint cut nothing.
  if (outermostIpVersion(stack, 'ipv4') === 'ipv6') return false;
  if (entryOf(design.transports, transport).filters?.includes('fragments') === true) return false;
  const tunnel = entryOf(design.tunnels, id);
  const device = entryOf(design.devices, deviceOfTunnelEnd(network, tunnel, from));
  if (device.settings?.ignoreDf === true) return true;
  const habit =
    device.profile === undefined ? undefined : entryOf(design.profiles, device.profile).oversizeDf;
  if (habit === 'fragment') return true;
  if (mindsInnerDf(habit, limitedBy)) return false;
  const { outerDf } = tunnel[from];
  if (tunnel.association === undefined || stack.esp.mode !== 'tunnel') return outerDf === 'clear';
  const association = entryOf(design.associations, tunnel.association);
  const own = association[associationEndOf(network, tunnel, association, from) ?? from].outerDf;
  return own === 'clear' || (own === 'copy' && outerDf === 'clear');
};

/** The same as `tunnelStack` on another path that the tunnel may turn to. */
export const tunnelStackOn = (
  network: Network,
  id: Id,
  from: End,
  innerTags: TagCount,
  path: Path,
): TunnelStack | undefined => {
  const { design } = network;
  const tunnel = entryOf(design.tunnels, id);
  if (!path.ok) return undefined;
  const landings = { a: landingOf(network, path.landingA), b: landingOf(network, path.landingB) };
  const missing: Missing[] = [];
  const family = tunnelFamily(network, tunnel);
  if (family === undefined)
    for (const end of ends) {
      const { endpoint } = tunnel[end];
      const { ipv4, ipv6 } = entryOf(design.endpoints, endpoint);
      const isAsked = tunnel.family === 6 ? ipv6 : tunnel.family === 4 ? ipv4 : (ipv4 ?? ipv6);
      if (isAsked === undefined)
        missing.push({
          ref: { collection: 'endpoints', id: endpoint },
          path: [tunnel.family === 6 ? 'ipv6' : 'ipv4'],
        });
    }
  const hasNat = ends.some((end) => landings[end].nat !== undefined);
  const esp: Esp | undefined =
    tunnel.association === undefined
      ? { mode: 'none' }
      : espOf(network, tunnel.association, ipVersion(path.family), hasNat);
  if (esp === undefined)
    for (const end of ends)
      if (Object.keys(entryOf(design.associations, tunnel.association!)[end].espProposals ?? {}).length === 0)
        missing.push({
          ref: { collection: 'associations', id: tunnel.association! },
          path: [end, 'espProposals'],
        });
  const portMtu = (end: End): number | undefined =>
    entryOf(design.devices, landings[end].device).ports[landings[end].port]?.mtu;
  const accessOf = (end: End): Stack => {
    const port = portMtu(end);
    return {
      ...bareStack,
      accessOverhead: landings[end].accessOverhead ?? 'none',
      ...(port !== undefined && port >= LEAST_ACCESS_PAYLOAD_BYTES ? { accessPayloadBytes: port } : {}),
    };
  };
  const limitAt = (end: End, limits: readonly (number | undefined)[]): number => {
    const access = accessOf(end);
    return ipMtuOf(Math.min(...limits.filter((limit) => limit !== undefined)), access).ipMtuBytes;
  };
  const transportMtu = entryOf(design.transports, path.transport).mtu;
  if (transportMtu === undefined)
    missing.push({ ref: { collection: 'transports', id: path.transport }, path: ['mtu'] });
  const ownMtuBytes = limitAt(from, [portMtu(from), transportMtu]);
  const mtuBytes = Math.min(ownMtuBytes, limitAt(otherEnd(from), [portMtu(otherEnd(from))]));
  const limitedBy = limitAt(from, [portMtu(from)]) <= mtuBytes ? 'gateway' : 'underway';
  const stack: Stack | undefined =
    esp === undefined || family === undefined
      ? undefined
      : {
          ...accessOf(from),
          innerTags,
          vxlanOver: ipVersion(family),
          esp,
        };
  return {
    path,
    missing,
    limitedBy,
    isCut: stack !== undefined && cuts(network, id, from, stack, { transport: path.transport, limitedBy }),
    ...(stack === undefined ? {} : { stack }),
    ...(Number.isFinite(mtuBytes) ? { mtuBytes } : {}),
    ...(Number.isFinite(ownMtuBytes) ? { ownMtuBytes } : {}),
  };
};

const remembered = perNetwork((_network) => new Map<string, TunnelStack | undefined>());

/**
 * How a tunnel carries what its end `from` sends with so many tags on the frame inside; undefined where no transport joins
 * its ends. What isn't known is named, never filled in.
 */
export const tunnelStack = (
  network: Network,
  id: Id,
  from: End,
  innerTags: TagCount,
): TunnelStack | undefined => {
  const known = remembered(network);
  const key = `${from} ${innerTags} ${id}`;
  if (!known.has(key)) known.set(key, tunnelStackOn(network, id, from, innerTags, tunnelPath(network, id)));
  return known.get(key);
};
