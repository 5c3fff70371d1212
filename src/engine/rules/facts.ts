import type { Collection, Entry } from '../model/design.ts';
import { collections } from '../model/design.ts';
import { isGateway } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import { agreeIn, changesBetween } from '../network/changes.ts';
import type { Answer, Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';

interface Part<C extends Collection> {
  readonly of: C;
  /** Which entries belong to it; all where nothing is said. */
  readonly holds?: (entry: Entry<C>, id: Id, network: Network) => boolean;
  /** Which of their properties; all where nothing is said. */
  readonly says?: readonly (keyof Entry<C> & string)[];
}
const part = <C extends Collection>(of: C, extent: Omit<Part<C>, 'of'>): Part<C> => ({ of, ...extent });

/** The parts of collections that a rule may look at alone: an edit outside of them lets its answer stand. */
export const parts = {
  /** Gateways, and whatever device has something that belongs on one: nothing keeps a document from putting it there. */
  gateways: part('devices', {
    holds: (device, id, network) =>
      isGateway(device) ||
      network.landingsByDevice.has(id) ||
      network.endpointsByDevice.has(id) ||
      network.associationsByDevice.has(id) ||
      network.forwardersByDevice.has(id),
  }),
  switches: part('devices', { holds: ({ kind }) => kind === 'switch' }),
  hosts: part('devices', { holds: ({ kind }) => kind === 'host' }),
  cables: part('links', { holds: ({ kind }) => kind === 'cable' }),
  landings: part('links', { holds: ({ kind }) => kind === 'landing' }),
  /** Transports without their figures. */
  carriers: part('transports', { says: ['name', 'kind', 'trusted', 'paths', 'families', 'filters'] }),
  /** Where segments have which VLAN and which subnets. */
  addressing: part('segments', { says: ['letter', 'name', 'sites'] }),
};
export type PartName = keyof typeof parts;
export const partNames = Object.keys(parts) as readonly PartName[];

/** What a rule may look at: what the design says of itself, a collection, or a part of one. */
export type Fact = 'meta' | Collection | PartName;

/** Where a fact stands in the document. */
export const placeOfFact = (fact: Fact): 'meta' | Collection =>
  fact in parts ? parts[fact as PartName].of : (fact as 'meta' | Collection);

type AnyEntry = Entry<'devices'>;
const anyPart = (name: PartName): Part<'devices'> => parts[name] as unknown as Part<'devices'>;

/** Whether an entry of its collection belongs to a part. */
export const isInPart = (name: PartName, network: Network, id: Id, entry: object): boolean =>
  anyPart(name).holds?.(entry as AnyEntry, id, network) !== false;

/** Whether a property of entries that belong to a part belongs to it, too. */
export const isSaidInPart = (name: PartName, property: string): boolean =>
  anyPart(name).says?.includes(property as keyof AnyEntry & string) !== false;

/** Whether what belongs to the part differs between two versions. */
const isStirred = (name: PartName, before: Network, now: Network): boolean => {
  const { of, says } = anyPart(name);
  return changesBetween(before.design, now.design)[of].some(
    (change) =>
      ((change.before !== undefined && isInPart(name, before, change.id, change.before)) ||
        (change.now !== undefined && isInPart(name, now, change.id, change.now))) &&
      (says === undefined || !agreeIn<AnyEntry>(change.before, change.now, ...(says as never[]))),
  );
};

/** For each fact an object that is the same in all versions of a design that agree in it. */
export const factIdentities: (network: Network) => { readonly [F in Fact]: object } = perNetwork(
  (network, earlier?: Answer<{ readonly [F in Fact]: object }>) => ({
    meta: network.design.meta,
    ...(Object.fromEntries(
      collections.map((collection) => [collection, network.design[collection]]),
    ) as unknown as { readonly [C in Collection]: object }),
    ...(Object.fromEntries(
      partNames.map((name) => [
        name,
        earlier === undefined || isStirred(name, earlier.network, network) ? {} : earlier.value[name],
      ]),
    ) as { readonly [P in PartName]: object }),
  }),
);

const areAsBefore = (facts: readonly Fact[], before: Network, now: Network): boolean => {
  const [old, current] = [factIdentities(before), factIdentities(now)];
  return facts.every((fact) => old[fact] === current[fact]);
};

/** Keeps an answer while nothing of the given facts is touched: it may depend on nothing else. */
export const perFacts = <T>(
  facts: readonly [Fact, ...Fact[]],
  compute: (network: Network) => T,
): ((network: Network) => T) =>
  perNetwork((network, earlier?: Answer<T>) =>
    earlier !== undefined && areAsBefore(facts, earlier.network, network) ? earlier.value : compute(network),
  );

/**
 * Keeps an answer for each entry of a collection while neither the entry nor anything of the given facts is touched: it may
 * depend on nothing else.
 */
export const perEntry = <C extends Collection, T>(
  collection: C,
  facts: readonly Fact[],
  compute: (network: Network, id: Id) => T,
): ((network: Network, id: Id) => T) => {
  interface Known {
    readonly entry: object;
    readonly value: T;
  }
  const memoryOf = perNetwork((network, earlier?: Answer<Map<Id, Known>>): Map<Id, Known> =>
    earlier !== undefined && areAsBefore(facts, earlier.network, network)
      ? new Map(earlier.value)
      : new Map<Id, Known>(),
  );
  return (network, id) => {
    const entry = entryOf<object>(network.design[collection], id);
    const memory = memoryOf(network);
    const known = memory.get(id);
    if (known?.entry === entry) return known.value;
    const value = compute(network, id);
    memory.set(id, { entry, value });
    return value;
  };
};
