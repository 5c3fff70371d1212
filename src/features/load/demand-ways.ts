import type { CarriedDirection, Way } from '../../engine/load/carried-direction.ts';
import type { DemandWay, LoadReport } from '../../engine/load/load-of.ts';
import type { Ceiling, Reachable } from '../../engine/load/reachable.ts';
import type { Design, ElementRef, Entry } from '../../engine/model/design.ts';
import { demandPlaceName, kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import { limitInRow } from './limit-rows.ts';

/** One way of a demand, as it is carried. */
export interface DemandWayRow {
  readonly key: string;
  readonly demand: string;
  readonly way: Way;
  readonly name: string;
  readonly segment: string;
  readonly letter: string;
  readonly from: string;
  readonly to: string;
  /** What it goes through, in order; or why it doesn't get there. */
  readonly path: string;
  /** Elements to light on the sheet. */
  readonly elements: readonly ElementRef[];
  readonly offeredBps?: number;
  /** The most that it comes to in a tunnel, as outermost IP packets. */
  readonly grownBps?: number;
  readonly growth?: number;
  readonly latencyUs?: number;
  readonly allowedUs?: number;
  readonly isInTime?: boolean;
  readonly lossPerMillion?: number;
  readonly direction: CarriedDirection;
  readonly reachable?: Reachable;
}

/** A demand by its name, or by where it leads. */
export const demandName = (design: Design, id: string): string =>
  nameOf(design, { collection: 'demands', id });

const whyNot = (design: Design, demand: Entry<'demands'>, direction: CarriedDirection): string => {
  if (direction.state === 'parted') return 'frames do not get there';
  if (direction.state !== 'no-point') return '';
  const place = direction.end === 'from' ? demand.from : demand.to;
  return `${demandPlaceName(design, place)} has neither a host nor a port of the segment`;
};

/** Devices, cables and tunnels along the way, the sender first. */
const elementsOf = (design: Design, direction: CarriedDirection): readonly ElementRef[] => {
  if (direction.state !== 'carried') return [];
  const [first] = direction.hops;
  const elements: ElementRef[] = [];
  if (first?.crossing.collection === 'links') {
    const link = design.links[first.crossing.id];
    if (link?.kind === 'cable')
      elements.push({ collection: 'devices', id: link[first.crossing.from].device });
  }
  for (const { crossing } of direction.hops) {
    elements.push({ collection: crossing.collection, id: crossing.id });
    elements.push({ collection: 'devices', id: crossing.into });
  }
  return elements;
};

const wayRow = (design: Design, id: string, way: Way, of: DemandWay): DemandWayRow => {
  const demand = design.demands[id]!;
  const segment = design.segments[demand.segment]!;
  const [from, to] = way === 'forward' ? [demand.from, demand.to] : [demand.to, demand.from];
  const { direction, reachable, isInTime } = of;
  const elements = elementsOf(design, direction);
  const hops = direction.state === 'carried' ? direction.hops : [];
  const offeredBps = hops.find(({ load }) => load !== undefined)?.load?.innerRateBps;
  const grown = hops.flatMap(({ crossing, load }) =>
    crossing.collection === 'tunnels' && load !== undefined ? [load.outerRateBps] : [],
  );
  const grownBps = grown.length === 0 ? undefined : Math.max(...grown);
  return {
    key: `${id} ${way}`,
    demand: id,
    way,
    name: demandName(design, id),
    segment: segment.name,
    letter: segment.letter,
    from: demandPlaceName(design, from),
    to: demandPlaceName(design, to),
    path:
      direction.state === 'carried'
        ? elements
            .filter(({ collection }) => collection !== 'links')
            .map((ref) => nameOf(design, ref))
            .join(' › ')
        : whyNot(design, demand, direction),
    elements,
    direction,
    ...(offeredBps === undefined ? {} : { offeredBps }),
    ...(grownBps === undefined ? {} : { grownBps }),
    ...(grownBps === undefined || offeredBps === undefined || offeredBps === 0
      ? {}
      : { growth: grownBps / offeredBps }),
    ...(direction.state === 'carried' && direction.latencyUs !== undefined
      ? { latencyUs: direction.latencyUs }
      : {}),
    ...(demand.latencyAllowedUs === undefined ? {} : { allowedUs: demand.latencyAllowedUs }),
    ...(isInTime === undefined ? {} : { isInTime }),
    ...(direction.state === 'carried' && direction.lossPerMillion !== undefined
      ? { lossPerMillion: direction.lossPerMillion }
      : {}),
    ...(reachable === undefined ? {} : { reachable }),
  };
};

/** Both ways of every demand, in the order of the report. */
export const demandWayRows = (report: LoadReport, design: Design): readonly DemandWayRow[] =>
  report.demands.flatMap(({ demand, forward, reverse }) => [
    wayRow(design, demand, 'forward', forward),
    wayRow(design, demand, 'reverse', reverse),
  ]);

/** What holds a single flow back, in few words: 'loss', 'window', 'encryption at fw-ho, one flow'. */
export const ceilingWords = (design: Design, ceiling: Ceiling): string => {
  const { kind, element, direction, cipher } = ceiling;
  if (kind === 'window' || kind === 'loss') return kind;
  if (element === undefined) return kind;
  if (kind === 'one-cable') return `one cable of ${nameOf(design, element)}`;
  if (kind === 'host-one-flow') return `${nameOf(design, element)}, one flow`;
  return limitInRow(design, {
    key: '',
    kind,
    element,
    ...(direction === undefined ? {} : { direction }),
    ...(cipher === undefined ? {} : { cipher }),
  });
};

/** An element of a way with its kind: 'Tunnel tn-ho-gul-a'. */
export const elementWords = (design: Design, ref: ElementRef): string =>
  `${kindOf(design, ref)} ${nameOf(design, ref)}`;
