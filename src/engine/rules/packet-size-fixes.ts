import type { MergePatch } from '../model/merge-patch.ts';
import { joinPatches } from '../model/merge-patch.ts';
import { landingOf, tunnelPath } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { SMALLEST_LINK_MTU_BYTES } from '../reference/ip.ts';
import { accessOverheadBytes } from '../wire/frame-layers.ts';
import { MOST_TRANSPORT_MTU_BYTES } from '../wire/largest-inner-packet.ts';
import type { Fix } from './finding.ts';
import { gatewaysOf, type Tight } from './segment-capacity.ts';
import { outermostBytes } from './tunnel-capacity.ts';
import { counted } from './wording.ts';

/** Whether a segment carries IPv6: by what it must carry, or by its subnets. */
export const carriesIpv6 = (network: Network, segment: string): boolean => {
  const { protocols, sites } = network.design.segments[segment]!;
  return (
    protocols?.includes('ipv6') === true ||
    Object.values(sites).some((site) => site.subnets?.some((subnet) => subnet.includes(':')) === true)
  );
};

// RFC 791 section 3.1: every host accepts packets of 576 bytes; RFC 8200 section 5 asks 1280 of every link.
const leastMtuBytes = (network: Network, segment: string): number =>
  carriesIpv6(network, segment) ? SMALLEST_LINK_MTU_BYTES.ipv6 : 576;

/** Commits the segment, and its gateways, to what fits through all its tunnels. */
export const lowerSegment = (
  network: Network,
  segment: string,
  capacities: readonly Tight[],
): readonly Fix[] => {
  const { design } = network;
  const mtu = capacities[0]?.largestBytes ?? 0;
  if (mtu < leastMtuBytes(network, segment)) return [];
  const gateways = gatewaysOf(network, segment).filter((id) => design.forwarders[id]!.gateway!.mtu! > mtu);
  const { name } = design.segments[segment]!;
  return [
    {
      id: 'lower-segment',
      label: `Lower ${name} to ${mtu}`,
      sentence: `Commits ${name} to packets of at most ${mtu} bytes${gateways.length === 0 ? '' : ', its gateways too'}; hosts are told by DHCP option 26 or by router advertisement, or set by hand.`,
      patch: {
        segments: { [segment]: { mtu } },
        ...(gateways.length === 0
          ? {}
          : { forwarders: Object.fromEntries(gateways.map((id) => [id, { gateway: { mtu } }])) }),
      },
    },
  ];
};

/** Raises transports of one's own, and WAN ports, to what the need asks for; nothing where another's transport is the limit. */
export const raisePath = (network: Network, needBytes: number, tight: readonly Tight[]): readonly Fix[] => {
  const { design } = network;
  const transportMtu = new Map<string, number>();
  const portMtu = new Map<string, { readonly device: string; readonly port: string; readonly mtu: number }>();
  for (const { tunnel, stack } of tight) {
    const path = tunnelPath(network, tunnel);
    const bytes = outermostBytes(needBytes, stack);
    if (!path.ok || bytes === undefined) return [];
    const { kind, mtu } = design.transports[path.transport]!;
    if (mtu !== undefined && mtu < bytes) {
      if (kind !== 'own-routed') return [];
      transportMtu.set(path.transport, Math.max(bytes, transportMtu.get(path.transport) ?? 0));
    }
    for (const landing of [path.landingA, path.landingB]) {
      const { device, port, accessOverhead } = landingOf(network, landing);
      const wanted = bytes + accessOverheadBytes(accessOverhead ?? 'none');
      const has = design.devices[device]!.ports[port]!.mtu;
      if (has === undefined ? wanted > STANDARD_PAYLOAD_BYTES && accessOverhead !== undefined : has < wanted)
        portMtu.set(`${device}/${port}`, {
          device,
          port,
          mtu: Math.max(wanted, portMtu.get(`${device}/${port}`)?.mtu ?? 0),
        });
    }
  }
  const patches: MergePatch[] = [
    ...[...transportMtu].map(([id, mtu]): MergePatch => ({ transports: { [id]: { mtu } } })),
    ...[...portMtu.values()].map(({ device, port, mtu }): MergePatch => ({
      devices: { [device]: { ports: { [port]: { mtu } } } },
    })),
  ];
  const names = [...transportMtu.keys()].map((id) => design.transports[id]!.name);
  const mtu = Math.max(0, ...transportMtu.values(), ...[...portMtu.values()].map((port) => port.mtu));
  if (patches.length === 0 || mtu > MOST_TRANSPORT_MTU_BYTES) return [];
  const ports = portMtu.size === 0 ? [] : [counted(portMtu.size, 'WAN port', 'WAN ports')];
  return [
    {
      id: 'raise-path',
      label: `Raise ${names[0] ?? 'WAN ports'} to ${mtu}`,
      sentence: `States an MTU of ${mtu} bytes for ${[...names, ...ports].join(' and ')}; set it up on every hop and measure it before you rely on it.`,
      patch: joinPatches(design, patches),
    },
  ];
};
