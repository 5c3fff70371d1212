import type { Collection, Entry } from '../model/design.ts';
import { collections } from '../model/design.ts';
import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type { Changes, EntryChange } from './changes.ts';
import { changesBetween, allAgreeIn } from './changes.ts';
import type {
  AssociationAt,
  Cable,
  CableAt,
  CircuitAt,
  DesignFacts,
  Device,
  Forwarder,
  Landing,
  Network,
  TunnelAt,
} from './network.ts';
import { ends, entryOf, passOnAnswers, portKey, portVlanKey, siteVlanKey } from './network.ts';
import { cablingAfter } from './cabling-after.ts';
import type { Cabling } from './port-groups.ts';
import { cablingOf, portGroupsAfter } from './port-groups.ts';

type Index<K, V> = Map<K, V[]>;
const put = <K, V>(lists: Index<K, V>, key: K, value: V): void => {
  const list = lists.get(key);
  if (list === undefined) lists.set(key, [value]);
  else list.push(value);
};

const idsInOrder = new WeakMap<object, readonly Id[]>();

const idsOf = (entries: object): readonly Id[] => {
  const ids = idsInOrder.get(entries) ?? Object.keys(entries).sort();
  idsInOrder.set(entries, ids);
  return ids;
};

/** The ids in order after changes, without sorting those that stay. */
const idsAfter = (ids: readonly Id[], changes: readonly EntryChange<object>[]): readonly Id[] => {
  const gone = new Set(changes.filter(({ now }) => now === undefined).map(({ id }) => id));
  const added = changes
    .filter(({ before }) => before === undefined)
    .map(({ id }) => id)
    .sort();
  if (gone.size === 0 && added.length === 0) return ids;
  const after: Id[] = [];
  let next = 0;
  for (const id of ids) {
    for (; next < added.length && added[next]! < id; next += 1) after.push(added[next]!);
    if (!gone.has(id)) after.push(id);
  }
  return [...after, ...added.slice(next)];
};

const entriesOf = <C extends Collection>(
  design: DesignFacts,
  collection: C,
): readonly (readonly [Id, Entry<C>])[] => {
  const entries = design[collection] as { readonly [id: string]: Entry<C> };
  return idsOf(entries).map((id) => [id, entries[id]!] as const);
};

type Lists<Names extends keyof Network> = Pick<Network, Names>;

const listDevices = (design: DesignFacts): Lists<'devicesBySite' | 'hostsBySegment'> => {
  const devicesBySite: Index<Id, Id> = new Map();
  const hostsBySegment: Index<Id, Id> = new Map();
  for (const [id, device] of entriesOf(design, 'devices')) {
    put(devicesBySite, device.site, id);
    const segment = segmentOfHost(device);
    if (segment !== undefined) put(hostsBySegment, segment, id);
  }
  return { devicesBySite, hostsBySegment };
};
const segmentOfHost = (device: Device): Id | undefined =>
  device.kind === 'host' ? device.segment : undefined;

/** The cable's ends with the keys under which they are listed. */
const cableEnds = (
  { devices }: DesignFacts,
  id: Id,
  cable: Cable,
): readonly { readonly at: CableAt; readonly device: Id; readonly port: string }[] =>
  ends.map((end) => {
    const plug = cable[end];
    const isPair = entryOf(devices, plug.device).kind === 'ha-pair';
    const at: CableAt = { cable: id, end, member: isPair ? (plug.member ?? 1) : 1 };
    return { at, device: plug.device, port: portKey(plug.device, plug.port) };
  });

type LinkLists = Lists<
  'cablesByPort' | 'cablesByDevice' | 'landingsByDevice' | 'landingsByPort' | 'landingsByTransport'
>;

const listLinks = (design: DesignFacts): LinkLists => {
  const cablesByPort: Index<string, CableAt> = new Map();
  const cablesByDevice: Index<Id, CableAt> = new Map();
  const landingsByDevice: Index<Id, Id> = new Map();
  const landingsByPort: Index<string, Id> = new Map();
  const landingsByTransport: Index<Id, Id> = new Map();
  for (const [id, link] of entriesOf(design, 'links')) {
    if (link.kind === 'cable') {
      for (const { at, device, port } of cableEnds(design, id, link)) {
        put(cablesByPort, port, at);
        put(cablesByDevice, device, at);
      }
    } else {
      const landing: Landing = link;
      put(landingsByDevice, landing.device, id);
      put(landingsByPort, portKey(landing.device, landing.port), id);
      put(landingsByTransport, landing.transport, id);
    }
  }
  return { cablesByPort, cablesByDevice, landingsByDevice, landingsByPort, landingsByTransport };
};

const listEndpoints = (design: DesignFacts): Lists<'endpointsByDevice'> => {
  const endpointsByDevice: Index<Id, Id> = new Map();
  for (const [id, endpoint] of entriesOf(design, 'endpoints')) put(endpointsByDevice, endpoint.device, id);
  return { endpointsByDevice };
};

const listAssociations = (design: DesignFacts): Lists<'associationsByDevice'> => {
  const associationsByDevice: Index<Id, AssociationAt> = new Map();
  for (const [id, association] of entriesOf(design, 'associations'))
    for (const end of ends) put(associationsByDevice, association[end].device, { association: id, end });
  return { associationsByDevice };
};

const listTunnels = (
  design: DesignFacts,
): Lists<'tunnelIds' | 'tunnelsByEndpoint' | 'tunnelsByAssociation' | 'tunnelsByDevice'> => {
  const tunnels = entriesOf(design, 'tunnels');
  const tunnelsByEndpoint: Index<Id, TunnelAt> = new Map();
  const tunnelsByAssociation: Index<Id, Id> = new Map();
  const tunnelsByDevice: Index<Id, TunnelAt> = new Map();
  for (const [id, tunnel] of tunnels) {
    for (const end of ends) {
      put(tunnelsByEndpoint, tunnel[end].endpoint, { tunnel: id, end });
      put(tunnelsByDevice, entryOf(design.endpoints, tunnel[end].endpoint).device, { tunnel: id, end });
    }
    if (tunnel.association !== undefined) put(tunnelsByAssociation, tunnel.association, id);
  }
  return { tunnelIds: tunnels.map(([id]) => id), tunnelsByEndpoint, tunnelsByAssociation, tunnelsByDevice };
};

const circuitsOf = (forwarder: Id, { device, circuits }: Forwarder): readonly CircuitAt[] =>
  inRankOrder(circuits).map(([id, circuit]) => ({ forwarder, device, id, circuit }));

/** Under what a circuit is listed. */
type Keys = (at: CircuitAt) => readonly string[];
const tunnelKeys: Keys = ({ circuit }) => (circuit.kind === 'tunnel' ? [circuit.tunnel] : []);
const portKeys: Keys = ({ device, circuit }) =>
  circuit.kind === 'port' ? [portKey(device, circuit.port)] : [];
const portVlanKeys: Keys = ({ device, circuit }) => {
  if (circuit.kind !== 'port') return [];
  const { port, vlans } = circuit;
  return typeof vlans === 'string'
    ? [portVlanKey(device, port, vlans)]
    : [...new Set(vlans)].map((vlan) => portVlanKey(device, port, vlan));
};

type ForwarderLists = Lists<
  'forwardersByDevice' | 'circuitsByForwarder' | 'circuitsByTunnel' | 'circuitsByPort' | 'circuitsByPortVlan'
>;

const listForwarders = (design: DesignFacts): ForwarderLists => {
  const forwardersByDevice: Index<Id, Id> = new Map();
  const circuitsByForwarder = new Map<Id, readonly CircuitAt[]>();
  const circuitsByTunnel: Index<Id, CircuitAt> = new Map();
  const circuitsByPort: Index<string, CircuitAt> = new Map();
  const circuitsByPortVlan: Index<string, CircuitAt> = new Map();
  for (const [id, forwarder] of entriesOf(design, 'forwarders')) {
    put(forwardersByDevice, forwarder.device, id);
    const circuits = circuitsOf(id, forwarder);
    circuitsByForwarder.set(id, circuits);
    for (const at of circuits) {
      for (const key of tunnelKeys(at)) put(circuitsByTunnel, key, at);
      for (const key of portKeys(at)) put(circuitsByPort, key, at);
      for (const key of portVlanKeys(at)) put(circuitsByPortVlan, key, at);
    }
  }
  return { forwardersByDevice, circuitsByForwarder, circuitsByTunnel, circuitsByPort, circuitsByPortVlan };
};

const listSegments = (design: DesignFacts): Lists<'segmentsBySiteVlan'> => {
  const segmentsBySiteVlan: Index<string, Id> = new Map();
  for (const [id, segment] of entriesOf(design, 'segments'))
    for (const [site, { vlan }] of Object.entries(segment.sites))
      if (vlan !== undefined) put(segmentsBySiteVlan, siteVlanKey(site, vlan), id);
  return { segmentsBySiteVlan };
};

const listCabling = (design: DesignFacts): Cabling =>
  cablingOf(design, idsOf(design.devices), idsOf(design.links));

const build = (design: DesignFacts): Network => ({
  design,
  deviceIds: idsOf(design.devices),
  ...listDevices(design),
  ...listLinks(design),
  ...listEndpoints(design),
  ...listAssociations(design),
  ...listTunnels(design),
  ...listForwarders(design),
  ...listSegments(design),
  ...listCabling(design),
});

/** What one entry has in a list of the index. */
type Listed<V> = readonly (readonly [key: Id, value: V])[];

/** Lists after changes: what changed entries had in them goes, what they have now comes in, in order of id. */
const listsAfter = <E extends object, V>(
  lists: ReadonlyMap<Id, readonly V[]>,
  changes: readonly EntryChange<E>[],
  idOf: (value: V) => Id,
  had: (id: Id, entry: E) => Listed<V>,
  has: (id: Id, entry: E) => Listed<V>,
): ReadonlyMap<Id, readonly V[]> => {
  const changed = new Set(changes.map(({ id }) => id));
  const added: Index<Id, V> = new Map();
  const touched = new Set<Id>();
  for (const { id, before, now } of changes) {
    if (before !== undefined) for (const [key] of had(id, before)) touched.add(key);
    if (now === undefined) continue;
    for (const [key, value] of has(id, now)) {
      put(added, key, value);
      touched.add(key);
    }
  }
  if (touched.size === 0) return lists;
  const after = new Map(lists);
  for (const key of touched) {
    const list = [
      ...(lists.get(key) ?? []).filter((value) => !changed.has(idOf(value))),
      ...(added.get(key) ?? []),
    ].sort((a, b) => (idOf(a) < idOf(b) ? -1 : idOf(a) > idOf(b) ? 1 : 0));
    if (list.length > 0) after.set(key, list);
    else after.delete(key);
  }
  return after;
};

const itself = (id: Id): Id => id;

const renewDevices = (
  before: Network,
  changes: Changes['devices'],
): Lists<'devicesBySite' | 'hostsBySegment'> => {
  const sites = (id: Id, { site }: Device): Listed<Id> => [[site, id]];
  const segments = (id: Id, device: Device): Listed<Id> => {
    const segment = segmentOfHost(device);
    return segment === undefined ? [] : [[segment, id]];
  };
  return {
    devicesBySite: listsAfter(before.devicesBySite, changes, itself, sites, sites),
    hostsBySegment: listsAfter(before.hostsBySegment, changes, itself, segments, segments),
  };
};

const renewLinks = (before: Network, now: DesignFacts, changes: Changes['links']): LinkLists => {
  const cables =
    (design: DesignFacts, key: 'device' | 'port') =>
    (id: Id, link: Entry<'links'>): Listed<CableAt> =>
      link.kind === 'cable' ? cableEnds(design, id, link).map((one) => [one[key], one.at]) : [];
  const landings =
    (keyOf: (landing: Landing) => Id) =>
    (id: Id, link: Entry<'links'>): Listed<Id> =>
      link.kind === 'landing' ? [[keyOf(link), id]] : [];
  const renewedCables = (lists: Network['cablesByPort'], key: 'device' | 'port') =>
    listsAfter(lists, changes, ({ cable }) => cable, cables(before.design, key), cables(now, key));
  const renewedLandings = (lists: Network['landingsByPort'], keyOf: (landing: Landing) => Id) =>
    listsAfter(lists, changes, itself, landings(keyOf), landings(keyOf));
  return {
    cablesByPort: renewedCables(before.cablesByPort, 'port'),
    cablesByDevice: renewedCables(before.cablesByDevice, 'device'),
    landingsByDevice: renewedLandings(before.landingsByDevice, ({ device }) => device),
    landingsByPort: renewedLandings(before.landingsByPort, ({ device, port }) => portKey(device, port)),
    landingsByTransport: renewedLandings(before.landingsByTransport, ({ transport }) => transport),
  };
};

const renewForwarders = (before: Network, changes: Changes['forwarders']): ForwarderLists => {
  const devices = (id: Id, { device }: Forwarder): Listed<Id> => [[device, id]];
  const circuitsByForwarder = new Map(before.circuitsByForwarder);
  for (const { id, now } of changes)
    if (now === undefined) circuitsByForwarder.delete(id);
    else circuitsByForwarder.set(id, circuitsOf(id, now));
  const renewed = (lists: ReadonlyMap<string, readonly CircuitAt[]>, keysOf: Keys) =>
    listsAfter(
      lists,
      changes,
      ({ forwarder }) => forwarder,
      (id) =>
        before.circuitsByForwarder.get(id)!.flatMap((at) => keysOf(at).map((key) => [key, at] as const)),
      (id) => circuitsByForwarder.get(id)!.flatMap((at) => keysOf(at).map((key) => [key, at] as const)),
    );
  return {
    forwardersByDevice: listsAfter(before.forwardersByDevice, changes, itself, devices, devices),
    circuitsByForwarder,
    circuitsByTunnel: renewed(before.circuitsByTunnel, tunnelKeys),
    circuitsByPort: renewed(before.circuitsByPort, portKeys),
    circuitsByPortVlan: renewed(before.circuitsByPortVlan, portVlanKeys),
  };
};

/** Whether a device forms the same logical ports as before, in and out of service as before. */
const hasTheSamePorts = ({ before, now }: EntryChange<Device>): boolean => {
  if (before === undefined || now === undefined || before.kind !== now.kind) return false;
  if (before.ports === now.ports) return true;
  const ids = Object.keys(now.ports);
  return (
    ids.length === Object.keys(before.ports).length &&
    ids.every((id) => {
      const [was, is] = [before.ports[id], now.ports[id]!];
      return (
        was?.number === is.number &&
        was.role === is.role &&
        was.aggregation === is.aggregation &&
        was.shut === is.shut
      );
    })
  );
};

/** Whether links lead from where they did to where they did. */
const joinTheSame = (changes: Changes['links']): boolean =>
  allAgreeIn(changes, 'kind', 'a', 'b', 'device', 'port', 'transport');

/** The cabling after changes: devices that had no cables change nothing but their own ports. */
const renewCabling = (before: Network, design: DesignFacts, { devices, links }: Changes): Cabling => {
  const others = devices.filter((change) => !hasTheSamePorts(change));
  if (others.some(({ id }) => before.cablesByDevice.has(id))) return listCabling(design);
  const { portGroupsByDevice, bundles, bundleByCable, firstTunnelElement } = before;
  const cabling = {
    portGroupsByDevice:
      others.length === 0 ? portGroupsByDevice : portGroupsAfter(portGroupsByDevice, others),
    bundles,
    bundleByCable,
    firstTunnelElement,
  };
  return joinTheSame(links) ? cabling : (cablingAfter(cabling, design, links) ?? listCabling(design));
};

/** The index of a later version: lists whose entries say the same as before in what is listed of them are taken over. */
const renew = (before: Network, design: DesignFacts): Network => {
  const changes = changesBetween(before.design, design);
  for (const collection of collections)
    idsInOrder.set(design[collection], idsAfter(idsOf(before.design[collection]), changes[collection]));
  const { devices, links, endpoints, associations, tunnels, forwarders, segments } = changes;
  const linksJoinTheSame = joinTheSame(links);
  const keepTheirKind = devices.every(
    ({ before: old, now }) => old === undefined || now === undefined || old.kind === now.kind,
  );
  const endpointsStay = allAgreeIn(endpoints, 'device');
  const tunnelsStay =
    allAgreeIn(tunnels, 'association') &&
    tunnels.every(({ before: old, now }) => ends.every((end) => old![end].endpoint === now![end].endpoint));
  return {
    ...before,
    design,
    deviceIds: idsOf(design.devices),
    ...(allAgreeIn(devices, 'kind', 'site', 'segment') ? {} : renewDevices(before, devices)),
    ...(!keepTheirKind ? listLinks(design) : linksJoinTheSame ? {} : renewLinks(before, design, links)),
    ...(endpointsStay ? {} : listEndpoints(design)),
    ...(associations.every(({ before: old, now }) =>
      ends.every((end) => old?.[end].device === now?.[end].device),
    )
      ? {}
      : listAssociations(design)),
    ...(endpointsStay && tunnelsStay ? {} : listTunnels(design)),
    ...(forwarders.every(
      ({ before: old, now }) => old?.circuits === now?.circuits && old?.device === now?.device,
    )
      ? {}
      : renewForwarders(before, forwarders)),
    ...(segments.every(({ before: old, now }) => old?.sites === now?.sites) ? {} : listSegments(design)),
    ...renewCabling(before, design, changes),
  };
};

// By each collection: the last network whose design held it.
const known = new WeakMap<object, Network>();

/** The indexed design that shares the most collections with this one, if it can be a version of the same. */
const versionBefore = (design: DesignFacts): Network | undefined => {
  const sharedBy = new Map<Network, number>();
  for (const collection of collections) {
    const network = known.get(design[collection]);
    if (network !== undefined && !sharedBy.has(network))
      sharedBy.set(network, collections.filter((each) => network.design[each] === design[each]).length);
  }
  const [best] = [...sharedBy].sort(([, a], [, b]) => b - a);
  return best !== undefined && best[1] * 2 >= collections.length ? best[0] : undefined;
};

/**
 * Who is joined to what, as every analysis needs it. Built once per version of the design and kept; a design that differs
 * only in where things stand on the sheet has the same network, and any other version takes over what its changes leave alone.
 * Name the version that it comes from where both must give the same numbers to bundles.
 */
export const indexNetwork = (design: DesignFacts, version?: Network): Network => {
  const own = known.get(design);
  if (own !== undefined) return own;
  const before = version ?? versionBefore(design);
  const isSame =
    before?.design.meta === design.meta &&
    collections.every((collection) => before.design[collection] === design[collection]);
  const network = isSame ? before : before === undefined ? build(design) : renew(before, design);
  if (before !== undefined && !isSame) passOnAnswers(before, network);
  known.set(design, network);
  for (const collection of collections) known.set(design[collection], network);
  return network;
};
