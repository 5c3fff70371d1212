import type { IpVersion } from '../reference/ip.ts';
import { mixProblems, type FrameMix } from './frame-mix.ts';
import { packetTrain } from './packet-train.ts';
import { refuse, type Answer } from './problem.ts';
import type { Stack } from './stack.ts';
import type { WireTotals } from './stack-layers.ts';

/** How traffic meets the underlay beyond its stack. */
export interface Carriage {
  /** IPv4 where absent. */
  readonly innerIpVersion?: IpVersion;
  /** Outermost packets longer than this are cut; absent means that they leave whole, however long. */
  readonly fragmentMtuBytes?: number;
}

export type TotalName = keyof WireTotals;

/** Lengths of a mix summed over its weights: the mean packet, times the sum of weights. */
export interface WeightedTotals {
  readonly weight: bigint;
  readonly bytes: Readonly<Partial<Record<TotalName, bigint>>>;
  readonly wireBytes: bigint;
  readonly innerPacketBytes: bigint;
  /** Frames on the underlay. */
  readonly frames: bigint;
}

/** What the packets of a mix measure together, each weighted by how often it occurs. */
export function weightedTotals(mix: FrameMix, stack: Stack, carriage: Carriage): Answer<WeightedTotals> {
  const innerIpVersion = carriage.innerIpVersion ?? 'ipv4';
  const problems = mixProblems('mix', mix, innerIpVersion);
  if (problems.length > 0) return refuse(problems);

  let weight = 0n;
  let frames = 0n;
  const bytes: Partial<Record<TotalName, bigint>> = {};
  for (const [index, entry] of mix.entries()) {
    const packet = { innerPacketBytes: entry.ipBytes, innerIpVersion, stack };
    const train = packetTrain(packet, carriage.fragmentMtuBytes);
    if (!train.ok) {
      return refuse(
        train.problems.map((problem) =>
          problem.field === 'innerPacketBytes' ? { ...problem, field: `mix.${index}.ipBytes` } : problem,
        ),
      );
    }
    const times = BigInt(entry.weight);
    weight += times;
    frames += times * BigInt(train.frames);
    for (const name of totalNames) {
      const length = train.totals[name];
      if (length !== undefined) bytes[name] = (bytes[name] ?? 0n) + times * BigInt(length);
    }
  }
  return {
    ok: true,
    weight,
    frames,
    bytes,
    wireBytes: bytes.wireBytes ?? 0n,
    innerPacketBytes: bytes.innerPacketBytes ?? 0n,
  };
}

/** From the inside out. */
export const totalNames = [
  'innerPacketBytes',
  'innerFrameBytes',
  'vxlanPacketBytes',
  'outerIpPacketBytes',
  'accessPacketBytes',
  'frameBytes',
  'wireBytes',
] as const satisfies readonly TotalName[];
