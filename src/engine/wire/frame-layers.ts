import {
  ETHERNET_HEADER_BYTES,
  FCS_BYTES,
  INTER_FRAME_GAP_BYTES,
  MINIMUM_PAYLOAD_BYTES,
  PREAMBLE_BYTES,
  VLAN_TAG_BYTES,
} from '../reference/ethernet.ts';
import { PPP_PROTOCOL_BYTES, PPPOE_HEADER_BYTES } from '../reference/pppoe.ts';
import { bytesOf, header, trailer, type Layer } from './layer.ts';
import type { Stack, TagCount } from './stack.ts';

/** VLAN tags in the order in which they stand on the wire, outermost first. */
export function tagLayers(prefix: 'inner' | 'outer', count: TagCount): readonly Layer[] {
  const layers: Layer[] = [];
  for (let place = 1; place <= count; place += 1) {
    layers.push(
      header(`${prefix}-tag-${place}`, count === 1 ? 'VLAN tag' : `VLAN tag ${place}`, VLAN_TAG_BYTES),
    );
  }
  return layers;
}

/** Bytes that fill an Ethernet payload of this length up to the minimum. */
export const framePaddingBytes = (payloadBytes: number): number =>
  Math.max(0, MINIMUM_PAYLOAD_BYTES - payloadBytes);

/** Bytes between the Ethernet header and the outermost IP packet. */
export function accessOverheadBytes(accessOverhead: Stack['accessOverhead']): number {
  if (accessOverhead === 'none') return 0;
  return accessOverhead === 'pppoe' ? PPPOE_HEADER_BYTES + PPP_PROTOCOL_BYTES : accessOverhead;
}

function accessLayers(accessOverhead: Stack['accessOverhead']): readonly Layer[] {
  if (accessOverhead === 'pppoe') {
    return [header('pppoe', 'PPPoE', PPPOE_HEADER_BYTES), header('ppp', 'PPP protocol', PPP_PROTOCOL_BYTES)];
  }
  const bytes = accessOverheadBytes(accessOverhead);
  return bytes === 0 ? [] : [header('access', 'Access overhead', bytes)];
}

export interface FrameTotals {
  /** What has to fit into the Ethernet payload of the access link. */
  readonly accessPacketBytes: number;
  /** Ethernet header to FCS. */
  readonly frameBytes: number;
  /** Frame with preamble and gap: the time it takes on the cable. */
  readonly wireBytes: number;
}

/** Layers of the outermost frame around an IP packet, with the lengths that count on the cable. */
export function frameAround(
  ipPacket: readonly Layer[],
  stack: Stack,
): FrameTotals & { readonly layers: readonly Layer[] } {
  const accessPacket = [...accessLayers(stack.accessOverhead), ...ipPacket];
  const accessPacketBytes = bytesOf(accessPacket);
  const paddingBytes = framePaddingBytes(accessPacketBytes);
  const frame = [
    header('outer-ethernet', 'Ethernet', ETHERNET_HEADER_BYTES),
    ...tagLayers('outer', stack.outerTags),
    ...accessPacket,
    ...(paddingBytes > 0
      ? [trailer('frame-padding', 'Frame padding', paddingBytes, `up to ${MINIMUM_PAYLOAD_BYTES} bytes`)]
      : []),
    trailer('fcs', 'FCS', FCS_BYTES),
  ];
  const layers = [
    header('preamble', 'Preamble', PREAMBLE_BYTES),
    ...frame,
    trailer('gap', 'Gap to the next frame', INTER_FRAME_GAP_BYTES),
  ];
  return { accessPacketBytes, frameBytes: bytesOf(frame), wireBytes: bytesOf(layers), layers };
}
