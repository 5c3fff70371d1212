import { INTER_FRAME_GAP_BYTES, MINIMUM_FRAME_BYTES, PREAMBLE_BYTES } from '../reference/ethernet.ts';
import { LARGEST_IP_PACKET_BYTES } from '../reference/ip.ts';
import type { FrameMix } from './frame-mix.ts';
import { weightedTotals, type Carriage } from './mean-packet.ts';
import { refuse, wholeNumberProblems, type Answer } from './problem.ts';
import { scaledDown, type Ratio } from './ratio.ts';
import { bareStack, type Stack } from './stack.ts';
import { MOST_RATE_BPS } from './wire-rate-of.ts';

/** Most frames of one length (FCS included) that a cable carries in a second, rounded down. */
// RFC 2544 appendix B.
export function frameRate(linkBps: number, frameBytes: number): Answer<{ framesPerSecond: number }> {
  const problems = [
    ...wholeNumberProblems('linkBps', linkBps, 1, MOST_RATE_BPS),
    ...wholeNumberProblems('frameBytes', frameBytes, MINIMUM_FRAME_BYTES, LARGEST_IP_PACKET_BYTES.ipv6),
  ];
  if (problems.length > 0) return refuse(problems);
  const wireBits = (frameBytes + PREAMBLE_BYTES + INTER_FRAME_GAP_BYTES) * 8;
  return { ok: true, framesPerSecond: Math.floor(linkBps / wireBits) };
}

export interface LinkCapacity {
  readonly packetsPerSecond: number;
  /** Of the hosts' IP packets. */
  readonly innerRateBps: number;
  /** Of the hosts' untagged frames, FCS included. */
  readonly hostFrameRateBps: number;
  /** Packets that the same cable carries without the stack. */
  readonly barePacketsPerSecond: number;
  /** Packets through the stack for a million without it. */
  readonly sharePerMillion: number;
}

/** How much of a mix a cable carries through a stack, and against the same cable without it; rounded down. */
export function linkCapacityOf(
  linkBps: number,
  mix: FrameMix,
  stack: Stack,
  carriage: Carriage = {},
): Answer<LinkCapacity> {
  const problems = wholeNumberProblems('linkBps', linkBps, 1, MOST_RATE_BPS);
  if (problems.length > 0) return refuse(problems);
  const sum = weightedTotals(mix, stack, carriage);
  if (!sum.ok) return sum;
  const bare = weightedTotals(mix, bareStack, { innerIpVersion: carriage.innerIpVersion });
  if (!bare.ok) return bare;

  const link = BigInt(linkBps);
  const turns: Ratio = { numerator: link, denominator: 8n * sum.wireBytes };
  return {
    ok: true,
    packetsPerSecond: scaledDown(turns, sum.weight, 1n),
    innerRateBps: scaledDown(turns, 8n * sum.innerPacketBytes, 1n),
    hostFrameRateBps: scaledDown(turns, 8n * (bare.bytes.frameBytes ?? 0n), 1n),
    barePacketsPerSecond: scaledDown({ numerator: link, denominator: 8n * bare.wireBytes }, bare.weight, 1n),
    sharePerMillion: scaledDown({ numerator: bare.wireBytes, denominator: sum.wireBytes }, 1_000_000n, 1n),
  };
}
