import { floodGraph } from '../flood/flood-graph.ts';
import { classBit } from '../flood/frame-classes.ts';
import type { Direction, Place } from '../flood/places.ts';
import { startsOf, walk } from '../flood/reach.ts';
import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { outerVlan } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import { portGroupAt } from '../network/port-groups.ts';

/** Where a switch or a forwarder believes the destination to be: stated, instead of what would have been learned. */
export type StatedLearning =
  { readonly switch: Id; readonly port: Id } | { readonly forwarder: Id; readonly circuit: Id };

export interface LearnedAt {
  /** Port of a switch or circuit of a forwarder, by its number in the place. */
  readonly ordinal: number;
  /** The destination was heard on others, too. */
  readonly moving: boolean;
}
/** Where a place believes the destination to be; undefined where it hasn't learned it. */
export type LearnedPlaces = (place: Place, inside: Tags) => LearnedAt | undefined;

export const nothingLearned: LearnedPlaces = () => undefined;

// A switch learns for each VLAN apart, a forwarder is one VLAN whatever tags it keeps.
const learningKey = (place: Place, inside: Tags): number =>
  place.index * 0x1000 + (place.kind === 'switch' ? outerVlan(inside) : 0);

const tables = perNetwork((_network) => new Map<string, ReadonlyMap<number, LearnedAt>>());

const tableOf = (
  network: Network,
  host: Id,
  kind: 'ipv4' | 'ipv6' | 'other',
): ReadonlyMap<number, LearnedAt> => {
  const known = tables(network);
  const key = `${kind} ${host}`;
  const before = known.get(key);
  if (before !== undefined) return before;
  const graph = floodGraph(network);
  // Any frame teaches where its sender is: its ARP requests or neighbour discovery, and its own traffic.
  const classes = classBit('arp') | classBit(kind);
  const table = new Map<number, LearnedAt>();
  for (const node of walk(graph, startsOf(network, graph, { host }), classes, undefined).order)
    graph.forwarding.arrive(
      graph.element[node]!,
      graph.direction[node] as Direction,
      graph.tags[node]!,
      (place, ordinal, inside) => {
        const at = learningKey(place, inside);
        const first = table.get(at);
        if (first === undefined) table.set(at, { ordinal, moving: false });
        else if (first.ordinal !== ordinal) table.set(at, { ...first, moving: true });
      },
    );
  known.set(key, table);
  return table;
};

/** What the bridges have learned of a host once a frame of it has reached them; of several ways the shortest counts. */
export const learnedOfHost = (network: Network, host: Id, kind: 'ipv4' | 'ipv6' | 'other'): LearnedPlaces => {
  const table = tableOf(network, host, kind);
  return (place, inside) => {
    // A cross-connect joins its circuits one to one and looks at no addresses (RFC 4664 section 3.1.1).
    if (place.kind === 'forwarder' && network.design.forwarders[place.forwarder]?.kind === 'cross-connect')
      return undefined;
    return table.get(learningKey(place, inside));
  };
};

/** What is stated about single places; the others have learned nothing. */
export const learnedAsStated = (network: Network, stated: readonly StatedLearning[]): LearnedPlaces => {
  const bySwitch = new Map<Id, Id>();
  const byForwarder = new Map<Id, Id>();
  for (const one of stated)
    if ('switch' in one) bySwitch.set(one.switch, one.port);
    else byForwarder.set(one.forwarder, one.circuit);
  return (place) => {
    if (place.kind === 'host') return undefined;
    let ordinal: number | undefined;
    if (place.kind === 'switch') {
      const port = bySwitch.get(place.device);
      const group = port === undefined ? undefined : portGroupAt(network, place.device, port, undefined);
      ordinal = group === undefined ? undefined : place.ordinalByGroup.get(group.index);
    } else {
      const circuit = byForwarder.get(place.forwarder);
      const found = place.circuits.findIndex(({ at }) => at.id === circuit);
      ordinal = found < 0 ? undefined : found;
    }
    return ordinal === undefined ? undefined : { ordinal, moving: false };
  };
};
