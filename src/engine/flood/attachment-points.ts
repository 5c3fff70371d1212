import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { accessVlan, isTrunk, untagged } from '../network/frame-tags.ts';
import type { Network, PortGroup } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
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

const portOf = (graph: FloodGraph, site: Id, vlan: number): PlacedPoint | undefined => {
  const { network, forwarding } = graph;
  const places = (network.devicesBySite.get(site) ?? []).flatMap((id) => forwarding.places.byDevice.get(id)!);
  const placed = (place: Place, group: PortGroup, ordinal: number, tags: Tags): PlacedPoint => ({
    point: { site, device: place.device, port: group.port },
    place,
    at: { group, ordinal, tags },
  });
  for (const place of places)
    if (place.kind === 'switch') {
      const ordinal = place.ports.findIndex(({ port }) => !isTrunk(port) && port.vlan === vlan);
      if (ordinal >= 0) return placed(place, place.ports[ordinal]!.group, ordinal, untagged);
    }
  for (const place of places)
    if (place.kind === 'forwarder')
      for (const [ordinal, circuit] of place.circuits.entries()) {
        if (circuit.kind !== 'port') continue;
        const { vlans } = circuit.circuit;
        if (vlans === 'all' || (vlans !== 'untagged' && vlans.includes(vlan)))
          return placed(place, circuit.group, ordinal, vlan);
        if (vlans === 'untagged' && !isTrunk(circuit.port) && accessVlan(circuit.port) === vlan)
          return placed(place, circuit.group, ordinal, untagged);
      }
  return undefined;
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
    const port = vlan === undefined ? undefined : portOf(graph, site, vlan);
    if (port === undefined) unattachedSites.push(site);
    else points.push(port);
  }
  return { points, unattachedSites };
};
