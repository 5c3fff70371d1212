import ipaddr from 'ipaddr.js';
import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import { parsePrefix } from './parse-prefix.ts';
import type { Family } from './association-path.ts';
import type { Association, End, Network, Tunnel } from './network.ts';
import { deviceOfTunnelEnd, ends, entryOf, otherEnd } from './network.ts';

/** The address part of an endpoint in one family, without its prefix length. */
export const endpointAddress = (network: Network, endpoint: Id, family: Family): string | undefined => {
  const entry = entryOf(network.design.endpoints, endpoint);
  return (family === 4 ? entry.ipv4 : entry.ipv6)?.split('/')[0];
};

/** The family in which a tunnel's ends address each other; undefined where their addresses share none or aren't known. */
export const tunnelFamily = (network: Network, tunnel: Tunnel): Family | undefined =>
  (tunnel.family === undefined ? ([4, 6] as const) : [tunnel.family]).find((family) =>
    ends.every((end) => endpointAddress(network, tunnel[end].endpoint, family) !== undefined),
  );

/** The end of an association that serves this end of a tunnel; undefined where neither is on the tunnel's device. */
export const associationEndOf = (
  network: Network,
  tunnel: Tunnel,
  association: Association,
  end: End,
): End | undefined => {
  const device = deviceOfTunnelEnd(network, tunnel, end);
  return association[end].device === device
    ? end
    : association[otherEnd(end)].device === device
      ? otherEnd(end)
      : undefined;
};

const contains = (prefix: string, address: string): boolean => {
  // Nearly all selectors are the endpoint's own host prefix: parsing each would be most of the work in a large design.
  if (prefix === `${address}/32` || prefix === `${address}/128`) return true;
  const [network, bits] = parsePrefix(prefix);
  const single = ipaddr.parse(address);
  return network.kind() === single.kind() && single.match([network, bits]);
};

// RFC 7348 section 5: the destination port assigned to VXLAN.
export const assignedVxlanPort = 4789;

export interface SelectorGap {
  /** The tunnel's end whose selectors leave its packets out. */
  readonly end: End;
  readonly local: string;
  readonly remote: string;
}
export type SelectorCover =
  | { readonly state: 'covers' }
  /** An end has no selectors, or addresses aren't known. */
  | { readonly state: 'unknown' }
  | { readonly state: 'misses'; readonly gaps: readonly SelectorGap[] };

/**
 * Whether the selectors at both ends of a tunnel's association take in the addresses of its endpoints: what is narrowed to
 * must lie in both (RFC 7296 section 2.9).
 */
export const selectorsCover = (network: Network, tunnelId: Id): SelectorCover => {
  const tunnel = entryOf(network.design.tunnels, tunnelId);
  if (tunnel.association === undefined) return { state: 'unknown' };
  const association = entryOf(network.design.associations, tunnel.association);
  const family = tunnelFamily(network, tunnel);
  if (family === undefined) return { state: 'unknown' };
  const gaps: SelectorGap[] = [];
  let isKnown = true;
  for (const end of ends) {
    const side = associationEndOf(network, tunnel, association, end);
    const selectors = side === undefined ? [] : inRankOrder(association[side].selectors);
    if (selectors.length === 0) {
      isKnown = false;
      continue;
    }
    const local = endpointAddress(network, tunnel[end].endpoint, family)!;
    const remote = endpointAddress(network, tunnel[otherEnd(end)].endpoint, family)!;
    const port = tunnel[end].udpPort ?? assignedVxlanPort;
    const covered = selectors.some(
      ([, selector]) =>
        contains(selector.local, local) &&
        contains(selector.remote, remote) &&
        (selector.udpPort === undefined || selector.udpPort === port),
    );
    if (!covered) gaps.push({ end, local, remote });
  }
  if (gaps.length > 0) return { state: 'misses', gaps };
  return { state: isKnown ? 'covers' : 'unknown' };
};
