import { IP_HEADER_BYTES, LARGEST_IP_PACKET_BYTES, type IpVersion } from '../reference/ip.ts';
import {
  TCP_HEADER_BYTES,
  TCP_LARGEST_WINDOW_BYTES,
  TCP_LOSS_BOUND_CONSTANT,
  TCP_TIMESTAMPS_OPTION_BYTES,
} from '../reference/tcp.ts';
import { packetTrain } from './packet-train.ts';
import { refuse, wholeNumberProblems, type Answer } from './problem.ts';
import { scaledDown } from './ratio.ts';
import type { Stack } from './stack.ts';
import { MOST_RATE_BPS } from './wire-rate-of.ts';

export interface BulkTransfer {
  readonly linkBps: number;
  /** MTU of the host: every packet is as long. */
  readonly mtuBytes: number;
  readonly ipVersion: IpVersion;
  /** Whether segments carry the timestamps option. */
  readonly timestamps: boolean;
  readonly stack: Stack;
  /** Outermost packets longer than this are cut. */
  readonly fragmentMtuBytes?: number;
}

export interface Goodput {
  readonly goodputBps: number;
  /** Data in one segment. */
  readonly segmentBytes: number;
  /** All frames of one segment on the cable, preambles and gaps included. */
  readonly wireBytes: number;
  readonly framesPerSegment: number;
}

/**
 * What applications get from a cable filled with one-way TCP: data bits per second, rounded down.
 * Acknowledgements travel the other way and are not counted.
 */
export function tcpGoodputBps(transfer: BulkTransfer): Answer<Goodput> {
  const { linkBps, mtuBytes, ipVersion, timestamps, stack, fragmentMtuBytes } = transfer;
  const headerBytes =
    IP_HEADER_BYTES[ipVersion] + TCP_HEADER_BYTES + (timestamps ? TCP_TIMESTAMPS_OPTION_BYTES : 0);
  const problems = [
    ...wholeNumberProblems('linkBps', linkBps, 1, MOST_RATE_BPS),
    ...wholeNumberProblems('mtuBytes', mtuBytes, headerBytes + 1, LARGEST_IP_PACKET_BYTES.ipv4),
  ];
  if (problems.length > 0) return refuse(problems);
  const train = packetTrain(
    { innerPacketBytes: mtuBytes, innerIpVersion: ipVersion, stack },
    fragmentMtuBytes,
  );
  if (!train.ok) {
    return refuse(
      train.problems.map((problem) =>
        problem.field === 'innerPacketBytes' ? { ...problem, field: 'mtuBytes' } : problem,
      ),
    );
  }
  const segmentBytes = mtuBytes - headerBytes;
  const { wireBytes } = train.totals;
  return {
    ok: true,
    goodputBps: scaledDown(
      { numerator: BigInt(linkBps), denominator: BigInt(wireBytes) },
      BigInt(segmentBytes),
      1n,
    ),
    segmentBytes,
    wireBytes,
    framesPerSegment: train.frames,
  };
}

export interface SingleFlow {
  readonly windowBytes: number;
  /** Round trip. */
  readonly rttUs: number;
  readonly mssBytes: number;
  /** Packets lost of a million. */
  readonly lossPerMillion: number;
}

export interface SingleFlowLimit {
  readonly limitBps: number;
  readonly limitedBy: 'window' | 'loss';
  readonly windowLimitBps: number;
  /** Absent without loss. */
  readonly lossLimitBps?: number;
}

export const MOST_RTT_US = 60_000_000;

/**
 * What one long TCP flow can reach whatever the link, rounded down: a window per round trip, and no more than losses allow.
 * The loss bound holds for Reno-like control that halves its window on loss.
 */
export function singleFlowLimitBps(flow: SingleFlow): Answer<SingleFlowLimit> {
  const { windowBytes, rttUs, mssBytes, lossPerMillion } = flow;
  const problems = [
    ...wholeNumberProblems('windowBytes', windowBytes, 1, TCP_LARGEST_WINDOW_BYTES),
    ...wholeNumberProblems('rttUs', rttUs, 1, MOST_RTT_US),
    ...wholeNumberProblems('mssBytes', mssBytes, 1, LARGEST_IP_PACKET_BYTES.ipv4),
    ...wholeNumberProblems('lossPerMillion', lossPerMillion, 0, 1_000_000),
  ];
  if (problems.length > 0) return refuse(problems);
  // RFC 7323 section 1.1: a window per round trip.
  const windowLimitBps = Math.floor((windowBytes * 8 * 1_000_000) / rttUs);
  if (lossPerMillion === 0) {
    return { ok: true, limitBps: windowLimitBps, limitedBy: 'window', windowLimitBps };
  }
  // RFC 3819 section 8.5.1: C times MSS over round trip times the root of the loss ratio.
  const lossLimitBps = Math.floor(
    (TCP_LOSS_BOUND_CONSTANT * mssBytes * 8 * 1_000_000) / (rttUs * Math.sqrt(lossPerMillion / 1_000_000)),
  );
  return {
    ok: true,
    limitBps: Math.min(windowLimitBps, lossLimitBps),
    limitedBy: windowLimitBps <= lossLimitBps ? 'window' : 'loss',
    windowLimitBps,
    lossLimitBps,
  };
}
