import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { accessVlan, isTrunk, untagged } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import type { ForwarderPlace, SwitchPlace } from './places.ts';
import { placesOf } from './places.ts';

/** Where frames of one VLAN of a site come in, each in order of device. */
export interface Entrances {
  /** The switches of the site, which know every VLAN that their ports let in. */
  readonly switches: readonly SwitchPlace[];
  /** Access ports in the VLAN. */
  readonly accessPorts: readonly { readonly place: SwitchPlace; readonly ordinal: number }[];
  /** Port circuits of gateways that claim it, with the tags that it has on the wire there. */
  readonly circuits: readonly {
    readonly place: ForwarderPlace;
    readonly ordinal: number;
    readonly tags: Tags;
  }[];
}

type Circuits = Entrances['circuits'][number][];
type AccessPorts = Entrances['accessPorts'][number][];

const put = <V>(lists: Map<number, V[]>, key: number, value: V): void => {
  const list = lists.get(key);
  if (list === undefined) lists.set(key, [value]);
  else list.push(value);
};

interface SiteEntrances {
  readonly switches: readonly SwitchPlace[];
  readonly accessPorts: ReadonlyMap<number, AccessPorts>;
  readonly circuits: ReadonlyMap<number, Circuits>;
  /** Circuits that claim every VLAN. */
  readonly wholePorts: Circuits;
}

const entrancesOfSite = (network: Network, site: Id): SiteEntrances => {
  const switches: SwitchPlace[] = [];
  const accessPorts = new Map<number, AccessPorts>();
  const circuits = new Map<number, Circuits>();
  const wholePorts: Circuits = [];
  const { byDevice } = placesOf(network);
  for (const place of (network.devicesBySite.get(site) ?? []).flatMap((id) => byDevice.get(id) ?? [])) {
    if (place.kind === 'switch') {
      switches.push(place);
      place.ports.forEach(({ port }, ordinal) => {
        if (!isTrunk(port) && port.vlan !== undefined) put(accessPorts, port.vlan, { place, ordinal });
      });
    }
    if (place.kind === 'forwarder')
      place.circuits.forEach((circuit, ordinal) => {
        if (circuit.kind !== 'port') return;
        const { vlans } = circuit.circuit;
        const isAccess = !isTrunk(circuit.port) && circuit.port.vlan !== undefined;
        const own = accessVlan(circuit.port);
        if (vlans === 'untagged' || (vlans === 'all' && isAccess)) {
          if (isAccess) put(circuits, own, { place, ordinal, tags: untagged });
        } else if (vlans === 'all') wholePorts.push({ place, ordinal, tags: untagged });
        else for (const vlan of vlans) put(circuits, vlan, { place, ordinal, tags: vlan });
      });
  }
  return { switches, accessPorts, circuits, wholePorts };
};

// Filled as sites are asked for: few are after an edit.
const entrancesBySite = perNetwork((_network) => new Map<Id, SiteEntrances>());

/** Where frames of this VLAN of a site come in. */
export const entrancesAt = (network: Network, site: Id, vlan: number): Entrances => {
  const known = entrancesBySite(network);
  const entrances = known.get(site) ?? entrancesOfSite(network, site);
  known.set(site, entrances);
  const { switches, accessPorts, circuits, wholePorts } = entrances;
  return {
    switches,
    accessPorts: accessPorts.get(vlan) ?? [],
    circuits: [...(circuits.get(vlan) ?? []), ...wholePorts.map((whole) => ({ ...whole, tags: vlan }))],
  };
};
