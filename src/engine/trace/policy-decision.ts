import ipaddr from 'ipaddr.js';
import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type { Forwarder } from '../network/network.ts';
import { parsePrefix } from '../network/parse-prefix.ts';

/** What a filter can tell about a frame. */
export interface FrameFacts {
  readonly kind: 'arp' | 'ipv4' | 'ipv6' | 'other';
  readonly cast: 'unicast' | 'broadcast' | 'multicast';
  readonly etherType?: number;
  readonly protocol?: number;
  readonly ports: readonly number[];
  /** Empty where the design doesn't say. */
  readonly sources: readonly string[];
  readonly destinations: readonly string[];
}

type Rule = NonNullable<Forwarder['policy']>[string];
type Match = 'yes' | 'no' | 'unknown';

const matchesPrefixes = (prefixes: Rule['sources'], addresses: readonly string[]): Match => {
  if (prefixes === undefined) return 'yes';
  if (addresses.length === 0) return 'unknown';
  const isIn = prefixes.some((prefix) => {
    const [network, bits] = parsePrefix(prefix);
    return addresses.some((address) => {
      const single = ipaddr.parse(address);
      return single.kind() === network.kind() && single.match([network, bits]);
    });
  });
  return isIn ? 'yes' : 'no';
};

const isOfKind = (rule: Rule, frame: FrameFacts): boolean => {
  switch (rule.frames) {
    case 'any':
      return true;
    case 'multicast':
    case 'broadcast':
      return rule.frames === frame.cast;
    case 'ethertype':
      return rule.ethertype === undefined || rule.ethertype === frame.etherType;
    default:
      return rule.frames === frame.kind;
  }
};

const matchOf = (rule: Rule, frame: FrameFacts): Match => {
  if (!isOfKind(rule, frame)) return 'no';
  const isIp = frame.kind === 'ipv4' || frame.kind === 'ipv6';
  const hasAddresses = isIp || frame.kind === 'arp';
  const parts: Match[] = [];
  if (rule.protocol !== undefined)
    parts.push(
      !isIp
        ? 'no'
        : frame.protocol === undefined
          ? 'unknown'
          : frame.protocol === rule.protocol
            ? 'yes'
            : 'no',
    );
  if (rule.ports !== undefined)
    parts.push(
      !isIp || (frame.protocol !== undefined && frame.protocol !== 6 && frame.protocol !== 17)
        ? 'no'
        : frame.ports.length === 0
          ? 'unknown'
          : frame.ports.some((port) => rule.ports!.includes(port))
            ? 'yes'
            : 'no',
    );
  for (const [prefixes, addresses] of [
    [rule.sources, frame.sources],
    [rule.destinations, frame.destinations],
  ] as const)
    if (prefixes !== undefined) parts.push(hasAddresses ? matchesPrefixes(prefixes, addresses) : 'no');
  return parts.includes('no') ? 'no' : parts.includes('unknown') ? 'unknown' : 'yes';
};

export type PolicyDecision =
  | { readonly passes: true; readonly rule?: Id }
  | { readonly passes: false; readonly because: 'rule'; readonly rule: Id; readonly isSure: boolean }
  | { readonly passes: false; readonly because: 'default' | 'multicast' };

/**
 * Whether a forwarder lets this very frame pass. A bridge filters nothing but multicast where it is told to; a cross-connect
 * passes what a rule permits and drops the rest. What the design doesn't say never helps a frame through.
 */
export const policyDecision = (
  forwarder: Forwarder,
  direction: 'to-tunnel' | 'from-tunnel',
  frame: FrameFacts,
): PolicyDecision => {
  if (forwarder.multicast === 'drop' && frame.cast === 'multicast')
    return { passes: false, because: 'multicast' };
  if (forwarder.kind === 'bridge') return { passes: true };
  for (const [id, rule] of inRankOrder(forwarder.policy)) {
    if (rule.direction !== 'both' && rule.direction !== direction) continue;
    const match = matchOf(rule, frame);
    if (rule.action === 'permit' && match === 'yes') return { passes: true, rule: id };
    if (rule.action === 'deny' && match !== 'no')
      return { passes: false, because: 'rule', rule: id, isSure: match === 'yes' };
  }
  return { passes: false, because: 'default' };
};
