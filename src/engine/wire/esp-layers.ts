import {
  ESP_HEADER_BYTES,
  ESP_TRAILER_BYTES,
  espIntegrities,
  espTransforms,
  type EspTransform,
} from '../reference/esp.ts';
import { NAT_TRAVERSAL_HEADER_BYTES } from '../reference/nat-traversal.ts';
import { bytesOf, header, trailer, type Layer } from './layer.ts';
import type { EspTransport, EspTunnel } from './stack.ts';

/** Bytes of padding that ESP adds to this many bytes of payload. */
// RFC 4303 section 2.4: payload, padding, pad length and next header end on a multiple of the transform's block and of 4.
export function espPaddingBytes(payloadBytes: number, transform: EspTransform): number {
  const excess = (payloadBytes + ESP_TRAILER_BYTES) % transform.padMultipleBytes;
  return excess === 0 ? 0 : transform.padMultipleBytes - excess;
}

/** Layers of an ESP packet around what it protects, without the IP header in front. */
export function espLayers(
  protectedLayers: readonly Layer[],
  esp: EspTunnel | EspTransport,
): readonly Layer[] {
  const transform: EspTransform = espTransforms[esp.transform];
  const payloadBytes = bytesOf(protectedLayers);
  const icvBytes = esp.integrity === undefined ? transform.icvBytes : espIntegrities[esp.integrity].icvBytes;
  const layers: Layer[] = [];
  if (esp.natTraversal) {
    layers.push(header('nat-traversal-udp', 'UDP for NAT traversal', NAT_TRAVERSAL_HEADER_BYTES));
  }
  // RFC 8221 section 4: encryption without integrity must not be used; the working says so where it was asked for.
  const unprotected = icvBytes === 0 ? '; nothing protects integrity' : '';
  layers.push(header('esp-header', 'ESP', ESP_HEADER_BYTES, `SPI and sequence number${unprotected}`));
  if (transform.ivBytes > 0) layers.push(header('esp-iv', 'ESP IV', transform.ivBytes, transform.name));
  layers.push(...protectedLayers);
  layers.push(
    trailer(
      'esp-padding',
      'ESP padding',
      espPaddingBytes(payloadBytes, transform),
      `${payloadBytes} + ${ESP_TRAILER_BYTES} up to a multiple of ${transform.padMultipleBytes}`,
    ),
    trailer('esp-trailer', 'ESP trailer', ESP_TRAILER_BYTES, 'pad length and next header'),
  );
  if (icvBytes > 0) {
    const name = esp.integrity === undefined ? transform.name : espIntegrities[esp.integrity].name;
    layers.push(trailer('esp-icv', 'ESP ICV', icvBytes, name));
  }
  return layers;
}
