import { ETHERNET_HEADER_BYTES, MINIMUM_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { IP_HEADER_BYTES, LARGEST_IP_PACKET_BYTES, type IpVersion } from '../reference/ip.ts';
import { UDP_HEADER_BYTES } from '../reference/udp.ts';
import { VXLAN_HEADER_BYTES } from '../reference/vxlan.ts';
import { espLayers } from './esp-layers.ts';
import { frameAround, framePaddingBytes, tagLayers, type FrameTotals } from './frame-layers.ts';
import { bytesOf, header, payload, trailer, type Layer } from './layer.ts';
import { refuse, wholeNumberProblems, type Answer, type Problem } from './problem.ts';
import { outermostIpVersion, stackProblems, type Stack } from './stack.ts';

/** An inner IP packet and what is put around it. */
export interface WirePacket {
  /** Whole IP packet of the host, header included. */
  readonly innerPacketBytes: number;
  readonly innerIpVersion: IpVersion;
  readonly stack: Stack;
}

export interface WireTotals extends FrameTotals {
  readonly innerPacketBytes: number;
  /** The host's frame inside VXLAN, without FCS; absent without VXLAN. */
  readonly innerFrameBytes?: number;
  /** Absent without VXLAN. In ESP transport mode this is the packet before ESP goes into it. */
  readonly vxlanPacketBytes?: number;
  /** The outermost IP packet: what a transport's MTU is compared with. */
  readonly outerIpPacketBytes: number;
}

export interface StackLayers {
  /** Outside in: headers up to the payload, then trailers back out. */
  readonly layers: readonly Layer[];
  readonly totals: WireTotals;
  readonly outerIpVersion: IpVersion;
}

/**
 * Which bytes stand on the wire for one inner IP packet, layer by layer.
 * Refuses a contradictory stack and packets longer than an IP length field can say.
 */
export function stackLayers(packet: WirePacket): Answer<StackLayers> {
  const problems = [
    ...wholeNumberProblems(
      'innerPacketBytes',
      packet.innerPacketBytes,
      IP_HEADER_BYTES[packet.innerIpVersion],
      LARGEST_IP_PACKET_BYTES[packet.innerIpVersion],
    ),
    ...stackProblems(packet.stack),
  ];
  if (problems.length > 0) return refuse(problems);
  const built = buildLayers(packet);
  const tooLong = lengthProblems(packet, built);
  return tooLong.length > 0 ? refuse(tooLong) : { ok: true, ...built };
}

/** The same for input already known to be valid. */
export function buildLayers({ innerPacketBytes, innerIpVersion, stack }: WirePacket): StackLayers {
  const { vxlanOver, esp } = stack;
  const totals: { innerFrameBytes?: number; vxlanPacketBytes?: number } = {};
  let ipHeader: Layer | undefined;
  let ipPayload: readonly Layer[];

  if (vxlanOver !== 'none') {
    const innerFrame = innerFrameLayers(innerPacketBytes, stack);
    ipHeader = header('vxlan-ip', `${ipNames[vxlanOver]} of VXLAN`, IP_HEADER_BYTES[vxlanOver]);
    ipPayload = [
      header('vxlan-udp', 'UDP of VXLAN', UDP_HEADER_BYTES),
      header('vxlan', 'VXLAN', VXLAN_HEADER_BYTES),
      ...innerFrame,
    ];
    totals.innerFrameBytes = bytesOf(innerFrame);
    totals.vxlanPacketBytes = ipHeader.bytes + bytesOf(ipPayload);
  } else if (esp.mode === 'transport') {
    const headerBytes = IP_HEADER_BYTES[innerIpVersion];
    ipHeader = header('inner-ip', `${ipNames[innerIpVersion]} of the host`, headerBytes);
    ipPayload = [payload('inner-payload', 'Payload of the host', innerPacketBytes - headerBytes)];
  } else {
    ipPayload = [payload('inner-packet', 'IP packet of the host', innerPacketBytes)];
  }

  // RFC 4303 section 3.1.1: transport mode goes between the IP header and its payload; section 3.1.2: tunnel mode
  // protects the whole packet behind a new IP header.
  if (esp.mode === 'tunnel') {
    const whole = ipHeader === undefined ? ipPayload : [ipHeader, ...ipPayload];
    ipHeader = header('outer-ip', `${ipNames[esp.outerIp]} of ESP`, IP_HEADER_BYTES[esp.outerIp]);
    ipPayload = espLayers(whole, esp);
  } else if (esp.mode === 'transport') {
    ipPayload = espLayers(ipPayload, esp);
  }

  const outerIpPacket = ipHeader === undefined ? ipPayload : [ipHeader, ...ipPayload];
  const { layers, ...frame } = frameAround(outerIpPacket, stack);
  return {
    layers,
    totals: { innerPacketBytes, ...totals, outerIpPacketBytes: bytesOf(outerIpPacket), ...frame },
    outerIpVersion: outermostIpVersion(stack, innerIpVersion),
  };
}

const ipNames = { ipv4: 'IPv4', ipv6: 'IPv6' } as const satisfies Record<IpVersion, string>;

// RFC 7348 section 5: the inner frame is carried without its FCS.
function innerFrameLayers(innerPacketBytes: number, stack: Stack): readonly Layer[] {
  const paddingBytes = stack.innerFrames === 'padded' ? framePaddingBytes(innerPacketBytes) : 0;
  return [
    header('inner-ethernet', 'Ethernet of the host', ETHERNET_HEADER_BYTES),
    ...tagLayers('inner', stack.innerTags),
    payload('inner-packet', 'IP packet of the host', innerPacketBytes),
    ...(paddingBytes > 0
      ? [
          trailer(
            'inner-padding',
            'Frame padding of the host',
            paddingBytes,
            `up to ${MINIMUM_PAYLOAD_BYTES} bytes`,
          ),
        ]
      : []),
  ];
}

function lengthProblems(packet: WirePacket, built: StackLayers): readonly Problem[] {
  const { vxlanOver } = packet.stack;
  const lengths: readonly (readonly [string, number, IpVersion])[] = [
    ...(vxlanOver === 'none'
      ? []
      : ([['VXLAN packet', built.totals.vxlanPacketBytes ?? 0, vxlanOver]] as const)),
    ['outermost packet', built.totals.outerIpPacketBytes, built.outerIpVersion],
  ];
  for (const [name, bytes, version] of lengths) {
    const most = LARGEST_IP_PACKET_BYTES[version];
    if (bytes > most) {
      return [
        {
          field: 'innerPacketBytes',
          value: packet.innerPacketBytes,
          expected: `a shorter packet: the ${name} would have ${bytes} bytes, ${ipNames[version]} allows ${most}`,
        },
      ];
    }
  }
  return [];
}
