import type { Design } from '../../engine/model/design.ts';
import { joinPatches, patchAt, type MergePatch } from '../../engine/model/merge-patch.ts';
import { rankAtEnd } from '../../engine/model/rank.ts';
import type { End, Network } from '../../engine/network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf, otherEnd } from '../../engine/network/network.ts';
import { endpointAddress, tunnelFamily } from '../../engine/network/selectors-cover.ts';
import { tagModeOf, keepsTags } from '../../engine/rules/tag-mode.ts';
import { tunnelCapacity, type EndCapacity } from '../../engine/rules/tunnel-capacity.ts';
import { formatVlans } from './vlan-list.ts';

/** The address of one end as the other one uses it; without a common family whatever the endpoint has. */
export const endAddress = (network: Network, tunnelId: string, end: End): string | undefined => {
  const tunnel = entryOf(network.design.tunnels, tunnelId);
  const { endpoint } = tunnel[end];
  const family = tunnelFamily(network, tunnel);
  return family === undefined
    ? (endpointAddress(network, endpoint, 4) ?? endpointAddress(network, endpoint, 6))
    : endpointAddress(network, endpoint, family);
};

/**
 * Whether a tunnel's UDP checksums are worth asking for: its ends meet over IPv6, or the design states them already.
 * RFC 768: over IPv4 zero says that none was computed, and every receiver takes it. RFC 6935 section 5: over IPv6 it does not.
 */
export const checksumsMatter = (network: Network, tunnelId: string): boolean => {
  const tunnel = entryOf(network.design.tunnels, tunnelId);
  return (
    tunnelFamily(network, tunnel) === 6 ||
    ends.some((end) => tunnel[end].udpChecksum !== undefined || tunnel[end].takesZeroChecksum !== undefined)
  );
};

/** The VLANs that a forwarder takes from ports, as they are written. */
export const vlansOf = (network: Network, forwarder: string): string => {
  const circuits = (network.circuitsByForwarder.get(forwarder) ?? []).flatMap(({ circuit }) =>
    circuit.kind === 'port' ? [circuit.vlans] : [],
  );
  const words = circuits.filter((vlans) => typeof vlans === 'string');
  const numbers = circuits.flatMap((vlans) => (typeof vlans === 'string' ? [] : vlans));
  return [...new Set(words), ...(numbers.length === 0 ? [] : [formatVlans(numbers)])].join(', ');
};

/** The forwarders at one end that a tunnel is a circuit of; more than one is a fault. */
export const forwardersAt = (network: Network, tunnelId: string, end: End): readonly string[] => {
  const device = deviceOfTunnelEnd(network, entryOf(network.design.tunnels, tunnelId), end);
  return (network.circuitsByTunnel.get(tunnelId) ?? [])
    .filter((at) => at.device === device)
    .map((at) => at.forwarder);
};

/** Puts a tunnel's end into one forwarder of its device and out of every other; undefined takes it out of all. */
export const moveIntoForwarder = (
  network: Network,
  design: Design,
  tunnelId: string,
  end: End,
  forwarder: string | undefined,
): MergePatch => {
  const device = deviceOfTunnelEnd(network, entryOf(network.design.tunnels, tunnelId), end);
  const here = (network.circuitsByTunnel.get(tunnelId) ?? []).filter((at) => at.device === device);
  const out = here
    .filter((at) => at.forwarder !== forwarder)
    .map((at) => patchAt(['forwarders', at.forwarder, 'circuits', at.id], null));
  const target = forwarder === undefined ? undefined : design.forwarders[forwarder];
  if (target === undefined || here.some((at) => at.forwarder === forwarder)) return joinPatches(design, out);
  const circuit = { kind: 'tunnel', rank: rankAtEnd(target.circuits), tunnel: tunnelId };
  return joinPatches(design, [...out, patchAt(['forwarders', forwarder!, 'circuits', tunnelId], circuit)]);
};

/** What a tunnel lets through at its narrower end, with a tag on the inner frame where its end keeps one. */
export const capacityOf = (network: Network, tunnelId: string): EndCapacity | undefined => {
  const tunnel = entryOf(network.design.tunnels, tunnelId);
  const isTagged = (['a', 'b'] as const).some(
    (end) =>
      tagModeOf(network, tunnel, end, deviceOfTunnelEnd(network, tunnel, end)) === 'keep' &&
      forwardersAt(network, tunnelId, end).some((forwarder) =>
        (network.circuitsByForwarder.get(forwarder) ?? []).some(
          ({ circuit }) => circuit.kind === 'port' && keepsTags(circuit),
        ),
      ),
  );
  return tunnelCapacity(network, tunnelId, isTagged ? 1 : 0);
};

/** The far end's address: this end's mirror image, never typed. */
export const farAddress = (network: Network, tunnelId: string, end: End): string | undefined =>
  endAddress(network, tunnelId, otherEnd(end));
