import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { untagged } from '../network/frame-tags.ts';
import type { Network, PortGroup } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { entrancesAt } from './entrances.ts';
import type { FloodGraph } from './flood-graph.ts';
import type { Place } from './places.ts';

/** Where somebody of a segment is, or could be plugged in: a host, or for a site that has none yet a port. */
export interface AttachmentPoint {
  readonly site: Id;
  readonly device: Id;
  /** Absent for a host. */
  readonly port?: Id;
}
/** A point with what the flood knows of it. */
export interface PlacedPoint {
  readonly point: AttachmentPoint;
  readonly place: Place;
  /** For a port: itself, its number in the place and the tags with which a frame comes in there. */
  readonly at?: { readonly group: PortGroup; readonly ordinal: number; readonly tags: Tags };
}

/** A port in the VLAN: an access port where there is one, or a circuit of the gateway. */
const portOf = (network: Network, site: Id, vlan: number): PlacedPoint | undefined => {
  const { accessPorts, circuits } = entrancesAt(network, site, vlan);
  const [port] = accessPorts;
  if (port !== undefined) {
    const { group } = port.place.ports[port.ordinal]!;
    return {
      point: { site, device: port.place.device, port: group.port },
      place: port.place,
      at: { group, ordinal: port.ordinal, tags: untagged },
    };
  }
  const [entrance] = circuits;
  const circuit = entrance?.place.circuits[entrance.ordinal];
  if (entrance === undefined || circuit?.kind !== 'port') return undefined;
  const { place, ordinal, tags } = entrance;
  return {
    point: { site, device: place.device, port: circuit.group.port },
    place,
    at: { group: circuit.group, ordinal, tags },
  };
};

/** The points of a segment: its hosts, and for each of its sites without one a port in its VLAN; sites that have neither are named apart. */
export const attachmentPoints = (
  graph: FloodGraph,
  segment: Id,
): { readonly points: readonly PlacedPoint[]; readonly unattachedSites: readonly Id[] } => {
  const network: Network = graph.network;
  const { design } = network;
  const points: PlacedPoint[] = [];
  const sites = new Set<Id>();
  for (const host of network.hostsBySegment.get(segment) ?? []) {
    const { site } = entryOf(design.devices, host);
    sites.add(site);
    const [place] = graph.forwarding.places.byDevice.get(host)!;
    points.push({ point: { site, device: host }, place: place! });
  }
  const unattachedSites: Id[] = [];
  const declared = entryOf(design.segments, segment).sites;
  for (const site of Object.keys(declared).sort()) {
    if (sites.has(site)) continue;
    const vlan = declared[site]!.vlan;
    const port = vlan === undefined ? undefined : portOf(network, site, vlan);
    if (port === undefined) unattachedSites.push(site);
    else points.push(port);
  }
  return { points, unattachedSites };
};
