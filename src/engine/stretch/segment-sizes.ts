import type { Design } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { tunnelPath } from '../network/association-path.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { SMALLEST_LINK_MTU_BYTES } from '../reference/ip.ts';
import { carriesIpv6 } from '../rules/packet-size-fixes.ts';
import { otherPaths } from '../rules/second-path-too-small.ts';
import type { Tight } from '../rules/segment-capacity.ts';
import { capacitiesOf, innerTagsOf } from '../rules/segment-capacity.ts';
import { capacityOnPath, outermostBytes } from '../rules/tunnel-capacity.ts';

/** What limits the packets of a segment. */
export interface Narrowest {
  readonly largestBytes: number;
  readonly tunnel: Id;
  readonly transport: Id;
  /** The transport MTU that this packet would need there, its tunnel's layers included. */
  readonly transportMtuFor: (packetBytes: number) => number | undefined;
}

const otherCapacities = (network: Network, segment: Id, tunnel: Id) =>
  otherPaths(network, tunnel).flatMap((path) => {
    const capacity = capacityOnPath(network, tunnel, innerTagsOf(network, tunnel, segment), path);
    return capacity === undefined ? [] : [{ ...capacity, tunnel, transport: path.transport }];
  });

/** The narrowest path that a tunnel of the segment takes or may turn to; undefined where no MTU on the way is known. */
export const narrowestOf = (design: Design, segment: Id): Narrowest | undefined => {
  const network = indexNetwork(design);
  const all = (capacitiesOf(network).get(segment) ?? []).flatMap((tight: Tight) => {
    const path = tunnelPath(network, tight.tunnel);
    return [
      ...(path.ok ? [{ ...tight, transport: path.transport }] : []),
      ...otherCapacities(network, segment, tight.tunnel),
    ];
  });
  const [first] = all.sort((x, y) => x.largestBytes - y.largestBytes);
  return first === undefined
    ? undefined
    : {
        largestBytes: first.largestBytes,
        tunnel: first.tunnel,
        transport: first.transport,
        transportMtuFor: (packetBytes) => outermostBytes(packetBytes, first.stack),
      };
};

/** The least that a segment's packets must be let through: RFC 8200 section 5 for IPv6, RFC 791 section 3.1 for IPv4. */
export const leastBytesOf = (design: Design, segment: Id): number =>
  carriesIpv6(indexNetwork(design), segment) ? SMALLEST_LINK_MTU_BYTES.ipv6 : 576;

/** What a segment is committed to where nobody says: all that fits, but no more than a plain Ethernet port sends. */
export const usualMtuBytes = (narrowest: Narrowest): number =>
  Math.min(STANDARD_PAYLOAD_BYTES, narrowest.largestBytes);
