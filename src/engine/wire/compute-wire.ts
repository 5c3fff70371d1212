import { IP_HEADER_BYTES, type IpVersion } from '../reference/ip.ts';
import { TCP_HEADER_BYTES } from '../reference/tcp.ts';
import { fragmentsOf, type Fragments } from './fragments-of.ts';
import { linkCapacityOf, type LinkCapacity } from './frame-rate.ts';
import { hostSettings, type HostSettings } from './host-settings.ts';
import {
  ipMtuOf,
  largestInnerPacket,
  type LargestInnerPacket,
  type UnderlayMtu,
} from './largest-inner-packet.ts';
import { refuse, type Answer, type Refusal } from './problem.ts';
import { stackLayers, type StackLayers } from './stack-layers.ts';
import { singleFlowLimitBps, tcpGoodputBps, type Goodput, type SingleFlowLimit } from './tcp-goodput.ts';
import { wireRateOf, type Traffic, type WireRate } from './wire-rate-of.ts';
import type { WireRequest } from './wire-request.ts';

/** From the inner packet outwards. */
export interface Outward extends StackLayers {
  readonly neededUnderlay: UnderlayMtu;
  /** Whether the transport carries it whole; absent where its MTU wasn't given. */
  readonly fits?: boolean;
  /** The pieces of an outermost packet that doesn't fit, were it cut. */
  readonly fragments?: Fragments;
}

/** From the transport's MTU inwards, with the layers of the largest packet. */
export interface Inward extends LargestInnerPacket, StackLayers {
  readonly settings: HostSettings;
}

export interface WireResult {
  readonly outward?: Outward;
  readonly inward?: Inward;
  readonly rates?: WireRate;
  readonly capacity?: LinkCapacity;
  readonly goodput?: Goodput;
  readonly singleFlow?: SingleFlowLimit;
}

export type WireAnswer = Answer<WireResult>;

/** Everything that a request asks about bytes and rates; parts that it gives no ground for are left out. */
export function computeWire(request: WireRequest): WireAnswer {
  const outward = outwardOf(request);
  const inward = inwardOf(request);
  const refusals = [outward, inward].flatMap((part) => (part === undefined || part.ok ? [] : part.problems));
  if (refusals.length > 0) return refuse(refusals);
  const result = {
    ...(outward?.ok ? { outward: withoutOk(outward) } : {}),
    ...(inward?.ok ? { inward: withoutOk(inward) } : {}),
  };
  const rates = ratesOf(request, result);
  return rates.ok ? { ...rates, ...result } : rates;
}

function outwardOf(request: WireRequest): Answer<Outward> | undefined {
  const { innerPacketBytes, innerIpVersion, stack, transportMtuBytes } = request;
  if (innerPacketBytes === undefined) return undefined;
  const built = stackLayers({ innerPacketBytes, innerIpVersion, stack });
  if (!built.ok) return built;
  const { outerIpPacketBytes, accessPacketBytes } = built.totals;
  const outward = {
    ...built,
    neededUnderlay: { transportMtuBytes: outerIpPacketBytes, accessPayloadBytes: accessPacketBytes },
  };
  if (transportMtuBytes === undefined) return outward;
  const { ipMtuBytes, limitedBy } = ipMtuOf(transportMtuBytes, stack);
  if (outerIpPacketBytes <= ipMtuBytes) return { ...outward, fits: true };
  const fragments = fragmentsOf(outerIpPacketBytes, built.outerIpVersion, ipMtuBytes);
  if (!fragments.ok) {
    const field = limitedBy === 'access' ? 'stack.accessPayloadBytes' : 'transportMtuBytes';
    return renamed(fragments, { mtuBytes: field });
  }
  return { ...outward, fits: false, fragments: withoutOk(fragments) };
}

function inwardOf(request: WireRequest): Answer<Inward> | undefined {
  const { innerIpVersion, stack, transportMtuBytes } = request;
  if (transportMtuBytes === undefined) return undefined;
  const largest = largestInnerPacket({ transportMtuBytes, innerIpVersion, stack });
  if (!largest.ok) return largest;
  const innerPacketBytes = largest.largestInnerPacketBytes;
  const built = stackLayers({ innerPacketBytes, innerIpVersion, stack });
  if (!built.ok) return built;
  const settings = hostSettings(innerPacketBytes, stack, innerIpVersion);
  if (!settings.ok) return settings;
  return { ...largest, ...built, settings: withoutOk(settings) };
}

function ratesOf(
  request: WireRequest,
  { outward, inward }: WireResult,
): Answer<Omit<WireResult, 'outward' | 'inward'>> {
  const { stack, innerIpVersion, linkBps, transportMtuBytes, tcp } = request;
  const fragmentMtuBytes =
    request.fragmentOuter && transportMtuBytes !== undefined
      ? ipMtuOf(transportMtuBytes, stack).ipMtuBytes
      : undefined;
  const carriage = { innerIpVersion, fragmentMtuBytes };
  let result: Omit<WireResult, 'outward' | 'inward'> = {};

  if (request.traffic !== undefined) {
    const rates = wireRateOf(request.traffic as Traffic, stack, carriage);
    if (!rates.ok) return inRequest(rates);
    result = { ...result, rates: withoutOk(rates) };
    if (linkBps !== undefined) {
      const capacity = linkCapacityOf(linkBps, request.traffic.mix, stack, carriage);
      if (!capacity.ok) return inRequest(capacity);
      result = { ...result, capacity: withoutOk(capacity) };
    }
  }

  const mtuBytes = hostMtuOf(outward, inward, request.fragmentOuter);
  if (tcp === undefined || mtuBytes === undefined) return { ok: true, ...result };
  if (linkBps !== undefined) {
    const { timestamps } = tcp;
    const goodput = tcpGoodputBps({
      linkBps,
      mtuBytes,
      ipVersion: innerIpVersion,
      timestamps,
      stack,
      fragmentMtuBytes,
    });
    if (!goodput.ok) return inRequest(goodput);
    result = { ...result, goodput: withoutOk(goodput) };
  }
  if (tcp.flow !== undefined) {
    const singleFlow = singleFlowLimitBps({ ...tcp.flow, mssBytes: mssOf(mtuBytes, innerIpVersion) });
    if (!singleFlow.ok) return inRequest(singleFlow);
    result = { ...result, singleFlow: withoutOk(singleFlow) };
  }
  return { ok: true, ...result };
}

/** Length of full packets: what the host was said to send, but no longer than passes. */
function hostMtuOf(
  outward: Outward | undefined,
  inward: Inward | undefined,
  cut: boolean,
): number | undefined {
  const asked = outward?.totals.innerPacketBytes;
  const passes = inward?.largestInnerPacketBytes;
  if (asked === undefined) return passes;
  return passes === undefined || cut ? asked : Math.min(asked, passes);
}

// RFC 9293 section 3.7.1: options are not taken off.
const mssOf = (mtuBytes: number, version: IpVersion): number =>
  mtuBytes - IP_HEADER_BYTES[version] - TCP_HEADER_BYTES;

/** The fields by which the single calculations name what a request calls otherwise. */
function inRequest(refusal: Refusal): Refusal {
  return renamed(refusal, {
    mtuBytes: 'innerPacketBytes',
    mssBytes: 'innerPacketBytes',
    fragmentMtuBytes: 'transportMtuBytes',
    mix: 'traffic.mix',
    innerRateBps: 'traffic.innerRateBps',
    packetsPerSecond: 'traffic.packetsPerSecond',
    windowBytes: 'tcp.flow.windowBytes',
    rttUs: 'tcp.flow.rttUs',
    lossPerMillion: 'tcp.flow.lossPerMillion',
  });
}

function renamed(refusal: Refusal, names: Readonly<Record<string, string>>): Refusal {
  return refuse(
    refusal.problems.map((problem) => {
      const [first = '', ...rest] = problem.field.split('.');
      return { ...problem, field: [names[first] ?? first, ...rest].join('.') };
    }),
  );
}

function withoutOk<T extends { readonly ok: true }>(answer: T): Omit<T, 'ok'> {
  const { ok: _, ...rest } = answer;
  return rest;
}
