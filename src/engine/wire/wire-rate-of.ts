import type { FrameMix } from './frame-mix.ts';
import { totalNames, weightedTotals, type Carriage, type TotalName } from './mean-packet.ts';
import { refuse, wholeNumberProblems, type Answer } from './problem.ts';
import { scaledUp, type Ratio } from './ratio.ts';
import type { Stack } from './stack.ts';

export const MOST_RATE_BPS = 10_000_000_000_000;
// The longest packet in pieces for the smallest MTU takes some 1.5 Mbit: at this rate its bit/s are still a whole number.
export const MOST_PACKETS_PER_SECOND = 1_000_000_000;

/** Traffic as hosts offer it: a bit rate of their IP packets or a packet rate, and how long the packets are. */
export type Traffic = { readonly mix: FrameMix } & (
  | { readonly innerRateBps: number; readonly packetsPerSecond?: undefined }
  | { readonly packetsPerSecond: number; readonly innerRateBps?: undefined }
);

/** Traffic measured at one depth of the stack. */
export interface LayerRate {
  readonly layer: TotalName;
  readonly packetsPerSecond: number;
  readonly rateBps: number;
}

export interface WireRate {
  readonly packetsPerSecond: number;
  /** Frames on the underlay: more than inner packets where outermost packets are cut. */
  readonly framesPerSecond: number;
  readonly innerRateBps: number;
  readonly wireRateBps: number;
  /** From the inside out; depths that the stack doesn't have are left out. */
  readonly layers: readonly LayerRate[];
  /** Wire bits for a million inner bits. */
  readonly growthPerMillion: number;
}

/** What traffic costs at each depth of the stack. Every rate is rounded up, since it is a need. */
export function wireRateOf(traffic: Traffic, stack: Stack, carriage: Carriage = {}): Answer<WireRate> {
  const { innerRateBps, packetsPerSecond, mix } = traffic;
  const problems =
    innerRateBps === undefined
      ? wholeNumberProblems('packetsPerSecond', packetsPerSecond, 0, MOST_PACKETS_PER_SECOND)
      : wholeNumberProblems('innerRateBps', innerRateBps, 0, MOST_RATE_BPS);
  if (problems.length > 0) return refuse(problems);
  const sum = weightedTotals(mix, stack, carriage);
  if (!sum.ok) return sum;

  // Turns of the whole mix in a second: each sends as many packets as the weights add up to.
  const turns: Ratio =
    innerRateBps === undefined
      ? { numerator: BigInt(packetsPerSecond), denominator: sum.weight }
      : { numerator: BigInt(innerRateBps), denominator: 8n * sum.innerPacketBytes };
  const innerPackets = scaledUp(turns, sum.weight, 1n);
  const framesPerSecond = scaledUp(turns, sum.frames, 1n);
  const layers = totalNames.flatMap((layer): LayerRate[] => {
    const bytes = sum.bytes[layer];
    if (bytes === undefined) return [];
    const inside = insideLayers.has(layer);
    return [
      {
        layer,
        packetsPerSecond: inside ? innerPackets : framesPerSecond,
        rateBps: scaledUp(turns, 8n * bytes, 1n),
      },
    ];
  });
  return {
    ok: true,
    packetsPerSecond: innerPackets,
    framesPerSecond,
    innerRateBps: scaledUp(turns, 8n * sum.innerPacketBytes, 1n),
    wireRateBps: scaledUp(turns, 8n * sum.wireBytes, 1n),
    layers,
    growthPerMillion: scaledUp(
      { numerator: sum.wireBytes, denominator: sum.innerPacketBytes },
      1_000_000n,
      1n,
    ),
  };
}

/** Depths that fragmentation of the outermost packet doesn't reach. */
const insideLayers: ReadonlySet<TotalName> = new Set([
  'innerPacketBytes',
  'innerFrameBytes',
  'vxlanPacketBytes',
] as const);
