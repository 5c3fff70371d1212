import { IP_HEADER_BYTES, type IpVersion } from '../reference/ip.ts';
import { accessOverheadBytes } from './frame-layers.ts';
import { refuse, wholeNumberProblems, type Answer } from './problem.ts';
import { stackProblems, type Stack } from './stack.ts';
import { buildLayers, stackLayers } from './stack-layers.ts';

// RFC 791 section 3.2: the least MTU of an IPv4 link; a smaller value is a slip of the pen.
export const LEAST_TRANSPORT_MTU_BYTES = 68;
export const MOST_TRANSPORT_MTU_BYTES = 65_535;

/** A stack over a transport that carries IP packets up to its MTU. */
export interface WirePath {
  readonly transportMtuBytes: number;
  /** Decides the smallest packet there is, and the header that ESP transport mode leaves outside without VXLAN. */
  readonly innerIpVersion: IpVersion;
  readonly stack: Stack;
}

export interface LargestInnerPacket {
  readonly largestInnerPacketBytes: number;
  /** The outermost packet around it. */
  readonly outerAtLargestBytes: number;
  /** The outermost packet around an inner packet one byte longer: over the MTU. */
  readonly outerAtNextBytes: number;
  /** Room that the padding staircase leaves unused. */
  readonly unusedBytes: number;
  /** What the outermost packet may have: the transport's MTU, or less where access overhead takes from it. */
  readonly ipMtuBytes: number;
  readonly limitedBy: 'transport' | 'access';
}

/** Largest outermost IP packet for a transport's MTU and the overhead of the access link in front of it. */
export function ipMtuOf(
  transportMtuBytes: number,
  stack: Stack,
): Pick<LargestInnerPacket, 'ipMtuBytes' | 'limitedBy'> {
  const overheadBytes = accessOverheadBytes(stack.accessOverhead);
  // RFC 2516 section 7: what stands between Ethernet and IP is taken from the Ethernet payload.
  const accessMtuBytes = overheadBytes === 0 ? Infinity : stack.accessPayloadBytes - overheadBytes;
  return accessMtuBytes < transportMtuBytes
    ? { ipMtuBytes: accessMtuBytes, limitedBy: 'access' }
    : { ipMtuBytes: transportMtuBytes, limitedBy: 'transport' };
}

/**
 * The largest IP packet of a host that leaves the outermost packet whole.
 * Refuses a transport over which not even a bare IP header fits, and says the MTU that would do.
 */
export function largestInnerPacket(path: WirePath): Answer<LargestInnerPacket> {
  const problems = [
    ...wholeNumberProblems(
      'transportMtuBytes',
      path.transportMtuBytes,
      LEAST_TRANSPORT_MTU_BYTES,
      MOST_TRANSPORT_MTU_BYTES,
    ),
    ...stackProblems(path.stack),
  ];
  if (problems.length > 0) return refuse(problems);

  const { stack, innerIpVersion, transportMtuBytes } = path;
  const outerBytes = (innerPacketBytes: number): number =>
    buildLayers({ innerPacketBytes, innerIpVersion, stack }).totals.outerIpPacketBytes;
  const { ipMtuBytes, limitedBy } = ipMtuOf(transportMtuBytes, stack);
  const smallest = IP_HEADER_BYTES[innerIpVersion];
  // The access link alone leaves room for the smallest packet in any stack; only a transport's MTU can be too small.
  if (outerBytes(smallest) > ipMtuBytes) {
    const expected = `at least ${outerBytes(smallest)}: the smallest packet grows to that`;
    return refuse([{ field: 'transportMtuBytes', value: transportMtuBytes, expected }]);
  }

  // Sizes never decrease as the packet grows, and no stack makes a packet shorter, so the answer lies in between.
  let fits: number = smallest;
  let tooLarge = ipMtuBytes + 1;
  while (tooLarge - fits > 1) {
    const middle = Math.floor((fits + tooLarge) / 2);
    if (outerBytes(middle) <= ipMtuBytes) fits = middle;
    else tooLarge = middle;
  }
  const outerAtLargestBytes = outerBytes(fits);
  return {
    ok: true,
    largestInnerPacketBytes: fits,
    outerAtLargestBytes,
    outerAtNextBytes: outerBytes(tooLarge),
    unusedBytes: ipMtuBytes - outerAtLargestBytes,
    ipMtuBytes,
    limitedBy,
  };
}

export interface UnderlayMtu {
  /** MTU that the transport needs: the outermost IP packet. */
  readonly transportMtuBytes: number;
  /** Ethernet payload that the access link needs, its overhead included. */
  readonly accessPayloadBytes: number;
}

/** Which underlay carries an inner packet of this length whole. */
export function underlayMtuFor(
  innerPacketBytes: number,
  stack: Stack,
  innerIpVersion: IpVersion = 'ipv4',
): Answer<UnderlayMtu> {
  const answer = stackLayers({ innerPacketBytes, innerIpVersion, stack });
  if (!answer.ok) return answer;
  const { outerIpPacketBytes, accessPacketBytes } = answer.totals;
  return { ok: true, transportMtuBytes: outerIpPacketBytes, accessPayloadBytes: accessPacketBytes };
}
