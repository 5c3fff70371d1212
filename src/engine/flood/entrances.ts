import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { accessVlan, isTrunk, untagged } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { entryOf, perNetwork, siteVlanKey } from '../network/network.ts';
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

const put = <V>(lists: Map<string, V[]>, key: string, value: V): void => {
  const list = lists.get(key);
  if (list === undefined) lists.set(key, [value]);
  else list.push(value);
};

const tables = perNetwork((network) => {
  const switches = new Map<Id, SwitchPlace[]>();
  const accessPorts = new Map<string, AccessPorts>();
  const circuits = new Map<string, Circuits>();
  const wholePorts = new Map<Id, Circuits>();
  for (const place of placesOf(network).all) {
    const { site } = entryOf(network.design.devices, place.device);
    if (place.kind === 'switch') {
      put(switches, site, place);
      place.ports.forEach(({ port }, ordinal) => {
        if (!isTrunk(port) && port.vlan !== undefined)
          put(accessPorts, siteVlanKey(site, port.vlan), { place, ordinal });
      });
    }
    if (place.kind === 'forwarder')
      place.circuits.forEach((circuit, ordinal) => {
        if (circuit.kind !== 'port') return;
        const { vlans } = circuit.circuit;
        const isAccess = !isTrunk(circuit.port) && circuit.port.vlan !== undefined;
        const own = accessVlan(circuit.port);
        if (vlans === 'untagged' || (vlans === 'all' && isAccess)) {
          if (isAccess) put(circuits, siteVlanKey(site, own), { place, ordinal, tags: untagged });
        } else if (vlans === 'all') put(wholePorts, site, { place, ordinal, tags: untagged });
        else for (const vlan of vlans) put(circuits, siteVlanKey(site, vlan), { place, ordinal, tags: vlan });
      });
  }
  return { switches, accessPorts, circuits, wholePorts };
});

/** Where frames of this VLAN of a site come in. */
export const entrancesAt = (network: Network, site: Id, vlan: number): Entrances => {
  const { switches, accessPorts, circuits, wholePorts } = tables(network);
  const key = siteVlanKey(site, vlan);
  return {
    switches: switches.get(site) ?? [],
    accessPorts: accessPorts.get(key) ?? [],
    circuits: [
      ...(circuits.get(key) ?? []),
      ...(wholePorts.get(site) ?? []).map((whole) => ({ ...whole, tags: vlan })),
    ],
  };
};
