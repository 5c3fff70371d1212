import type { Id } from '../model/scalars.ts';
import { landingOf } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';
import { accessOverheadBytes } from '../wire/frame-layers.ts';
import type { IpVersion } from '../reference/ip.ts';
import { largestInnerPacket } from '../wire/largest-inner-packet.ts';
import type { Stack, TagCount } from '../wire/stack.ts';
import { bareStack } from '../wire/stack.ts';
import type { TunnelStack } from '../wire/tunnel-stack.ts';
import { tunnelStack } from '../wire/tunnel-stack.ts';

/** What one end of a tunnel puts around a frame, and who meets the limit of the way to the other end. */
export interface TunnelPipe extends TunnelStack {
  /** The same for equal stacks: most tunnels of a design are built alike. */
  readonly stackKey: string;
  /** The sending gateway at its own WAN port, or a router underway. */
  readonly limitedBy: 'gateway' | 'underway';
}

const pipeOf = (network: Network, id: Id, from: End, innerTags: TagCount): TunnelPipe | undefined => {
  const stack = tunnelStack(network, id, from, innerTags);
  if (stack === undefined) return undefined;
  const landing = landingOf(network, from === 'a' ? stack.path.landingA : stack.path.landingB);
  const overheadBytes = accessOverheadBytes(landing.accessOverhead ?? 'none');
  const portMtu = entryOf(network.design.devices, landing.device).ports[landing.port]?.mtu;
  // A port with access overhead in front of it is a plain Ethernet port unless it says otherwise.
  const payloadBytes = portMtu ?? (overheadBytes === 0 ? Infinity : bareStack.accessPayloadBytes);
  const isOwn = payloadBytes - overheadBytes <= (stack.mtuBytes ?? Infinity);
  return {
    ...stack,
    stackKey: JSON.stringify(stack.stack ?? null),
    limitedBy: isOwn ? 'gateway' : 'underway',
  };
};

const remembered = perNetwork((_network) => new Map<string, TunnelPipe | undefined>());

/** The pipe from one end of a tunnel to the other for frames with so many tags; undefined where no transport joins them. */
export const tunnelPipe = (
  network: Network,
  id: Id,
  from: End,
  innerTags: TagCount,
): TunnelPipe | undefined => {
  const known = remembered(network);
  const key = `${from} ${innerTags} ${id}`;
  if (!known.has(key)) known.set(key, pipeOf(network, id, from, innerTags));
  return known.get(key);
};

const largestKnown = perNetwork((_network) => new Map<string, number>());

/**
 * The largest IP packet of a host, in bytes, that a pipe carries whole; 0 where not even the smallest one fits, undefined
 * where its stack or its MTU isn't known.
 */
export const largestThrough = (
  network: Network,
  { stack, stackKey, mtuBytes }: TunnelPipe,
  innerIpVersion: IpVersion,
): number | undefined => {
  if (stack === undefined || mtuBytes === undefined) return undefined;
  const known = largestKnown(network);
  const key = `${mtuBytes} ${innerIpVersion} ${stackKey}`;
  const before = known.get(key);
  if (before !== undefined) return before;
  // The access overhead is taken from the pipe's MTU already.
  const bare: Stack = { ...stack, accessOverhead: 'none' };
  const answer = largestInnerPacket({ transportMtuBytes: mtuBytes, innerIpVersion, stack: bare });
  const largestBytes = answer.ok ? answer.largestInnerPacketBytes : 0;
  known.set(key, largestBytes);
  return largestBytes;
};
