import type { Design, ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { ICMP_ECHO_HEADER_BYTES, IP_HEADER_BYTES, type IpVersion } from '../reference/ip.ts';
import { TCP_HEADER_BYTES } from '../reference/tcp.ts';
import { underlayMtuFor } from '../wire/largest-inner-packet.ts';
import { largestThrough } from '../wire/largest-through.ts';
import { bareStack, type TagCount } from '../wire/stack.ts';
import { tunnelStack, type TunnelStack } from '../wire/tunnel-stack.ts';
import { deviceAt } from './device-at.ts';
import type { ProbeInput } from './probe.ts';
import type { Trace, TraceStep } from './trace.ts';
import { traceFrame } from './trace-frame.ts';

/** Which packets go whole all the way to whoever a probe is for. Sizes in bytes. */
export interface WhatFits {
  /** Largest IP packet of the sender; absent where no limit on the way is known. */
  readonly largestBytes?: number;
  /** The cable or the tunnel that sets it, the nearest of several. */
  readonly limitedBy?: ElementRef;
  /** MSS to which TCP would have to keep. */
  readonly tcpMssBytes?: number;
  /** Payload of the largest echo request that passes with DF set. */
  readonly pingPayloadBytes?: number;
  /** MTU that every transport on the way would have to have for packets of 1500 to go whole. */
  readonly transportMtuFor1500Bytes: number;
  /** Devices on the ways to those that the frame reaches when it is as short as can be, from the sender on. */
  readonly devices: readonly Id[];
  /** Those that it reaches then. */
  readonly reached: readonly Id[];
}

const shortest = (input: ProbeInput): ProbeInput =>
  input.packet.kind === 'ip'
    ? {
        ...input,
        packet: {
          ...input.packet,
          packetBytes: IP_HEADER_BYTES[input.packet.version],
          dontFragment: true,
        },
      }
    : input;

/** The steps that lead to a delivery, each once, in order of distance. */
const stepsToDeliveries = ({ steps, deliveries }: Trace): readonly TraceStep[] => {
  const wanted = new Set<number>();
  for (const { steps: arrivals } of deliveries)
    for (const arrival of arrivals)
      for (let at: number | undefined = arrival; at !== undefined && !wanted.has(at); at = steps[at]!.parent)
        wanted.add(at);
  return steps.filter(({ index }) => wanted.has(index));
};

const pipeOf = (network: Network, { crossing, tags }: TraceStep): TunnelStack | undefined =>
  crossing?.collection === 'tunnels'
    ? tunnelStack(network, crossing.id, crossing.direction === 'a-to-b' ? 'a' : 'b', tags.length as TagCount)
    : undefined;

/**
 * What goes whole from a probe's sender to all that a short frame of it reaches. Undefined where even the shortest reaches
 * nobody, or the probe is refused.
 */
export const whatFits = (design: Design, input: ProbeInput): WhatFits | undefined => {
  const trace = traceFrame(design, shortest(input));
  if (!trace.ok || trace.deliveries.length === 0) return undefined;
  const network = indexNetwork(design);
  const version: IpVersion = input.packet.kind === 'ip' ? input.packet.version : 'ipv4';
  let largestBytes: number | undefined;
  let limitedBy: ElementRef | undefined;
  let transportMtuFor1500Bytes: number = STANDARD_PAYLOAD_BYTES;
  const devices: Id[] = [];
  for (const step of stepsToDeliveries(trace)) {
    const end = step.to ?? step.elements[0];
    const device = end === undefined ? undefined : deviceAt(network.design, end);
    if (device !== undefined && !devices.includes(device)) devices.push(device);
    if (step.crossing === undefined) continue;
    const pipe = pipeOf(network, step);
    const limit =
      step.crossing.collection === 'links'
        ? step.wire?.mtuBytes
        : pipe?.stack === undefined || pipe.mtuBytes === undefined
          ? undefined
          : largestThrough(network, pipe.stack, pipe.mtuBytes, version);
    if (limit !== undefined && (largestBytes === undefined || limit < largestBytes)) {
      largestBytes = limit;
      limitedBy = step.elements[0];
    }
    const needed =
      pipe?.stack === undefined
        ? undefined
        : underlayMtuFor(
            STANDARD_PAYLOAD_BYTES,
            { ...pipe.stack, accessOverhead: bareStack.accessOverhead },
            version,
          );
    if (needed?.ok === true)
      transportMtuFor1500Bytes = Math.max(transportMtuFor1500Bytes, needed.transportMtuBytes);
  }
  // RFC 9293 section 3.7.1: fixed IP and TCP headers are taken off, options are not.
  const after = (headerBytes: number): number =>
    Math.max(0, (largestBytes ?? 0) - IP_HEADER_BYTES[version] - headerBytes);
  return {
    ...(largestBytes === undefined
      ? {}
      : {
          largestBytes,
          tcpMssBytes: after(TCP_HEADER_BYTES),
          pingPayloadBytes: after(ICMP_ECHO_HEADER_BYTES),
        }),
    ...(limitedBy === undefined ? {} : { limitedBy }),
    transportMtuFor1500Bytes,
    devices,
    reached: trace.deliveries.map(({ device }) => device),
  };
};
