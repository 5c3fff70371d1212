import type { Answer, Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import type { IpVersion } from '../reference/ip.ts';
import { largestInnerPacket } from './largest-inner-packet.ts';
import type { Stack } from './stack.ts';

const keys = new WeakMap<Stack, string>();

/** The same for equal stacks: most tunnels of a design are built alike. */
export const stackKey = (stack: Stack): string => {
  const known = keys.get(stack) ?? JSON.stringify(stack);
  keys.set(stack, known);
  return known;
};

// The same question has the same answer in every version of a design.
const largestKnown = perNetwork(
  (_network, earlier?: Answer<Map<string, number>>): Map<string, number> => earlier?.value ?? new Map(),
);

/**
 * The largest IP packet of a host, in bytes, that a stack takes through an outermost packet of at most `mtuBytes`, from which
 * the access overhead is taken already; 0 where not even the smallest one fits. Each stack of a design is searched once.
 */
export const largestThrough = (
  network: Network,
  stack: Stack,
  mtuBytes: number,
  innerIpVersion: IpVersion,
): number => {
  const known = largestKnown(network);
  const key = `${mtuBytes} ${innerIpVersion} ${stackKey(stack)}`;
  const before = known.get(key);
  if (before !== undefined) return before;
  const bare: Stack = { ...stack, accessOverhead: 'none' };
  const answer = largestInnerPacket({ transportMtuBytes: mtuBytes, innerIpVersion, stack: bare });
  const largestBytes = answer.ok ? answer.largestInnerPacketBytes : 0;
  known.set(key, largestBytes);
  return largestBytes;
};
