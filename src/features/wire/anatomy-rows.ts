import { IP_HEADER_BYTES } from '../../engine/reference/ip.ts';
import type { Layer } from '../../engine/wire/layer.ts';
import { bareStack, type Stack } from '../../engine/wire/stack.ts';
import { stackLayers } from '../../engine/wire/stack-layers.ts';
import { blocksOf, type AnatomyRow } from '../../lib/byte-blocks.ts';
import { isInFrame, isInIpPacket } from '../../lib/layer-names.ts';
import type { WireFigures } from './wire-figures.ts';

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
