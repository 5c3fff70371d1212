import type { Barrier } from '../flood/barrier.ts';
import type { FrameClass } from '../flood/frame-classes.ts';
import type { DesignFacts } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { siteNameOf } from './places.ts';
import { portLabel } from './port-label.ts';
import { listed } from './wording.ts';

const frameNames: { readonly [frame in FrameClass]: string } = {
  arp: 'ARP requests',
  ipv4: 'IPv4 broadcasts',
  ipv6: 'IPv6 neighbour discovery',
  other: 'broadcasts',
};

/** The plugs of a cable that are in shut ports. */
export const shutPlugs = (
  design: DesignFacts,
  id: string,
): readonly { readonly device: string; readonly port: string }[] => {
  const cable = entryOf(design.links, id);
  return cable.kind === 'cable'
    ? [cable.a, cable.b].filter(
        ({ device, port }) => entryOf(design.devices, device).ports[port]!.shut === true,
      )
    : [];
};

const tagged = (vlan: number): string => (vlan === 0 ? 'untagged frames' : `frames with tag ${vlan}`);

const shutWords = (design: DesignFacts, cable: string): string => {
  const ports = shutPlugs(design, cable).map(({ device, port }) => portLabel(design, device, port));
  return `${listed(ports)} ${ports.length === 1 ? 'is' : 'are'} shut`;
};

/** Where frames end and why, as the first half of a sentence. */
export const endingWords = (design: DesignFacts, barrier: Barrier, frame: FrameClass): string => {
  const device = (id: string): string => entryOf(design.devices, id).name;
  const tunnel = (id: string): string => entryOf(design.tunnels, id).name;
  const forwarder = (id: string): string => {
    const { name, device: at } = entryOf(design.forwarders, id);
    return `${name} at ${siteNameOf(design, at)}`;
  };
  switch (barrier.code) {
    case 'not-cabled':
      return `${device(barrier.device)} is not cabled`;
    case 'port-shut':
      return shutWords(design, barrier.cable);
    case 'standby':
      return `${portLabel(design, barrier.device, barrier.port, barrier.member)} is on the member that stands by`;
    case 'vlan-not-allowed':
      return `${portLabel(design, barrier.device, barrier.port)} drops ${tagged(barrier.vlan)}`;
    case 'other-access-vlan':
      return `${portLabel(design, barrier.device, barrier.port)} is in VLAN ${barrier.has}, not ${barrier.vlan}`;
    case 'tag-at-access-port':
      return `${portLabel(design, barrier.device, barrier.port)} is an access port and drops ${tagged(barrier.vlan)}`;
    case 'no-native-vlan':
      return `${portLabel(design, barrier.device, barrier.port)} drops untagged frames`;
    case 'no-circuit':
      return `no forwarder of ${device(barrier.device)} takes ${tagged(barrier.vlan)} at ${portLabel(design, barrier.device, barrier.port)}`;
    case 'tag-not-carried':
      return `a circuit of ${forwarder(barrier.forwarder)} can’t send ${tagged(barrier.vlan)}`;
    case 'isolation':
      return `isolation group ${barrier.group} of ${forwarder(barrier.forwarder)} keeps circuits apart`;
    case 'split-horizon':
      return `${forwarder(barrier.forwarder)} passes nothing between tunnels of one VNI`;
    case 'filter':
      return `${forwarder(barrier.forwarder)} lets no ${frameNames[frame]} pass`;
    case 'spanning-tree':
      return barrier.port === undefined
        ? `spanning tree blocks ${tunnel(barrier.tunnel!)} at ${device(barrier.device)}`
        : `spanning tree blocks ${portLabel(design, barrier.device, barrier.port)}, where the VLAN has its only way`;
    case 'tunnel-down':
      return `${tunnel(barrier.tunnel)} can’t come up`;
    case 'tunnel-unclaimed':
      return `no forwarder at ${siteNameOf(design, barrier.device)} holds ${tunnel(barrier.tunnel)}`;
    case 'tag-discarded':
      return `${device(barrier.device)} discards ${tagged(barrier.vlan)} from ${tunnel(barrier.tunnel)}`;
    case 'host-tag':
      return `${device(barrier.device)} takes no ${tagged(barrier.vlan)}`;
    case 'not-joined':
      return `nothing joins ${entryOf(design.sites, barrier.fromSite).name} and ${entryOf(design.sites, barrier.toSite).name}`;
  }
};
