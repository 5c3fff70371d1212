import { IP_HEADER_BYTES } from '../../engine/reference/ip.ts';
import type { Layer } from '../../engine/wire/layer.ts';
import { bareStack, type Stack } from '../../engine/wire/stack.ts';
import { stackLayers } from '../../engine/wire/stack-layers.ts';
import { isInFrame, isInIpPacket, shortNameOf } from './layer-names.ts';
import type { WireFigures } from './wire-figures.ts';

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

/** The packet at one place on its way: what stands before the host's payload, the payload, what stands after it. */
export interface AnatomyRow {
  readonly title: string;
  readonly note: string;
  readonly before: readonly ByteBlock[];
  readonly payloadBytes: number;
  readonly after: readonly ByteBlock[];
  /** The outermost IP packet. */
  readonly ipPacketBytes: number;
  /** What it has to fit into; absent inside a device. */
  readonly pipeBytes?: number;
}

/** The packet step by step from the host to the underlay, and last the largest one that passes. */
export function anatomyRows(figures: WireFigures): readonly AnatomyRow[] {
  const { stack, inward, outward } = figures;
  const packetBytes = outward.totals.innerPacketBytes;
  const rowOf = (
    title: string,
    note: string,
    shown: Stack,
    innerPacketBytes: number,
    { keep = isInFrame, pipeBytes }: { keep?: (layer: Layer) => boolean; pipeBytes?: number } = {},
  ): AnatomyRow => {
    const { innerIpVersion } = figures;
    const answer = stackLayers({ innerPacketBytes, innerIpVersion, stack: shown });
    if (!answer.ok) throw new Error('a part of a stack that was computed cannot be computed');
    const blocks = blocksOf(answer.layers.filter(keep), IP_HEADER_BYTES[innerIpVersion]);
    return {
      title,
      note,
      ...blocks,
      ipPacketBytes: answer.totals.outerIpPacketBytes,
      ...(pipeBytes === undefined ? {} : { pipeBytes }),
    };
  };

  const rows: AnatomyRow[] = [];
  const { vxlanOver, innerTags, esp } = stack;
  if (vxlanOver !== 'none' || esp.mode !== 'none') {
    const tagged = vxlanOver === 'none' ? 0 : innerTags;
    rows.push(
      rowOf(
        'From the host',
        tagged === 0 ? 'its frame' : `its frame, ${tagged} ${tagged === 1 ? 'tag' : 'tags'} kept`,
        { ...bareStack, outerTags: tagged },
        packetBytes,
      ),
    );
  }
  if (vxlanOver !== 'none' && esp.mode !== 'none') {
    rows.push(
      rowOf('Into VXLAN', 'inside the device', { ...bareStack, vxlanOver, innerTags }, packetBytes, {
        keep: isInIpPacket,
      }),
    );
  }
  const pipeBytes = inward.ipMtuBytes;
  rows.push(rowOf('To the transport', lastStepOf(stack), stack, packetBytes, { pipeBytes }));
  const largest = inward.largestInnerPacketBytes;
  if (largest !== packetBytes) {
    rows.push(rowOf(`With ${largest} B`, 'the largest that passes whole', stack, largest, { pipeBytes }));
  }
  return rows;
}

function lastStepOf({ vxlanOver, esp, accessOverhead }: Stack): string {
  const access = accessOverhead === 'none' || accessOverhead === 0 ? '' : ', access overhead added';
  if (esp.mode !== 'none') {
    return `ESP ${esp.mode} mode added${esp.natTraversal ? ', in UDP' : ''}${access}`;
  }
  return `${vxlanOver === 'none' ? 'as it is' : 'VXLAN added'}${access}`;
}

/** The host's IP header is drawn as a block of its own, so that the payload begins at one place in every stack. */
function blocksOf(
  layers: readonly Layer[],
  ipHeaderBytes: number,
): Pick<AnatomyRow, 'before' | 'payloadBytes' | 'after'> {
  const at = layers.findIndex(({ kind }) => kind === 'payload');
  const packet = layers[at];
  if (packet === undefined) throw new Error('a packet without its payload');
  const headed = packet.id === 'inner-packet';
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
