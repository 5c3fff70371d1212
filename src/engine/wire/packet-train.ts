import { fragmentsOf } from './fragments-of.ts';
import { frameAround } from './frame-layers.ts';
import { payload } from './layer.ts';
import type { Answer } from './problem.ts';
import { stackLayers, type WirePacket, type WireTotals } from './stack-layers.ts';

/** What one inner packet becomes on the underlay: one frame, or several where the outermost packet is cut. */
export interface PacketTrain {
  /** Lengths summed over all frames. */
  readonly totals: WireTotals;
  readonly frames: number;
}

/** The frames that carry one inner packet; `fragmentMtuBytes` cuts outermost packets that are longer. */
export function packetTrain(packet: WirePacket, fragmentMtuBytes?: number): Answer<PacketTrain> {
  const answer = stackLayers(packet);
  if (!answer.ok) return answer;
  const { totals, outerIpVersion } = answer;
  if (fragmentMtuBytes === undefined) return { ok: true, totals, frames: 1 };
  const fragments = fragmentsOf(totals.outerIpPacketBytes, outerIpVersion, fragmentMtuBytes);
  if (!fragments.ok) {
    return {
      ok: false,
      problems: fragments.problems.map((problem) =>
        problem.field === 'mtuBytes' ? { ...problem, field: 'fragmentMtuBytes' } : problem,
      ),
    };
  }
  if (!fragments.fragmented) return { ok: true, totals, frames: 1 };

  const sum = { outerIpPacketBytes: 0, accessPacketBytes: 0, frameBytes: 0, wireBytes: 0 };
  for (const { packetBytes } of fragments.pieces) {
    const frame = frameAround([payload('fragment', 'Fragment', packetBytes)], packet.stack);
    sum.outerIpPacketBytes += packetBytes;
    sum.accessPacketBytes += frame.accessPacketBytes;
    sum.frameBytes += frame.frameBytes;
    sum.wireBytes += frame.wireBytes;
  }
  return { ok: true, totals: { ...totals, ...sum }, frames: fragments.pieces.length };
}
