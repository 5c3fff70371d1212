import { tunnelSegments } from '../flood/tunnel-segments.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends } from '../network/network.ts';
import { segmentsOfCircuit } from './carried-segments.ts';

/** Forwarders that lead the segment on from this end of the tunnel, to a port or into another tunnel. */
const forwardersAt = (network: Network, tunnel: string, segment: string, end: End): readonly string[] => {
  const device = deviceOfTunnelEnd(network, network.design.tunnels[tunnel]!, end);
  return (network.circuitsByTunnel.get(tunnel) ?? [])
    .filter((at) => at.device === device)
    .map(({ forwarder }) => forwarder)
    .filter((forwarder) =>
      network.circuitsByForwarder
        .get(forwarder)!
        .some(({ circuit }) =>
          circuit.kind === 'port'
            ? segmentsOfCircuit(network, device, circuit).includes(segment)
            : circuit.tunnel !== tunnel && tunnelSegments(network).get(circuit.tunnel)!.includes(segment),
        ),
    );
};

/**
 * The bridges through which a tunnel hands a segment's frames on unfiltered, of both ends; none where one end filters
 * them, which is enough, or doesn't lead them on.
 */
export const bridgesOfTunnel = (network: Network, tunnel: string, segment: string): readonly string[] => {
  const bridges = ends.map((end) =>
    forwardersAt(network, tunnel, segment, end).filter(
      (forwarder) => network.design.forwarders[forwarder]!.kind === 'bridge',
    ),
  );
  return bridges.every((at) => at.length > 0) ? bridges.flat() : [];
};
