import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { IP_HEADER_BYTES, type IpVersion } from '../reference/ip.ts';
import { TCP_HEADER_BYTES, TCP_TIMESTAMPS_OPTION_BYTES } from '../reference/tcp.ts';
import { largestInnerPacket } from '../wire/largest-inner-packet.ts';
import { packetTrain } from '../wire/packet-train.ts';
import { scaledDown } from '../wire/ratio.ts';
import { MOST_RTT_US, singleFlowLimitBps } from '../wire/tcp-goodput.ts';
import type { Missing } from '../wire/tunnel-stack.ts';
import type { CarriedDirection, GatewayWork, Hop } from './carried-direction.ts';
import { carriageOf } from './carried-direction.ts';
import type { Limit } from './limits.ts';
import { cableSpeed, gatewayLimits, hopLimits } from './limits.ts';
import { frameOf, pointOf } from './unicast-path.ts';

/** What holds a transfer back, and the data rate that it leaves, rounded down. */
export interface Ceiling {
  readonly limitBps: number;
  readonly kind: Limit['kind'] | 'one-cable' | 'host-one-flow' | 'window' | 'loss';
  /** Absent for what follows from latency and loss. */
  readonly element?: ElementRef;
  readonly direction?: Limit['direction'];
  readonly cipher?: Limit['cipher'];
}
/** What TCP could reach on a way that carries nothing else: data bits per second, in full packets with timestamps. */
export interface Reachable {
  readonly packetBytes: number;
  /** Many flows together, the lowest ceiling first; empty where no limit on the way is known. */
  readonly manyFlows: readonly Ceiling[];
  /** A single flow: the same and what holds one flow back. */
  readonly oneFlow: readonly Ceiling[];
  /** The window that a single flow needs to be held back by nothing of its own; absent without latency. */
  readonly windowNeededBytes?: number;
  readonly missing: readonly Missing[];
}

/** The longest packets that both hosts send: what their ports and the segment allow, and what every tunnel carries whole or cuts. */
const packetBytesOf = (
  network: Network,
  demandId: Id,
  hops: readonly Hop[],
  ipVersion: IpVersion,
): number => {
  const { design } = network;
  const demand = entryOf(design.demands, demandId);
  const allowed = [demand.from, demand.to].flatMap((at) => {
    const point = pointOf(network, demand.segment, at)?.point;
    if (point === undefined || point.port !== undefined) return [];
    return Object.values(entryOf(design.devices, point.device).ports).flatMap(({ mtu }) =>
      mtu === undefined ? [] : [mtu],
    );
  });
  const { mtu } = entryOf(design.segments, demand.segment);
  // RFC 894: what Ethernet carries where nothing else is said.
  const wanted = Math.min(...allowed, mtu ?? (allowed.length === 0 ? STANDARD_PAYLOAD_BYTES : Infinity));
  return hops.reduce((least, { tunnel, stack }) => {
    if (tunnel?.mtuBytes === undefined || tunnel.isCut || stack === undefined) return least;
    const answer = largestInnerPacket({
      transportMtuBytes: tunnel.mtuBytes,
      innerIpVersion: ipVersion,
      stack: { ...stack, accessOverhead: 'none' },
    });
    return answer.ok ? Math.min(least, answer.largestInnerPacketBytes) : 0;
  }, wanted);
};

const ceilingOf = (limit: Limit, limitBps: number): Ceiling => ({
  limitBps,
  kind: limit.kind,
  element: limit.element,
  ...(limit.direction === undefined ? {} : { direction: limit.direction }),
  ...(limit.cipher === undefined ? {} : { cipher: limit.cipher }),
});

const inOrder = (ceilings: readonly Ceiling[]): readonly Ceiling[] =>
  [...ceilings].sort((x, y) => x.limitBps - y.limitBps);

/** A bit rate in which `bytes` carry `dataBytes` of data. */
const share = (rateBps: number, dataBytes: number, bytes: number): number =>
  scaledDown({ numerator: BigInt(rateBps), denominator: BigInt(bytes) }, BigInt(dataBytes), 1n);

/** Times that a way takes each gateway's ciphers, with the hop whose frames count there. */
const gatewaysOn = (
  work: readonly GatewayWork[],
): readonly { readonly at: GatewayWork; readonly times: number }[] => {
  const times = new Map<string, { readonly at: GatewayWork; times: number }>();
  for (const at of work) {
    const key = `${at.device} ${at.cipher}`;
    const known = times.get(key);
    if (known === undefined) times.set(key, { at, times: 1 });
    else known.times += 1;
  }
  return [...times.values()];
};

/** What the hosts at both ends do in a single flow, where their equipment profiles say: one processor copies and counts each. */
const hostCeilings = (
  network: Network,
  demandId: Id,
  dataBytes: number,
  packetBytes: number,
): readonly Ceiling[] => {
  const { design } = network;
  const { from, to, segment } = entryOf(design.demands, demandId);
  return [from, to].flatMap((at): readonly Ceiling[] => {
    const point = pointOf(network, segment, at)?.point;
    const device = point === undefined ? undefined : entryOf(design.devices, point.device);
    if (device?.kind !== 'host' || device.profile === undefined) return [];
    const { oneFlowBps } = entryOf(design.profiles, device.profile).plain ?? {};
    if (oneFlowBps === undefined) return [];
    return [
      {
        limitBps: share(oneFlowBps, dataBytes, packetBytes),
        kind: 'host-one-flow',
        element: { collection: 'devices', id: point!.device },
      },
    ];
  });
};

/** What one way of a demand lets TCP reach alone, and the window of a flow where it is given. */
export const reachable = (
  network: Network,
  demandId: Id,
  direction: Extract<CarriedDirection, { state: 'carried' }>,
  back: CarriedDirection,
  windowBytes: number | undefined,
): Reachable | undefined => {
  const { hops, work } = direction;
  const ipVersion: IpVersion =
    frameOf(network, entryOf(network.design.demands, demandId).segment) === 'ipv6' ? 'ipv6' : 'ipv4';
  const packetBytes = packetBytesOf(network, demandId, hops, ipVersion);
  const headerBytes = IP_HEADER_BYTES[ipVersion] + TCP_HEADER_BYTES;
  const dataBytes = packetBytes - headerBytes - TCP_TIMESTAMPS_OPTION_BYTES;
  if (dataBytes < 1) return undefined;
  const missing: Missing[] = [];
  const many: Ceiling[] = [];
  const one: Ceiling[] = [];
  const framesOf: number[] = [];
  for (const hop of hops) {
    const { stack, crossing } = hop;
    const train =
      stack === undefined
        ? undefined
        : packetTrain(
            { innerPacketBytes: packetBytes, innerIpVersion: ipVersion, stack },
            carriageOf(hop, ipVersion).fragmentMtuBytes,
          );
    framesOf.push(train?.ok === true ? train.frames : 1);
    for (const { limit, measure } of hopLimits(network, hop)) {
      if (limit.most === undefined || train?.ok !== true) {
        if (limit.missing !== undefined) missing.push(limit.missing);
        continue;
      }
      const { wireBytes, outerIpPacketBytes } = train.totals;
      const bytes = measure === 'wireRateBps' ? wireBytes : outerIpPacketBytes;
      many.push(ceilingOf(limit, share(limit.most, dataBytes, bytes)));
    }
    if (crossing.bundle === undefined || train?.ok !== true) continue;
    const { mostBps, oneFlowBps } = cableSpeed(network, crossing.bundle);
    // A flow stays on one cable of an aggregate; IEEE 802.1AX, from memory: frames of a conversation are not reordered.
    if (oneFlowBps !== undefined && oneFlowBps < mostBps!)
      one.push({
        limitBps: share(oneFlowBps, dataBytes, train.totals.wireBytes),
        kind: 'one-cable',
        element: { collection: 'links', id: crossing.id },
      });
  }
  for (const { at, times } of gatewaysOn(work)) {
    const { rate, packets, oneFlow } = gatewayLimits(network, at);
    for (const { limit } of [rate, packets, oneFlow])
      if (limit.missing !== undefined && !missing.some((known) => isSame(known, limit.missing!)))
        missing.push(limit.missing);
    if (rate.limit.most !== undefined)
      many.push(ceilingOf(rate.limit, share(rate.limit.most, dataBytes, packetBytes * times)));
    if (packets.limit.most !== undefined)
      many.push(
        ceilingOf(
          packets.limit,
          Math.floor((packets.limit.most * dataBytes * 8) / (framesOf[at.hop]! * times)),
        ),
      );
    if (oneFlow.mostBps !== undefined)
      one.push(ceilingOf(oneFlow.limit, share(oneFlow.mostBps, dataBytes, packetBytes * times)));
  }
  one.push(...hostCeilings(network, demandId, dataBytes, packetBytes));
  const rttUs =
    back.state === 'carried' && direction.latencyUs !== undefined && back.latencyUs !== undefined
      ? direction.latencyUs + back.latencyUs
      : undefined;
  const device = [...many, ...one].reduce((least, { limitBps }) => Math.min(least, limitBps), Infinity);
  if (rttUs !== undefined && rttUs > 0 && rttUs <= MOST_RTT_US)
    one.push(...ownCeilings(rttUs, packetBytes - headerBytes, windowBytes, direction.lossPerMillion));
  return {
    packetBytes,
    manyFlows: inOrder(many),
    oneFlow: inOrder([...many, ...one]),
    ...(rttUs === undefined || rttUs === 0 || !Number.isFinite(device)
      ? {}
      : { windowNeededBytes: Math.ceil((device * rttUs) / 8_000_000) }),
    missing,
  };
};

const isSame = (a: Missing, b: Missing): boolean =>
  a.ref.collection === b.ref.collection && a.ref.id === b.ref.id && a.path.join() === b.path.join();

/** What latency and loss leave a flow. */
const ownCeilings = (
  rttUs: number,
  mssBytes: number,
  windowBytes: number | undefined,
  lossPerMillion: number | undefined,
): readonly Ceiling[] => {
  const flow = { windowBytes: windowBytes ?? 1, rttUs, mssBytes, lossPerMillion: lossPerMillion ?? 0 };
  const answer = singleFlowLimitBps(flow);
  if (!answer.ok) return [];
  return [
    ...(windowBytes === undefined ? [] : [{ limitBps: answer.windowLimitBps, kind: 'window' as const }]),
    ...(answer.lossLimitBps === undefined ? [] : [{ limitBps: answer.lossLimitBps, kind: 'loss' as const }]),
  ];
};
