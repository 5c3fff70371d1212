import type { Entry } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { tagList } from '../network/frame-tags.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, otherEnd } from '../network/network.ts';
import { isGateway } from '../model/devices.ts';
import type { FrameMix } from '../wire/frame-mix.ts';
import type { Carriage } from '../wire/mean-packet.ts';
import { largestInnerPacket } from '../wire/largest-inner-packet.ts';
import type { Answer, Problem } from '../wire/problem.ts';
import type { Stack, TagCount } from '../wire/stack.ts';
import { bareStack } from '../wire/stack.ts';
import type { Missing, TunnelStack } from '../wire/tunnel-stack.ts';
import { tunnelStack } from '../wire/tunnel-stack.ts';
import { wireRateOf } from '../wire/wire-rate-of.ts';
import type { Crossing } from './unicast-path.ts';
import { frameOf, pointOf, unicastPath } from './unicast-path.ts';

export type Demand = Entry<'demands'>;
export type Way = 'forward' | 'reverse';

/** What a demand puts on one crossing. Rates are rounded up. */
export interface HopLoad {
  /** Of the hosts' IP packets. */
  readonly innerRateBps: number;
  readonly packetsPerSecond: number;
  /** Frames on the cable: more than packets where outermost packets are cut. */
  readonly framesPerSecond: number;
  /** Of the outermost IP packets. */
  readonly outerRateBps: number;
  /** With Ethernet, preamble and gap: the share of time on the cable. */
  readonly wireRateBps: number;
}
export interface Hop {
  readonly crossing: Crossing;
  readonly stack?: Stack;
  /** For a tunnel. */
  readonly tunnel?: TunnelStack;
  /** Absent where the demand's rate or mix, or the stack, isn't known. */
  readonly load?: HopLoad;
}
/** A gateway's part in it: once for each time that it forwards plainly, encrypts or decrypts. */
export interface GatewayWork {
  readonly device: Id;
  readonly cipher: 'plain' | 'encrypted';
  /** The hop in or out that it belongs to, an index into `hops`. */
  readonly hop: number;
}
/** Packets of the mix that a tunnel neither carries whole nor cuts. */
export interface TooLong {
  readonly tunnel: Id;
  readonly packetBytes: number;
  readonly largestBytes: number;
}

export type CarriedDirection =
  | {
      readonly state: 'carried';
      readonly hops: readonly Hop[];
      readonly work: readonly GatewayWork[];
      readonly tooLong: readonly TooLong[];
      /** Sum over the tunnels' transports, one way; absent where one of them isn't known. */
      readonly latencyUs?: number;
      /** Packets lost of a million over all of them; absent where one isn't known. */
      readonly lossPerMillion?: number;
      readonly missing: readonly Missing[];
    }
  /** A site of it where the segment has neither a host nor a port. */
  | { readonly state: 'no-point'; readonly end: 'from' | 'to' }
  /** Frames don't get there. */
  | { readonly state: 'parted' };

const tagCount = (tags: number): TagCount => tagList(tags).length as TagCount;
const tunnelEnd = (network: Network, id: Id, end: End): Id =>
  deviceOfTunnelEnd(network, entryOf(network.design.tunnels, id), end);

/** Where a gateway handles the packet, in order of the way. */
const workOf = (network: Network, path: readonly Crossing[]): readonly GatewayWork[] => {
  const { design } = network;
  const work: GatewayWork[] = [];
  path.forEach(({ collection, id, from, into }, hop) => {
    const isLast = hop === path.length - 1;
    if (collection === 'tunnels') {
      const cipher = entryOf(design.tunnels, id).association === undefined ? 'plain' : 'encrypted';
      for (const end of [from, otherEnd(from)])
        work.push({ device: tunnelEnd(network, id, end), cipher, hop });
    } else if (!isLast && path[hop + 1]!.collection === 'links' && isGateway(entryOf(design.devices, into)))
      work.push({ device: into, cipher: 'plain', hop });
  });
  return work;
};

/** One-way latency and loss of the tunnels on a way. */
const qualityOf = (
  network: Network,
  hops: readonly Hop[],
): {
  readonly latencyUs?: number;
  readonly lossPerMillion?: number;
  readonly missing: readonly Missing[];
} => {
  const missing: Missing[] = [];
  let latencyUs = 0;
  let passes = 1;
  for (const { tunnel } of hops) {
    if (tunnel === undefined) continue;
    const ref = { collection: 'transports' as const, id: tunnel.path.transport };
    const transport = entryOf(network.design.transports, ref.id);
    if (transport.latencyUs === undefined) missing.push({ ref, path: ['latencyUs'] });
    if (transport.lossPpm === undefined) missing.push({ ref, path: ['lossPpm'] });
    latencyUs += transport.latencyUs ?? NaN;
    passes *= 1 - (transport.lossPpm ?? NaN) / 1_000_000;
  }
  return {
    missing,
    ...(Number.isNaN(latencyUs) ? {} : { latencyUs }),
    ...(Number.isNaN(passes) ? {} : { lossPerMillion: Math.round((1 - passes) * 1_000_000) }),
  };
};

/** Whether the longest packet of a mix neither fits a tunnel whole nor is cut. */
const tooLongFor = (hop: Hop, mix: FrameMix): TooLong | undefined => {
  const { tunnel, stack } = hop;
  if (tunnel?.mtuBytes === undefined || stack === undefined || tunnel.isCut) return undefined;
  // The access overhead is taken from the MTU already.
  const answer = largestInnerPacket({
    transportMtuBytes: tunnel.mtuBytes,
    innerIpVersion: 'ipv4',
    stack: { ...stack, accessOverhead: 'none' },
  });
  const largestBytes = answer.ok ? answer.largestInnerPacketBytes : 0;
  const packetBytes = Math.max(...mix.map(({ ipBytes }) => ipBytes));
  return packetBytes > largestBytes ? { tunnel: hop.crossing.id, packetBytes, largestBytes } : undefined;
};

export const mixOf = (demand: Demand): FrameMix | undefined =>
  demand.mix?.map(({ packetBytes, weight }) => ({ ipBytes: packetBytes, weight }));

/** How the hop's outermost packets are cut, for the calculations of bytes. */
export const carriageOf = ({ tunnel }: Hop, innerIpVersion: 'ipv4' | 'ipv6'): Carriage => ({
  innerIpVersion,
  ...(tunnel?.isCut === true && tunnel.mtuBytes !== undefined ? { fragmentMtuBytes: tunnel.mtuBytes } : {}),
});

const renamed = (problems: readonly Problem[], id: Id, field: string): readonly Problem[] =>
  problems.map((problem) => ({
    ...problem,
    field: `demands.${id}.${problem.field === 'innerRateBps' ? field : problem.field.replace('ipBytes', 'packetBytes')}`,
  }));

/** One direction of a demand, crossing by crossing, its rate multiplied. */
export const carriedDirection = (
  network: Network,
  id: Id,
  way: Way,
  multiplier: number,
): Answer<{ readonly direction: CarriedDirection }> => {
  const demand = entryOf(network.design.demands, id);
  const [first, last] = way === 'forward' ? (['from', 'to'] as const) : (['to', 'from'] as const);
  const from = pointOf(network, demand.segment, demand[first]);
  const to = pointOf(network, demand.segment, demand[last]);
  if (from === undefined || to === undefined)
    return { ok: true, direction: { state: 'no-point', end: from === undefined ? first : last } };
  const path = unicastPath(network, demand.segment, from, to);
  if (path === undefined) return { ok: true, direction: { state: 'parted' } };

  const field = way === 'forward' ? 'forwardBps' : 'reverseBps';
  const offeredBps = demand[field];
  const mix = mixOf(demand);
  const innerIpVersion = frameOf(network, demand.segment) === 'ipv6' ? 'ipv6' : 'ipv4';
  const ref = { collection: 'demands' as const, id };
  const missing: Missing[] = [];
  if (offeredBps === undefined) missing.push({ ref, path: [field] });
  if (mix === undefined) missing.push({ ref, path: ['mix'] });
  const hops: Hop[] = [];
  for (const crossing of path) {
    const tags = tagCount(crossing.tags);
    const tunnel =
      crossing.collection === 'tunnels' ? tunnelStack(network, crossing.id, crossing.from, tags) : undefined;
    const stack = crossing.collection === 'tunnels' ? tunnel?.stack : { ...bareStack, outerTags: tags };
    missing.push(...(tunnel?.missing ?? []));
    const hop: Hop = {
      crossing,
      ...(stack === undefined ? {} : { stack }),
      ...(tunnel === undefined ? {} : { tunnel }),
    };
    if (offeredBps === undefined || mix === undefined || stack === undefined) {
      hops.push(hop);
      continue;
    }
    const traffic = { innerRateBps: Math.ceil(offeredBps * multiplier), mix };
    const rate = wireRateOf(traffic, stack, carriageOf(hop, innerIpVersion));
    if (!rate.ok) return { ok: false, problems: renamed(rate.problems, id, field) };
    hops.push({
      ...hop,
      load: {
        innerRateBps: rate.innerRateBps,
        packetsPerSecond: rate.packetsPerSecond,
        framesPerSecond: rate.framesPerSecond,
        outerRateBps: rate.layers.find(({ layer }) => layer === 'outerIpPacketBytes')!.rateBps,
        wireRateBps: rate.wireRateBps,
      },
    });
  }
  const quality = qualityOf(network, hops);
  return {
    ok: true,
    direction: {
      state: 'carried',
      hops,
      work: workOf(network, path),
      tooLong:
        mix === undefined ? [] : hops.map((hop) => tooLongFor(hop, mix)).filter((one) => one !== undefined),
      ...quality,
      missing: [...missing, ...quality.missing],
    },
  };
};
