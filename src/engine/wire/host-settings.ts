import { JUMBO_PAYLOAD_BYTES, STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import {
  ICMP_ECHO_HEADER_BYTES,
  IP_HEADER_BYTES,
  LARGEST_IP_PACKET_BYTES,
  SMALLEST_LINK_MTU_BYTES,
  type IpVersion,
} from '../reference/ip.ts';
import { TCP_HEADER_BYTES } from '../reference/tcp.ts';
import { underlayMtuFor, type UnderlayMtu } from './largest-inner-packet.ts';
import { refuse, wholeNumberProblems, type Answer } from './problem.ts';
import type { Stack } from './stack.ts';

export interface HostSettings {
  readonly hostMtuBytes: number;
  readonly tcpMssBytes: Readonly<Record<IpVersion, number>>;
  /** Payload of the largest echo request that passes with DF set. */
  readonly dfPingPayloadBytes: Readonly<Record<IpVersion, number>>;
  /** MTU of the gateway's interface on the segment: what is routed in then gets a proper 'too big'. */
  readonly gatewayInterfaceMtuBytes: number;
  /** Whether a segment with this MTU may carry IPv6 at all. */
  readonly ipv6MinimumMet: boolean;
  /** Underlay that would carry the usual host MTUs untouched. */
  readonly underlayFor: { readonly standard: UnderlayMtu; readonly jumbo: UnderlayMtu };
}

/**
 * What to set at hosts, gateway and underlay when packets up to this length pass whole.
 * A size for which there is no room is 0.
 */
export function hostSettings(
  largestInnerPacketBytes: number,
  stack: Stack,
  innerIpVersion: IpVersion = 'ipv4',
): Answer<HostSettings> {
  const problems = wholeNumberProblems(
    'largestInnerPacketBytes',
    largestInnerPacketBytes,
    IP_HEADER_BYTES.ipv4,
    LARGEST_IP_PACKET_BYTES.ipv4,
  );
  if (problems.length > 0) return refuse(problems);
  const standard = underlayMtuFor(STANDARD_PAYLOAD_BYTES, stack, innerIpVersion);
  if (!standard.ok) return standard;
  const jumbo = underlayMtuFor(JUMBO_PAYLOAD_BYTES, stack, innerIpVersion);
  if (!jumbo.ok) return jumbo;

  const roomAfter = (version: IpVersion, headerBytes: number): number =>
    Math.max(0, largestInnerPacketBytes - IP_HEADER_BYTES[version] - headerBytes);
  return {
    ok: true,
    hostMtuBytes: largestInnerPacketBytes,
    // RFC 9293 section 3.7.1: MTU less fixed IP and TCP headers; the sender subtracts options itself.
    tcpMssBytes: { ipv4: roomAfter('ipv4', TCP_HEADER_BYTES), ipv6: roomAfter('ipv6', TCP_HEADER_BYTES) },
    dfPingPayloadBytes: {
      ipv4: roomAfter('ipv4', ICMP_ECHO_HEADER_BYTES),
      ipv6: roomAfter('ipv6', ICMP_ECHO_HEADER_BYTES),
    },
    gatewayInterfaceMtuBytes: largestInnerPacketBytes,
    ipv6MinimumMet: largestInnerPacketBytes >= SMALLEST_LINK_MTU_BYTES.ipv6,
    underlayFor: { standard: underlayOf(standard), jumbo: underlayOf(jumbo) },
  };
}

const underlayOf = ({ transportMtuBytes, accessPayloadBytes }: UnderlayMtu): UnderlayMtu => ({
  transportMtuBytes,
  accessPayloadBytes,
});
