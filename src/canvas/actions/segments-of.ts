import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';

/** The segments that an element belongs to, by id: what its tunnels carry, what a host is declared to be in, what lands at a site. */
export const segmentsOf = (design: Design, { collection, id }: ElementRef): readonly string[] => {
  const carried = (tunnels: readonly string[]): readonly string[] => {
    const bySegment = tunnelSegments(indexNetwork(design));
    return [...new Set(tunnels.flatMap((tunnel) => bySegment.get(tunnel) ?? []))].sort();
  };
  const tunnelsWith = (holds: (tunnel: Design['tunnels'][string]) => boolean): readonly string[] =>
    Object.entries(design.tunnels)
      .filter(([, tunnel]) => holds(tunnel))
      .map(([tunnel]) => tunnel);
  switch (collection) {
    case 'segments':
      return Object.hasOwn(design.segments, id) ? [id] : [];
    case 'tunnels':
      return carried([id]);
    case 'associations':
      return carried(tunnelsWith((tunnel) => tunnel.association === id));
    case 'endpoints':
      return carried(tunnelsWith(({ a, b }) => a.endpoint === id || b.endpoint === id));
    case 'devices': {
      const device = design.devices[id];
      return device?.kind === 'host' && device.segment !== undefined ? [device.segment] : [];
    }
    case 'sites':
      return Object.keys(design.segments)
        .filter((segment) => Object.hasOwn(design.segments[segment]!.sites, id))
        .sort();
    default:
      return [];
  }
};
