import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { TCP_LARGEST_WINDOW_BYTES } from '../reference/tcp.ts';
import type { Answer, Problem } from '../wire/problem.ts';
import { refuse, wholeNumberProblems } from '../wire/problem.ts';
import type { Missing } from '../wire/tunnel-stack.ts';
import type { CarriedDirection, HopLoad, Way } from './carried-direction.ts';
import { carriedDirection } from './carried-direction.ts';
import type { Limit } from './limits.ts';
import { gatewayLimits, hopLimits } from './limits.ts';
import type { Reachable } from './reachable.ts';
import { reachable } from './reachable.ts';

export interface DemandWay {
  readonly direction: CarriedDirection;
  /** Only where frames get there and packets leave room for data. */
  readonly reachable?: Reachable;
  /** Whether the sum of one-way latencies is within what is allowed; absent where either isn't known. */
  readonly isInTime?: boolean;
}
export interface DemandLoad {
  readonly demand: Id;
  readonly forward: DemandWay;
  readonly reverse: DemandWay;
}
/** What an element carries one way. A demand whose rate, mix or way isn't known is in no sum, but named in `uncounted`. */
export interface ElementLoad {
  readonly element: ElementRef;
  readonly direction: 'a-to-b' | 'b-to-a' | 'out' | 'in' | 'both';
  /** For gateways. */
  readonly cipher?: 'plain' | 'encrypted';
  readonly load: HopLoad;
  readonly demands: readonly Id[];
  readonly uncounted: readonly Id[];
}
/** How much of a limit is used. */
export interface LimitUsed {
  readonly limit: Limit;
  /** In the limit's unit. */
  readonly used: number;
  /** What is left; below zero where more is asked than there is. Absent where the limit isn't known, as is the share. */
  readonly headroom?: number;
  /** Of the limit, in parts of a million, rounded up. */
  readonly sharePerMillion?: number;
  readonly demands: readonly Id[];
  readonly uncounted: readonly Id[];
}
export interface LoadReport {
  readonly demands: readonly DemandLoad[];
  /** Cables, tunnels, landings, transports and gateways that carry something, in order of collection, id and direction. */
  readonly elements: readonly ElementLoad[];
  /** The fullest first, those whose figure isn't known last. */
  readonly limits: readonly LimitUsed[];
  /** The first limit that is reached as all demands grow alike; absent where none is known. */
  readonly bottleneck?: LimitUsed;
  /** What somebody would have to fill in for a full answer, each once. */
  readonly missing: readonly Missing[];
}
export interface LoadOptions {
  /** All rates times this: 1.5 for half as much again. */
  readonly multiplier?: number;
  /** The window of a TCP flow, in place of what demands say; without either no flow is taken to be held back by it. */
  readonly windowBytes?: number;
}

export const MOST_MULTIPLIER = 1_000;
const nothing: HopLoad = {
  innerRateBps: 0,
  packetsPerSecond: 0,
  framesPerSecond: 0,
  outerRateBps: 0,
  wireRateBps: 0,
};
const sum = (a: HopLoad, b: HopLoad): HopLoad => ({
  innerRateBps: a.innerRateBps + b.innerRateBps,
  packetsPerSecond: a.packetsPerSecond + b.packetsPerSecond,
  framesPerSecond: a.framesPerSecond + b.framesPerSecond,
  outerRateBps: a.outerRateBps + b.outerRateBps,
  wireRateBps: a.wireRateBps + b.wireRateBps,
});

const optionProblems = ({ multiplier, windowBytes }: LoadOptions): readonly Problem[] => [
  ...(multiplier === undefined || (multiplier > 0 && multiplier <= MOST_MULTIPLIER)
    ? []
    : [{ field: 'multiplier', value: multiplier, expected: `a number above 0, up to ${MOST_MULTIPLIER}` }]),
  ...(windowBytes === undefined
    ? []
    : wholeNumberProblems('windowBytes', windowBytes, 1, TCP_LARGEST_WINDOW_BYTES)),
];

/** Sums of loads by key, with the demands in them. */
interface Sum<T> {
  readonly of: T;
  load: HopLoad;
  readonly demands: Set<Id>;
  readonly uncounted: Set<Id>;
}
const tally = <T>() => {
  const sums = new Map<string, Sum<T>>();
  return {
    add: (key: string, of: T, demand: Id, load: HopLoad | undefined): void => {
      let one = sums.get(key);
      if (one === undefined) {
        one = { of, load: nothing, demands: new Set(), uncounted: new Set() };
        sums.set(key, one);
      }
      if (load === undefined) one.uncounted.add(demand);
      else {
        one.load = sum(one.load, load);
        one.demands.add(demand);
      }
    },
    sums,
  };
};

type Part = Pick<ElementLoad, 'element' | 'direction' | 'cipher'>;

/** The elements, limits and missing properties of one way of a demand, put into the sums. */
const count = (
  network: Network,
  demand: Id,
  direction: Extract<CarriedDirection, { state: 'carried' }>,
  elements: ReturnType<typeof tally<Part>>,
  limits: ReturnType<typeof tally<{ readonly limit: Limit; readonly measure: keyof HopLoad }>>,
): void => {
  const element = (part: Part, load: HopLoad | undefined): void =>
    elements.add(
      `${part.element.collection} ${part.element.id} ${part.direction} ${part.cipher ?? ''}`,
      part,
      demand,
      load,
    );
  for (const hop of direction.hops) {
    const { crossing, tunnel, load } = hop;
    const ref: ElementRef = { collection: crossing.collection, id: crossing.id };
    element({ element: ref, direction: crossing.from === 'a' ? 'a-to-b' : 'b-to-a' }, load);
    if (tunnel !== undefined) {
      const { landingA, landingB, transport } = tunnel.path;
      const [out, into] = crossing.from === 'a' ? [landingA, landingB] : [landingB, landingA];
      element({ element: { collection: 'links', id: out }, direction: 'out' }, load);
      element({ element: { collection: 'links', id: into }, direction: 'in' }, load);
      element({ element: { collection: 'transports', id: transport }, direction: 'both' }, load);
    }
    for (const use of hopLimits(network, hop)) limits.add(use.limit.key, use, demand, load);
  }
  for (const at of direction.work) {
    const { load } = direction.hops[at.hop]!;
    const ref: ElementRef = { collection: 'devices', id: at.device };
    element({ element: ref, direction: 'both', cipher: at.cipher }, load);
    const { rate, packets } = gatewayLimits(network, at);
    for (const use of [rate, packets]) limits.add(use.limit.key, use, demand, load);
  }
};

/** One flow's part of each demand against what a gateway does for one flow: the fullest demand counts, flows don't add up. */
const oneFlowUses = (
  network: Network,
  id: Id,
  direction: Extract<CarriedDirection, { state: 'carried' }>,
): readonly LimitUsed[] => {
  const { flows } = entryOf(network.design.demands, id);
  const seen = new Set<string>();
  return direction.work.flatMap((at): LimitUsed[] => {
    const { limit } = gatewayLimits(network, at).oneFlow;
    const { load } = direction.hops[at.hop]!;
    if (seen.has(limit.key)) return [];
    seen.add(limit.key);
    const isKnown = load !== undefined && flows !== undefined;
    const used = isKnown ? Math.ceil(load.innerRateBps / flows) : 0;
    return [
      {
        ...measured(limit, used),
        demands: isKnown ? [id] : [],
        uncounted: isKnown ? [] : [id],
      },
    ];
  });
};

const measured = (
  limit: Limit,
  used: number,
): Pick<LimitUsed, 'limit' | 'used' | 'headroom' | 'sharePerMillion'> => ({
  limit,
  used,
  ...(limit.most === undefined
    ? {}
    : {
        headroom: limit.most - used,
        sharePerMillion: Math.ceil((used * 1_000_000) / Math.max(1, limit.most)),
      }),
});

const fullestFirst = (x: LimitUsed, y: LimitUsed): number =>
  (y.sharePerMillion ?? -1) - (x.sharePerMillion ?? -1) || (x.limit.key < y.limit.key ? -1 : 1);

const distinct = (all: readonly Missing[]): readonly Missing[] =>
  [
    ...new Map(
      all.map((one) => [`${one.ref.collection} ${one.ref.id} ${one.path.join('.')}`, one] as const),
    ).entries(),
  ]
    .sort(([x], [y]) => (x < y ? -1 : 1))
    .map(([, one]) => one);

/**
 * What the demands of a design put on its cables, tunnels, landings, transports and gateways, both ways, grown by what every
 * hop puts around their packets, and how much of each limit that is. Rates are bit/s and rounded up. Refuses a multiplier
 * outside its bounds and demands that outgrow what can be computed.
 */
export const loadOf = (design: DesignFacts, options: LoadOptions = {}): Answer<LoadReport> =>
  loadOfNetwork(indexNetwork(design), options);

/** The same for a design that is indexed already. */
export const loadOfNetwork = (network: Network, options: LoadOptions = {}): Answer<LoadReport> => {
  const steps = loadSteps(network, options);
  for (let step = steps.next(); ; step = steps.next()) if (step.done === true) return step.value;
};

/** The same demand by demand, with how many are laid; the report comes last. */
export function* loadSteps(
  network: Network,
  options: LoadOptions = {},
): Generator<{ readonly done: number; readonly total: number }, Answer<LoadReport>> {
  const problems = [...optionProblems(options)];
  if (problems.length > 0) return refuse(problems);
  const { design } = network;
  const { multiplier = 1, windowBytes } = options;
  const elements = tally<Part>();
  const sums = tally<{ readonly limit: Limit; readonly measure: keyof HopLoad }>();
  const oneFlow = new Map<string, LimitUsed>();
  const demands: DemandLoad[] = [];
  const missing: Missing[] = [];

  const ids = Object.keys(design.demands).sort();
  for (const id of ids) {
    yield { done: demands.length, total: ids.length };
    const ways = { forward: carried('forward'), reverse: carried('reverse') };
    const { latencyAllowedUs, windowBytes: own } = entryOf(design.demands, id);
    const wayOf = (way: Way): DemandWay => {
      const direction = ways[way];
      if (direction.state !== 'carried') return { direction };
      count(network, id, direction, elements, sums);
      for (const use of oneFlowUses(network, id, direction)) keepFullest(oneFlow, use);
      const could = reachable(
        network,
        id,
        direction,
        ways[way === 'forward' ? 'reverse' : 'forward'],
        windowBytes ?? own,
      );
      missing.push(...direction.missing, ...(could?.missing ?? []));
      return {
        direction,
        ...(could === undefined ? {} : { reachable: could }),
        ...(latencyAllowedUs === undefined || direction.latencyUs === undefined
          ? {}
          : { isInTime: direction.latencyUs <= latencyAllowedUs }),
      };
    };
    demands.push({ demand: id, forward: wayOf('forward'), reverse: wayOf('reverse') });

    function carried(way: Way): CarriedDirection {
      const answer = carriedDirection(network, id, way, multiplier);
      if (answer.ok) return answer.direction;
      problems.push(...answer.problems);
      return { state: 'parted' };
    }
  }
  if (problems.length > 0) return refuse(problems);

  const limits = [
    ...[...sums.sums.values()].map(({ of: { limit, measure }, load, demands: counted, uncounted }) => ({
      ...measured(limit, load[measure]),
      demands: [...counted].sort(),
      uncounted: [...uncounted].sort(),
    })),
    ...oneFlow.values(),
  ].sort(fullestFirst);
  const [first] = limits;
  return {
    ok: true,
    demands,
    elements: [...elements.sums]
      .sort(([x], [y]) => (x < y ? -1 : 1))
      .map(([, { of, load, demands: counted, uncounted }]) => ({
        ...of,
        load,
        demands: [...counted].sort(),
        uncounted: [...uncounted].sort(),
      })),
    limits,
    ...(first?.sharePerMillion === undefined || first.used === 0 ? {} : { bottleneck: first }),
    missing: distinct(missing),
  };
}

const keepFullest = (known: Map<string, LimitUsed>, use: LimitUsed): void => {
  const before = known.get(use.limit.key);
  if (before === undefined) {
    known.set(use.limit.key, use);
    return;
  }
  const fuller = use.used > before.used ? use : before;
  known.set(use.limit.key, {
    ...fuller,
    uncounted: [...new Set([...before.uncounted, ...use.uncounted])].sort(),
  });
};
