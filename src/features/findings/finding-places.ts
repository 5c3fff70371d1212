import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import type { Finding } from '../../engine/rules/finding.ts';

/** The sites and segments that a finding is about, by its elements. */
export interface FindingPlaces {
  readonly sites: ReadonlySet<string>;
  readonly segments: ReadonlySet<string>;
}

const defined = (ids: readonly (string | undefined)[]): readonly string[] =>
  ids.filter((id) => id !== undefined);

const devicesOf = (design: Design, { collection, id }: ElementRef): readonly string[] => {
  switch (collection) {
    case 'devices':
      return [id];
    case 'endpoints':
      return defined([design.endpoints[id]?.device]);
    case 'forwarders':
      return defined([design.forwarders[id]?.device]);
    case 'associations': {
      const { a, b } = design.associations[id] ?? {};
      return defined([a?.device, b?.device]);
    }
    case 'tunnels': {
      const { a, b } = design.tunnels[id] ?? {};
      return defined([a, b].map((end) => design.endpoints[end?.endpoint ?? '']?.device));
    }
    case 'links': {
      const link = design.links[id];
      if (link === undefined) return [];
      return link.kind === 'landing' ? [link.device] : [link.a.device, link.b.device];
    }
    default:
      return [];
  }
};

/** Sites and segments of findings in one design; what a tunnel carries is worked out once for all. */
export const findingPlaces = (design: Design): ((finding: Finding) => FindingPlaces) => {
  const carried = tunnelSegments(indexNetwork(design));
  const segmentsOf = ({ collection, id }: ElementRef): readonly string[] => {
    const device = collection === 'devices' ? design.devices[id] : undefined;
    const demand = collection === 'demands' ? design.demands[id] : undefined;
    return [
      ...(collection === 'segments' ? [id] : []),
      ...(collection === 'tunnels' ? (carried.get(id) ?? []) : []),
      ...(collection === 'associations'
        ? Object.entries(design.tunnels).flatMap(([tunnel, { association }]) =>
            association === id ? (carried.get(tunnel) ?? []) : [],
          )
        : []),
      ...(collection === 'forwarders'
        ? Object.values(design.forwarders[id]?.circuits ?? {}).flatMap((circuit) =>
            circuit.kind === 'tunnel' ? (carried.get(circuit.tunnel) ?? []) : [],
          )
        : []),
      ...(device?.kind === 'host' ? defined([device.segment]) : []),
      ...defined([demand?.segment]),
    ];
  };
  return ({ elements }) => ({
    sites: new Set(
      elements.flatMap((ref) => [
        ...(ref.collection === 'sites' ? [ref.id] : []),
        ...defined(devicesOf(design, ref).map((device) => design.devices[device]?.site)),
      ]),
    ),
    segments: new Set(elements.flatMap(segmentsOf)),
  });
};
