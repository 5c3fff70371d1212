import type { Collection, Entry } from '../model/design.ts';
import { collections } from '../model/design.ts';
import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type {
  AssociationAt,
  Cable,
  CableAt,
  CircuitAt,
  DesignFacts,
  Landing,
  Network,
  PortGroup,
  TunnelAt,
} from './network.ts';
import { ends, entryOf, portKey, portVlanKey, siteVlanKey } from './network.ts';
import { cablingOf } from './port-groups.ts';

type Lists<K, V> = Map<K, V[]>;
const put = <K, V>(lists: Lists<K, V>, key: K, value: V): void => {
  const list = lists.get(key);
  if (list === undefined) lists.set(key, [value]);
  else list.push(value);
};

const entriesOf = <C extends Collection>(
  design: DesignFacts,
  collection: C,
): readonly (readonly [Id, Entry<C>])[] => {
  const entries = design[collection] as { readonly [id: string]: Entry<C> };
  return Object.keys(entries)
    .sort()
    .map((id) => [id, entries[id]!] as const);
};

const build = (design: DesignFacts): Network => {
  const devices = entriesOf(design, 'devices');
  const devicesBySite: Lists<Id, Id> = new Map();
  const hostsBySegment: Lists<Id, Id> = new Map();
  for (const [id, device] of devices) {
    put(devicesBySite, device.site, id);
    if (device.kind === 'host' && device.segment !== undefined) put(hostsBySegment, device.segment, id);
  }

  const cables: (readonly [Id, Cable])[] = [];
  const cablesByPort: Lists<string, CableAt> = new Map();
  const cablesByDevice: Lists<Id, CableAt> = new Map();
  const landingsByDevice: Lists<Id, Id> = new Map();
  const landingsByPort: Lists<string, Id> = new Map();
  const landingsByTransport: Lists<Id, Id> = new Map();
  for (const [id, link] of entriesOf(design, 'links')) {
    if (link.kind === 'cable') {
      cables.push([id, link]);
      for (const end of ends) {
        const plug = link[end];
        const isPair = entryOf(design.devices, plug.device).kind === 'ha-pair';
        const at: CableAt = { cable: id, end, member: isPair ? (plug.member ?? 1) : 1 };
        put(cablesByPort, portKey(link[end].device, link[end].port), at);
        put(cablesByDevice, link[end].device, at);
      }
    } else {
      const landing: Landing = link;
      put(landingsByDevice, landing.device, id);
      put(landingsByPort, portKey(landing.device, landing.port), id);
      put(landingsByTransport, landing.transport, id);
    }
  }

  const endpointsByDevice: Lists<Id, Id> = new Map();
  for (const [id, endpoint] of entriesOf(design, 'endpoints')) put(endpointsByDevice, endpoint.device, id);
  const associationsByDevice: Lists<Id, AssociationAt> = new Map();
  for (const [id, association] of entriesOf(design, 'associations'))
    for (const end of ends) put(associationsByDevice, association[end].device, { association: id, end });
  const tunnels = entriesOf(design, 'tunnels');
  const tunnelsByEndpoint: Lists<Id, TunnelAt> = new Map();
  const tunnelsByAssociation: Lists<Id, Id> = new Map();
  const tunnelsByDevice: Lists<Id, TunnelAt> = new Map();
  for (const [id, tunnel] of tunnels) {
    for (const end of ends) {
      put(tunnelsByEndpoint, tunnel[end].endpoint, { tunnel: id, end });
      put(tunnelsByDevice, entryOf(design.endpoints, tunnel[end].endpoint).device, { tunnel: id, end });
    }
    if (tunnel.association !== undefined) put(tunnelsByAssociation, tunnel.association, id);
  }

  const forwardersByDevice: Lists<Id, Id> = new Map();
  const circuitsByForwarder = new Map<Id, readonly CircuitAt[]>();
  const circuitsByTunnel: Lists<Id, CircuitAt> = new Map();
  const circuitsByPort: Lists<string, CircuitAt> = new Map();
  const circuitsByPortVlan: Lists<string, CircuitAt> = new Map();
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

  const segmentsBySiteVlan: Lists<string, Id> = new Map();
  for (const [id, segment] of entriesOf(design, 'segments'))
    for (const [site, { vlan }] of Object.entries(segment.sites))
      if (vlan !== undefined) put(segmentsBySiteVlan, siteVlanKey(site, vlan), id);

  const cabling = cablingOf(devices, cables);
  const portGroupsByDevice: Lists<Id, PortGroup> = new Map();
  for (const group of cabling.groups) put(portGroupsByDevice, group.device, group);

  return {
    design,
    deviceIds: devices.map(([id]) => id),
    tunnelIds: tunnels.map(([id]) => id),
    devicesBySite,
    hostsBySegment,
    cablesByPort,
    cablesByDevice,
    landingsByDevice,
    landingsByPort,
    landingsByTransport,
    endpointsByDevice,
    tunnelsByEndpoint,
    tunnelsByAssociation,
    tunnelsByDevice,
    associationsByDevice,
    forwardersByDevice,
    circuitsByForwarder,
    circuitsByTunnel,
    circuitsByPort,
    circuitsByPortVlan,
    segmentsBySiteVlan,
    portGroups: cabling.groups,
    portGroupByPlug: cabling.groupByPlug,
    portGroupsByDevice,
    bundles: cabling.bundles,
    bundleByCable: cabling.bundleByCable,
  };
};

const known = new WeakMap<object, Network>();

/**
 * Who is joined to what, as every analysis needs it. Built once per version of the design and kept; a design that differs
 * only in where things stand on the sheet has the same network.
 */
export const indexNetwork = (design: DesignFacts): Network => {
  const before = known.get(design) ?? known.get(design.devices);
  const isJoinedAlike =
    before !== undefined &&
    collections.every((collection) => before.design[collection] === design[collection]);
  if (isJoinedAlike && before.design.meta === design.meta) return before;
  const network = isJoinedAlike ? { ...before, design } : build(design);
  known.set(design, network);
  known.set(design.devices, network);
  return network;
};
