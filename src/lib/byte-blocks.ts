import type { Layer } from '../engine/wire/layer.ts';
import { isInIpPacket, shortNameOf } from './layer-names.ts';

export type ByteLook = 'plain' | 'tag' | 'access' | 'vxlan' | 'esp' | 'packet';

/** Bytes that belong together and are drawn as one block. */
export interface ByteBlock {
  readonly id: string;
  readonly name: string;
  readonly bytes: number;
  readonly look: ByteLook;
  /** Part of the outermost IP packet. */
  readonly inIpPacket: boolean;
}

/** A frame as one bar: what stands before the host's payload, the payload, what stands after it. */
export interface ByteBar {
  readonly before: readonly ByteBlock[];
  readonly payloadBytes: number;
  readonly after: readonly ByteBlock[];
  /** The outermost IP packet. */
  readonly ipPacketBytes: number;
  /** What it has to fit into; absent inside a device. */
  readonly pipeBytes?: number;
}

/** A bar with what is written above it. */
export interface AnatomyRow extends ByteBar {
  readonly title: string;
  readonly note: string;
}

/**
 * Layers as blocks, those without bytes left out. The host's IP header is a block of its own, so that the payload begins at
 * one place in every stack; a frame without IP has a header of 0 bytes and none is drawn.
 */
export function blocksOf(
  layers: readonly Layer[],
  ipHeaderBytes: number,
): Pick<ByteBar, 'before' | 'payloadBytes' | 'after'> {
  const at = layers.findIndex(({ kind }) => kind === 'payload');
  const packet = layers[at];
  if (packet === undefined) throw new Error('a packet without its payload');
  const headed = packet.id === 'inner-packet' && ipHeaderBytes > 0;
  const before = layers.slice(0, at).map(blockOf);
  return {
    before: headed
      ? [
          ...before,
          { id: 'inner-ip', name: 'IP', bytes: ipHeaderBytes, look: 'packet', inIpPacket: true } as const,
        ]
      : before,
    payloadBytes: packet.bytes - (headed ? ipHeaderBytes : 0),
    after: layers
      .slice(at + 1)
      .filter(({ bytes }) => bytes > 0)
      .map(blockOf),
  };
}

/** What the host itself sent: its IP header, where it has one, and its payload. */
export const sentBytesOf = ({ before, payloadBytes }: ByteBar): number =>
  (before.find(({ id }) => id === 'inner-ip')?.bytes ?? 0) + payloadBytes;

/** The outermost packet beside its pipe. */
export const measureOf = ({
  ipPacketBytes,
  pipeBytes,
}: Pick<ByteBar, 'ipPacketBytes' | 'pipeBytes'>): string =>
  pipeBytes === undefined ? `${ipPacketBytes} B` : `${ipPacketBytes} B in a ${pipeBytes} B pipe`;

const blockOf = (layer: Layer): ByteBlock => ({
  id: layer.id,
  name: shortNameOf(layer),
  bytes: layer.bytes,
  look: lookOf(layer.id),
  inIpPacket: isInIpPacket(layer),
});

function lookOf(id: string): ByteLook {
  if (/-tag-\d$/.test(id)) return 'tag';
  if (['pppoe', 'ppp', 'access'].includes(id)) return 'access';
  if (id.startsWith('vxlan')) return 'vxlan';
  if (id.startsWith('esp-') || id === 'outer-ip' || id === 'nat-traversal-udp') return 'esp';
  return id === 'inner-ip' ? 'packet' : 'plain';
}
