import type { Design, Entry } from '../model/design.ts';
import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';

/** What a design states apart from where things stand on the sheet: moving something changes none of it. */
export type DesignFacts = Omit<Design, 'layout'>;

export type Device = Entry<'devices'>;
export type Port = Device['ports'][string];
export type Cable = Extract<Entry<'links'>, { kind: 'cable' }>;
export type Landing = Extract<Entry<'links'>, { kind: 'landing' }>;
export type Association = Entry<'associations'>;
export type Tunnel = Entry<'tunnels'>;
export type Forwarder = Entry<'forwarders'>;
export type Circuit = Forwarder['circuits'][string];
export type PortCircuit = Extract<Circuit, { kind: 'port' }>;
export type End = 'a' | 'b';
export const ends = ['a', 'b'] as const;
export const otherEnd = (end: End): End => (end === 'a' ? 'b' : 'a');

/** One end of a cable, met at the port it is plugged into. */
export interface CableAt {
  readonly cable: Id;
  readonly end: End;
  /** Member of an HA pair that holds the plug; 1 elsewhere. */
  readonly member: Member;
}
/** One circuit of a forwarder. */
export interface CircuitAt {
  readonly forwarder: Id;
  readonly device: Id;
  readonly id: Id;
  readonly circuit: Circuit;
}
export interface TunnelAt {
  readonly tunnel: Id;
  readonly end: End;
}
export interface AssociationAt {
  readonly association: Id;
  readonly end: End;
}
/** Ports that form one logical port: a link-aggregation group, or a single port. On an HA pair each member has its own. */
export interface PortGroup {
  /** Its place among those of its device. */
  readonly index: number;
  readonly device: Id;
  readonly member: Member;
  /** The port whose settings count: the lowest number of the group. */
  readonly port: Id;
  readonly ports: readonly Id[];
  readonly aggregation?: string;
  readonly bundles: readonly { readonly bundle: number; readonly end: End }[];
}
/** Cables between the same two port groups: one crossing for a frame, however many cables. */
export interface Bundle {
  readonly index: number;
  /** In order of id; the first lends its name and its ends to the whole. */
  readonly cables: readonly Id[];
  /** Those of them with no end in a shut port. */
  readonly alive: readonly Id[];
  readonly a: PortGroup;
  readonly b: PortGroup;
}

/** The index built from a design once per version. All lists are in order of id unless they say otherwise. */
export interface Network {
  readonly design: DesignFacts;
  readonly deviceIds: readonly Id[];
  readonly tunnelIds: readonly Id[];
  readonly devicesBySite: ReadonlyMap<Id, readonly Id[]>;
  readonly hostsBySegment: ReadonlyMap<Id, readonly Id[]>;
  /** By `portKey`: cables plugged into this port of either member. */
  readonly cablesByPort: ReadonlyMap<string, readonly CableAt[]>;
  readonly cablesByDevice: ReadonlyMap<Id, readonly CableAt[]>;
  readonly landingsByDevice: ReadonlyMap<Id, readonly Id[]>;
  readonly landingsByPort: ReadonlyMap<string, readonly Id[]>;
  readonly landingsByTransport: ReadonlyMap<Id, readonly Id[]>;
  readonly endpointsByDevice: ReadonlyMap<Id, readonly Id[]>;
  readonly tunnelsByEndpoint: ReadonlyMap<Id, readonly TunnelAt[]>;
  readonly tunnelsByAssociation: ReadonlyMap<Id, readonly Id[]>;
  readonly tunnelsByDevice: ReadonlyMap<Id, readonly TunnelAt[]>;
  readonly associationsByDevice: ReadonlyMap<Id, readonly AssociationAt[]>;
  readonly forwardersByDevice: ReadonlyMap<Id, readonly Id[]>;
  /** In the order of the forwarder's ranks. */
  readonly circuitsByForwarder: ReadonlyMap<Id, readonly CircuitAt[]>;
  readonly circuitsByTunnel: ReadonlyMap<Id, readonly CircuitAt[]>;
  readonly circuitsByPort: ReadonlyMap<string, readonly CircuitAt[]>;
  /** By `portVlanKey`: circuits that claim this VLAN, 'untagged' or 'all' of this port. */
  readonly circuitsByPortVlan: ReadonlyMap<string, readonly CircuitAt[]>;
  /** By `siteVlanKey`. */
  readonly segmentsBySiteVlan: ReadonlyMap<string, readonly Id[]>;
  /** In order of member, then of port number; see `portGroupAt` for one of them. */
  readonly portGroupsByDevice: ReadonlyMap<Id, readonly PortGroup[]>;
  /** By number, which says nothing: an earlier version's bundles keep theirs. */
  readonly bundles: readonly Bundle[];
  readonly bundleByCable: ReadonlyMap<Id, Bundle>;
  /** Elements that frames cross are bundles by number, and from here on tunnels as in `tunnelIds`; between them is room. */
  readonly firstTunnelElement: number;
}

export const portKey = (device: Id, port: Id): string => `${device}/${port}`;
export const portVlanKey = (device: Id, port: Id, vlan: number | 'untagged' | 'all'): string =>
  `${device}/${port}/${vlan}`;
export const siteVlanKey = (site: Id, vlan: number): string => `${site}/${vlan}`;

/** An answer with the network that it was given for. */
export interface Answer<T> {
  readonly network: Network;
  readonly value: T;
}
type Compute = (network: Network, earlier?: Answer<never>) => unknown;

const answersOf = new WeakMap<Network, Map<Compute, Answer<unknown>>>();

/**
 * Keeps one answer per network, so that rules, traces and screens share it. Where the network is that of a changed design,
 * `earlier` is the last answer for a version before: what the changes leave alone may be taken over from it.
 */
export const perNetwork = <T>(
  compute: (network: Network, earlier?: Answer<T>) => T,
): ((network: Network) => T) => {
  const key = compute as Compute;
  return (network) => {
    const answers = answersOf.get(network) ?? new Map<Compute, Answer<unknown>>();
    const earlier = answers.get(key) as Answer<T> | undefined;
    if (earlier?.network === network) return earlier.value;
    const value = compute(network, earlier);
    answers.set(key, { network, value });
    answersOf.set(network, answers);
    return value;
  };
};

/**
 * Keeps one answer per object: an entry or a collection that a patch leaves alone is the same object in the next version. The
 * answer may depend on nothing else.
 */
export const perObject = <O extends object, T>(compute: (object: O) => T): ((object: O) => T) => {
  const answers = new WeakMap<O, { readonly value: T }>();
  return (object) => {
    const known = answers.get(object);
    if (known !== undefined) return known.value;
    const value = compute(object);
    answers.set(object, { value });
    return value;
  };
};

/** Keeps the last answer about what differs between two versions. */
export const perPairOfVersions = <T>(
  compute: (before: Network, now: Network) => T,
): ((before: Network, now: Network) => T) => {
  const answers = new WeakMap<Network, { readonly before: Network; readonly value: T }>();
  return (before, now) => {
    const known = answers.get(now);
    if (known?.before === before) return known.value;
    const value = compute(before, now);
    answers.set(now, { before, value });
    return value;
  };
};

/** Makes the answers for one network the earlier ones of another, whose design is a later version. */
export const passOnAnswers = (from: Network, to: Network): void => {
  answersOf.set(to, new Map(answersOf.get(from)));
};

/** The entry of a reference that the schema guarantees; a missing one is a bug of the caller, who left the design unparsed. */
export const entryOf = <T>(collection: { readonly [id: string]: T }, id: Id): T => {
  const entry = collection[id];
  if (entry === undefined)
    throw new Error(`the design names ${id}, which it does not hold: parse it before it is indexed`);
  return entry;
};

/** The device on which a tunnel's end lies. */
export const deviceOfTunnelEnd = (network: Network, tunnel: Tunnel, end: End): Id =>
  entryOf(network.design.endpoints, tunnel[end].endpoint).device;

/** The segments that a site has under this VLAN. */
export const segmentsAt = (network: Network, site: Id, vlan: number): readonly Id[] =>
  network.segmentsBySiteVlan.get(siteVlanKey(site, vlan)) ?? [];

/** Members of a device that forward frames: the active one of a standby pair, both of an active pair, 1 elsewhere. */
export const forwardingMembers = (device: Device): readonly Member[] =>
  device.kind !== 'ha-pair' ? [1] : device.mode === 'active-active' ? [1, 2] : [device.active ?? 1];
