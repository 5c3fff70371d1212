import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, perNetwork } from '../network/network.ts';
import type { TagCount } from '../wire/stack.ts';
import { tunnelStack } from '../wire/tunnel-stack.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { segmentsByForwarder, segmentsOfCircuit } from './carried-segments.ts';
import { keepsTags, tagModeOf } from './tag-mode.ts';
import { tunnelCapacity, type EndCapacity } from './tunnel-capacity.ts';

export interface Tight extends EndCapacity {
  readonly tunnel: string;
}

/** Tags that the segment's frames keep inside a tunnel, at the end that keeps more. */
export const innerTagsOf = (network: Network, tunnel: string, segment: string): TagCount => {
  const entry = network.design.tunnels[tunnel]!;
  return ends.some((end) => {
    const device = deviceOfTunnelEnd(network, entry, end);
    if (tagModeOf(network, entry, end, device) === 'strip') return false;
    return (network.circuitsByTunnel.get(tunnel) ?? [])
      .filter((at) => at.device === device)
      .some(({ forwarder }) =>
        (network.circuitsByForwarder.get(forwarder) ?? []).some(
          ({ circuit }) =>
            circuit.kind === 'port' &&
            keepsTags(circuit) &&
            segmentsOfCircuit(network, device, circuit).includes(segment),
        ),
      );
  })
    ? 1
    : 0;
};

/** What the tunnels of a segment let through, the narrowest first. */
export const capacitiesOf = perNetwork((network): ReadonlyMap<string, readonly Tight[]> => {
  const bySegment = new Map<string, Tight[]>();
  for (const [tunnel, segments] of tunnelSegments(network))
    for (const segment of segments) {
      const capacity = tunnelCapacity(network, tunnel, innerTagsOf(network, tunnel, segment));
      if (capacity === undefined) continue;
      const list = bySegment.get(segment) ?? [];
      list.push({ tunnel, ...capacity });
      bySegment.set(segment, list);
    }
  for (const list of bySegment.values()) list.sort((x, y) => x.largestBytes - y.largestBytes);
  return bySegment;
});

interface Need {
  readonly needBytes: number;
  /** Hosts that want it, where the segment itself says nothing. */
  readonly hosts: readonly string[];
}

/** The largest packet that somebody on the segment may send: what it is committed to, else what its hosts are set to. */
export const needOf = (network: Network, segment: string): Need | undefined => {
  const { mtu } = network.design.segments[segment]!;
  if (mtu !== undefined) return { needBytes: mtu, hosts: [] };
  const wants = (network.hostsBySegment.get(segment) ?? []).flatMap((host) =>
    Object.values(network.design.devices[host]!.ports).flatMap((port) =>
      port.mtu === undefined ? [] : [{ host, mtu: port.mtu }],
    ),
  );
  if (wants.length === 0) return undefined;
  const needBytes = Math.max(...wants.map((want) => want.mtu));
  return {
    needBytes,
    hosts: [...new Set(wants.filter((want) => want.mtu === needBytes).map(({ host }) => host))],
  };
};

/** True when oversize packets are cut into fragments instead of dropped, whichever end sends them. */
export const isFragmented = (network: Network, id: string): boolean =>
  ends.every((end) => tunnelStack(network, id, end, 0)?.isCut === true);

const gatewaysBySegment = perNetwork((network): ReadonlyMap<string, readonly string[]> => {
  const bySegment = new Map<string, string[]>();
  for (const [forwarder, segments] of segmentsByForwarder(network)) {
    if (network.design.forwarders[forwarder]!.gateway?.mtu === undefined) continue;
    for (const segment of segments) bySegment.set(segment, [...(bySegment.get(segment) ?? []), forwarder]);
  }
  return bySegment;
});

/** Forwarders that serve the segment and have a gateway in it whose MTU is known. */
export const gatewaysOf = (network: Network, segment: string): readonly string[] =>
  gatewaysBySegment(network).get(segment) ?? [];
