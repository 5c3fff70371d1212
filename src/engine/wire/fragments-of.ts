import {
  FRAGMENT_UNIT_BYTES,
  IP_HEADER_BYTES,
  IPV6_FRAGMENT_HEADER_BYTES,
  LARGEST_IP_PACKET_BYTES,
  SMALLEST_LINK_MTU_BYTES,
  type IpVersion,
} from '../reference/ip.ts';
import { refuse, wholeNumberProblems, type Answer } from './problem.ts';

/** One IP packet that carries a part of a longer one. */
export interface Fragment {
  /** Where its data begins in the data of the whole packet. */
  readonly offsetBytes: number;
  readonly dataBytes: number;
  /** Whole packet, IP header (and IPv6 Fragment header) included. */
  readonly packetBytes: number;
  readonly moreFollow: boolean;
}

export interface Fragments {
  readonly fragmented: boolean;
  /** In sending order; a packet that fits is one piece without a Fragment header. */
  readonly pieces: readonly Fragment[];
  /** All pieces together. */
  readonly totalPacketBytes: number;
}

/**
 * Into which packets an IP packet is cut for an MTU: by any router for IPv4, only by its source for IPv6.
 * Every piece but the last is as long as the 8-byte unit allows; headers carry no options.
 */
// RFC 791 section 3.2 'An Example Fragmentation Procedure'; RFC 8200 section 4.5.
export function fragmentsOf(packetBytes: number, ipVersion: IpVersion, mtuBytes: number): Answer<Fragments> {
  const headerBytes = IP_HEADER_BYTES[ipVersion];
  const problems = [
    ...wholeNumberProblems('packetBytes', packetBytes, headerBytes, LARGEST_IP_PACKET_BYTES[ipVersion]),
    ...wholeNumberProblems(
      'mtuBytes',
      mtuBytes,
      SMALLEST_LINK_MTU_BYTES[ipVersion],
      LARGEST_IP_PACKET_BYTES[ipVersion],
    ),
  ];
  if (problems.length > 0) return refuse(problems);

  const wholeDataBytes = packetBytes - headerBytes;
  if (packetBytes <= mtuBytes) {
    const piece = { offsetBytes: 0, dataBytes: wholeDataBytes, packetBytes, moreFollow: false };
    return { ok: true, fragmented: false, pieces: [piece], totalPacketBytes: packetBytes };
  }

  const overheadBytes = headerBytes + (ipVersion === 'ipv6' ? IPV6_FRAGMENT_HEADER_BYTES : 0);
  const roomBytes = mtuBytes - overheadBytes;
  const stepBytes = roomBytes - (roomBytes % FRAGMENT_UNIT_BYTES);
  const pieces: Fragment[] = [];
  let offsetBytes = 0;
  // The last piece may use the whole room: only the others end on a unit.
  while (wholeDataBytes - offsetBytes > roomBytes) {
    pieces.push({
      offsetBytes,
      dataBytes: stepBytes,
      packetBytes: overheadBytes + stepBytes,
      moreFollow: true,
    });
    offsetBytes += stepBytes;
  }
  const lastBytes = wholeDataBytes - offsetBytes;
  pieces.push({
    offsetBytes,
    dataBytes: lastBytes,
    packetBytes: overheadBytes + lastBytes,
    moreFollow: false,
  });
  const totalPacketBytes = pieces.reduce((sum, piece) => sum + piece.packetBytes, 0);
  return { ok: true, fragmented: true, pieces, totalPacketBytes };
}
