import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { outerVlan, untagged } from '../network/frame-tags.ts';
import { entryOf } from '../network/network.ts';
import type { AttachmentPoint, PlacedPoint } from './attachment-points.ts';
import type { Barrier } from './barrier.ts';
import type { FloodGraph } from './flood-graph.ts';
import type { ClassSet } from './frame-classes.ts';
import { forwardingOf } from './forwarding.ts';
import type { Direction, Place } from './places.ts';
import { devicesArrivedAt } from './places.ts';
import { blockedPorts } from './spanning-tree.ts';
import type { FloodStep } from './storm.ts';

/** Where frames from one point towards another end. */
export interface Ending {
  readonly barrier: Barrier;
  /** The crossings that frames do make up to there. */
  readonly path: readonly FloodStep[];
  /** What would stop them further on. */
  readonly further: readonly Barrier[];
}

interface State {
  readonly element: number;
  readonly direction: Direction;
  readonly tags: Tags;
  readonly from: State | undefined;
  /** What stood between `from` and this crossing. */
  readonly barriers: readonly Barrier[];
}

/** No design is explained by more barriers in a row than this; what lies further is simply not joined. */
const barriersPassed = 4;

/**
 * For one point of a segment, where its frames end on the way to each of the points that they don't reach: at the first
 * barrier of a way that passes as few as possible. 'not-joined' where no way at all leads on. Adds to `met` the devices at which
 * it looked, however little they have to do with the answer.
 */
export const findBarriers = (
  graph: FloodGraph,
  segment: Id,
  classes: ClassSet,
  source: PlacedPoint,
  targets: readonly PlacedPoint[],
  met: Set<Id>,
): ReadonlyMap<AttachmentPoint, Ending> => {
  const { network } = graph;
  const { sites } = entryOf(network.design.segments, segment);
  const forwarding = forwardingOf(network, {
    blocked: blockedPorts(network),
    pastBarriers: { vlanAt: (site) => sites[site]?.vlan, classes },
  });
  const arrivedAt = devicesArrivedAt(network);
  const endings = new Map<AttachmentPoint, Ending>();
  const open = new Map<number, PlacedPoint[]>();
  for (const target of targets) {
    const list = open.get(target.place.index);
    if (list === undefined) open.set(target.place.index, [target]);
    else list.push(target);
  }

  const stepOfState = (state: State): FloodStep => {
    const bundle = network.bundles[state.element];
    return {
      ...(bundle === undefined
        ? { collection: 'tunnels', id: network.tunnelIds[state.element - network.firstTunnelElement]! }
        : { collection: 'links', id: (bundle.alive[0] ?? bundle.cables[0])! }),
      direction: state.direction === 0 ? 'a-to-b' : 'b-to-a',
      ...(state.tags === untagged ? {} : { vlan: outerVlan(state.tags) }),
    };
  };
  const endingAt = (state: State | undefined, last: Barrier | undefined): Ending | undefined => {
    const chain: State[] = [];
    for (let at = state; at !== undefined; at = at.from) chain.unshift(at);
    const [barrier, ...further] = [
      ...chain.flatMap(({ barriers }) => barriers),
      ...(last === undefined ? [] : [last]),
    ];
    if (barrier === undefined) return undefined;
    const first = chain.findIndex(({ barriers }) => barriers.length > 0);
    return { barrier, path: (first < 0 ? chain : chain.slice(0, first)).map(stepOfState), further };
  };
  const settle = (
    state: State | undefined,
    place: Place,
    ordinal: number,
    inside: Tags,
    last?: Barrier,
  ): void => {
    const here = open.get(place.index);
    if (here === undefined) return;
    const left = here.filter((target) => {
      if (target.at !== undefined && !forwarding.wouldLeave(place, ordinal, inside, target.at.ordinal))
        return true;
      const ending = endingAt(state, last);
      if (ending !== undefined) endings.set(target.point, ending);
      return ending === undefined;
    });
    if (left.length === 0) open.delete(place.index);
    else open.set(place.index, left);
  };

  // Crossings by the number of barriers passed before them.
  const layers: State[][] = Array.from({ length: barriersPassed + 3 }, () => []);
  const leave = (
    place: Place,
    ordinal: number,
    inside: Tags,
    from: State | undefined,
    passed: number,
    entered: Barrier | undefined,
  ): void => {
    settle(from, place, ordinal, inside, entered);
    const cost = passed + (entered === undefined ? 0 : 1);
    forwarding.leave(place, ordinal, inside, (element, direction, tags, _classes, barrier) => {
      const layer = layers[cost + (barrier === undefined ? 0 : 1)];
      layer?.push({
        element,
        direction,
        tags,
        from,
        barriers: [entered, barrier].filter((one) => one !== undefined),
      });
    });
  };
  if (source.at === undefined) leave(source.place, -1, untagged, undefined, 0, undefined);
  else
    forwarding.enter(source.at.group, source.at.tags, (place, ordinal, inside, barrier) =>
      leave(place, ordinal, inside, undefined, 0, barrier),
    );
  const seen = new Set<number>();
  for (let passed = 0; passed <= barriersPassed && open.size > 0; passed += 1) {
    const layer = layers[passed]!;
    for (let i = 0; i < layer.length && open.size > 0; i += 1) {
      const state = layer[i]!;
      const key = (state.element * 2 + state.direction) * 0x100_0000 + state.tags;
      if (seen.has(key)) continue;
      seen.add(key);
      met.add(arrivedAt[state.element * 2 + state.direction]!);
      forwarding.arrive(state.element, state.direction, state.tags, (place, ordinal, inside, barrier) => {
        if (place.kind === 'host') settle(state, place, ordinal, inside, barrier);
        else leave(place, ordinal, inside, state, passed, barrier);
      });
    }
  }
  for (const left of open.values())
    for (const { point } of left)
      endings.set(point, {
        barrier: { code: 'not-joined', fromSite: source.point.site, toSite: point.site },
        path: [],
        further: [],
      });
  return endings;
};
