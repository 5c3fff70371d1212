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
  Landing,
  Network,
  PortGroup,
  TunnelAt,
} from './network.ts';
import { ends, entryOf, passOnAnswers, portKey, portVlanKey, siteVlanKey } from './network.ts';
import { cablingOf } from './port-groups.ts';

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

const listDevices = (design: DesignFacts): Lists<'deviceIds' | 'devicesBySite' | 'hostsBySegment'> => {
  const devices = entriesOf(design, 'devices');
  const devicesBySite: Index<Id, Id> = new Map();
  const hostsBySegment: Index<Id, Id> = new Map();
  for (const [id, device] of devices) {
    put(devicesBySite, device.site, id);
    if (device.kind === 'host' && device.segment !== undefined) put(hostsBySegment, device.segment, id);
  }
  return { deviceIds: devices.map(([id]) => id), devicesBySite, hostsBySegment };
};

const listLinks = (
  design: DesignFacts,
): Lists<
  'cablesByPort' | 'cablesByDevice' | 'landingsByDevice' | 'landingsByPort' | 'landingsByTransport'
> => {
  const cablesByPort: Index<string, CableAt> = new Map();
  const cablesByDevice: Index<Id, CableAt> = new Map();
  const landingsByDevice: Index<Id, Id> = new Map();
  const landingsByPort: Index<string, Id> = new Map();
  const landingsByTransport: Index<Id, Id> = new Map();
  for (const [id, link] of entriesOf(design, 'links')) {
    if (link.kind === 'cable') {
      for (const end of ends) {
        const plug = link[end];
        const isPair = entryOf(design.devices, plug.device).kind === 'ha-pair';
        const at: CableAt = { cable: id, end, member: isPair ? (plug.member ?? 1) : 1 };
        put(cablesByPort, portKey(plug.device, plug.port), at);
        put(cablesByDevice, plug.device, at);
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

const listForwarders = (
  design: DesignFacts,
): Lists<
  'forwardersByDevice' | 'circuitsByForwarder' | 'circuitsByTunnel' | 'circuitsByPort' | 'circuitsByPortVlan'
> => {
  const forwardersByDevice: Index<Id, Id> = new Map();
  const circuitsByForwarder = new Map<Id, readonly CircuitAt[]>();
  const circuitsByTunnel: Index<Id, CircuitAt> = new Map();
  const circuitsByPort: Index<string, CircuitAt> = new Map();
  const circuitsByPortVlan: Index<string, CircuitAt> = new Map();
  for (const [id, forwarder] of entriesOf(design, 'forwarders')) {
    const device = forwarder.device;
    put(forwardersByDevice, device, id);
    const circuits = inRankOrder(forwarder.circuits).map(([circuitId, circuit]): CircuitAt => ({
      forwarder: id,
      device,
      id: circuitId,
      circuit,
    }));
    circuitsByForwarder.set(id, circuits);
    for (const at of circuits) {
      if (at.circuit.kind === 'tunnel') {
        put(circuitsByTunnel, at.circuit.tunnel, at);
        continue;
      }
      const { port, vlans } = at.circuit;
      put(circuitsByPort, portKey(device, port), at);
      const claims = typeof vlans === 'string' ? [vlans] : [...new Set(vlans)];
      for (const vlan of claims) put(circuitsByPortVlan, portVlanKey(device, port, vlan), at);
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

const listCabling = (
  design: DesignFacts,
): Lists<'portGroups' | 'portGroupByPlug' | 'portGroupsByDevice' | 'bundles' | 'bundleByCable'> => {
  const cables: (readonly [Id, Cable])[] = [];
  for (const [id, link] of entriesOf(design, 'links')) if (link.kind === 'cable') cables.push([id, link]);
  const { groups, groupByPlug, bundles, bundleByCable } = cablingOf(entriesOf(design, 'devices'), cables);
  const portGroupsByDevice: Index<Id, PortGroup> = new Map();
  for (const group of groups) put(portGroupsByDevice, group.device, group);
  return { portGroups: groups, portGroupByPlug: groupByPlug, portGroupsByDevice, bundles, bundleByCable };
};

const build = (design: DesignFacts): Network => ({
  design,
  ...listDevices(design),
  ...listLinks(design),
  ...listEndpoints(design),
  ...listAssociations(design),
  ...listTunnels(design),
  ...listForwarders(design),
  ...listSegments(design),
  ...listCabling(design),
});

/** Whether ports form the same logical ports as before, in and out of service as before. */
const haveTheSamePorts = (changes: readonly EntryChange<Device>[]): boolean =>
  allAgreeIn(changes, 'kind') &&
  changes.every(({ before, now }) => {
    const [old, ports] = [before!.ports, now!.ports];
    if (old === ports) return true;
    const ids = Object.keys(ports);
    return (
      ids.length === Object.keys(old).length &&
      ids.every((id) => {
        const [was, is] = [old[id], ports[id]!];
        return (
          was?.number === is.number &&
          was.role === is.role &&
          was.aggregation === is.aggregation &&
          was.shut === is.shut
        );
      })
    );
  });

/** Whether links lead from where they did to where they did. */
const joinTheSame = (changes: Changes['links']): boolean =>
  allAgreeIn(changes, 'kind', 'a', 'b', 'device', 'port', 'transport');

/** The index of a later version: lists whose entries say the same as before in what is listed of them are taken over. */
const renew = (before: Network, design: DesignFacts): Network => {
  const changes = changesBetween(before.design, design);
  for (const collection of collections)
    idsInOrder.set(design[collection], idsAfter(idsOf(before.design[collection]), changes[collection]));
  const { devices, links, endpoints, associations, tunnels, forwarders, segments } = changes;
  const linksJoinTheSame = joinTheSame(links);
  const endpointsStay = allAgreeIn(endpoints, 'device');
  const tunnelsStay =
    allAgreeIn(tunnels, 'association') &&
    tunnels.every(({ before: old, now }) => ends.every((end) => old![end].endpoint === now![end].endpoint));
  return {
    ...before,
    design,
    ...(allAgreeIn(devices, 'kind', 'site', 'segment') ? {} : listDevices(design)),
    ...(linksJoinTheSame && allAgreeIn(devices, 'kind') ? {} : listLinks(design)),
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
      : listForwarders(design)),
    ...(segments.every(({ before: old, now }) => old?.sites === now?.sites) ? {} : listSegments(design)),
    ...(linksJoinTheSame && haveTheSamePorts(devices) ? {} : listCabling(design)),
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
 */
export const indexNetwork = (design: DesignFacts): Network => {
  const own = known.get(design);
  if (own !== undefined) return own;
  const before = versionBefore(design);
  const isSame =
    before?.design.meta === design.meta &&
    collections.every((collection) => before.design[collection] === design[collection]);
  const network = isSame ? before : before === undefined ? build(design) : renew(before, design);
  if (before !== undefined && !isSame) passOnAnswers(before, network);
  known.set(design, network);
  for (const collection of collections) known.set(design[collection], network);
  return network;
};
