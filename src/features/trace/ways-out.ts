import type { Design } from '../../engine/model/design.ts';
import type { DropReason, Trace } from '../../engine/trace/trace.ts';
import type { WhatFits } from '../../engine/trace/what-fits.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

const named = (
  design: Design,
  collection: 'devices' | 'transports' | 'forwarders' | 'tunnels',
  id: string,
): string => nameOf(design, { collection, id });

const waysOf = (
  design: Design,
  reason: DropReason,
  trace: Trace,
  fits: WhatFits | undefined,
): readonly string[] => {
  switch (reason.code) {
    case 'oversize': {
      const transport = trace.steps
        .find(({ verdict }) => verdict?.code === 'dropped' && verdict.reason === reason)
        ?.elements.find(({ collection }) => collection === 'transports');
      const largest = Math.min(reason.largestBytes, fits?.largestBytes ?? Infinity);
      return [
        // RFC 2132 section 5.1.
        ...(largest > 0 ? [`Hosts at MTU ${largest}, by DHCP option 26`] : []),
        ...(transport === undefined
          ? []
          : [
              `${named(design, 'transports', transport.id)} and its WAN ports at ${reason.packetBytes} or more`,
            ]),
        ...(fits?.tcpMssBytes === undefined
          ? []
          : [`MSS ${fits.tcpMssBytes} on the hosts themselves, TCP only`]),
      ];
    }
    case 'oversize-frame':
      return [
        `Port MTU of ${reason.packetBytes} or more at ${nameOf(design, { collection: 'devices', id: reason.device, port: reason.port })}`,
        `Hosts at MTU ${reason.mtuBytes}`,
      ];
    case 'exceeds-own-mtu':
      return [
        `Packets of ${reason.mtuBytes} B at most`,
        'DF clear: the host then cuts it itself',
        `An MTU of ${reason.packetBytes} on the host, if the whole path carries it`,
      ];
    case 'no-such-vni':
      return [`One VNI at both ends of ${named(design, 'tunnels', reason.tunnel)}`];
    case 'no-such-udp-port':
      return [`One UDP port at both ends of ${named(design, 'tunnels', reason.tunnel)}`];
    case 'filter':
      return [`A rule in ${named(design, 'forwarders', reason.forwarder)} that permits it, both ways`];
    case 'multicast-dropped':
      return [`Multicast flooded by ${named(design, 'forwarders', reason.forwarder)} instead of dropped`];
    case 'hop-limit-zero':
      return [
        `A gateway that leaves the TTL of bridged multicast alone at ${named(design, 'devices', reason.device)}`,
        'A sender that starts with a higher TTL, where its protocol lets it',
      ];
    case 'hop-limit-required':
      return [`TTL ${reason.requires} left as it is by every device on the way`];
    case 'reserved-group':
      return [
        `${named(design, 'devices', reason.device)} set to forward it, where its profile says it can`,
        'The protocol kept inside the site',
      ];
    case 'vlan-not-allowed':
      return [
        `VLAN ${reason.vlan} let through at ${nameOf(design, { collection: 'devices', id: reason.device, port: reason.port })}`,
      ];
    case 'port-shut':
      return [
        `The port opened: ${nameOf(design, { collection: 'devices', id: reason.device, port: reason.port })}`,
      ];
    case 'not-cabled':
      return [`A cable from ${named(design, 'devices', reason.device)}`];
    case 'transport-filters':
      return [
        reason.filter === 'fragments'
          ? `Packets that need no cutting, or ${named(design, 'transports', reason.transport)} without this filter`
          : `UDP 4789 permitted by ${named(design, 'transports', reason.transport)}, or the tunnel inside IPsec`,
      ];
    default:
      return [];
  }
};

/** What would get the frame through, the least effort first; nothing for what ends as it should. */
export const waysOut = (design: Design, trace: Trace, fits: WhatFits | undefined): readonly string[] => {
  if (trace.storm !== undefined)
    return ['One isolation group for the tunnels of a full mesh', 'One link of the cycle taken out'];
  const cause = trace.steps.find(({ verdict }) => verdict?.code === 'dropped' && !verdict.byDesign)?.verdict;
  return cause?.code === 'dropped' ? waysOf(design, cause.reason, trace, fits) : [];
};
