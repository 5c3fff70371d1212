import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { plainAddress } from './endpoint-addresses.ts';
import {
  gatewayPlaces,
  segmentGatewayFacts,
  segmentGateways,
  type SegmentGateway,
} from './segment-gateways.ts';
import { listed } from './wording.ts';

/** One address of a segment that a gateway has and somebody else, too. */
interface Shared {
  readonly segment: Id;
  readonly address: string;
  readonly gateways: readonly SegmentGateway[];
  readonly hosts: readonly Id[];
}

const sharedAddresses = (network: Network): readonly Shared[] => {
  const { design } = network;
  return [...segmentGateways(network)].flatMap(([segment, gateways]) => {
    const byAddress = new Map<string, { gateways: SegmentGateway[]; hosts: Id[] }>();
    for (const each of gateways)
      for (const address of new Set((each.gateway.addresses ?? []).map(plainAddress))) {
        const owners = byAddress.get(address) ?? { gateways: [], hosts: [] };
        owners.gateways.push(each);
        byAddress.set(address, owners);
      }
    for (const host of network.hostsBySegment.get(segment) ?? []) {
      const device = entryOf(design.devices, host);
      if (device.kind === 'host')
        for (const address of new Set((device.addresses ?? []).map(plainAddress)))
          byAddress.get(address)?.hosts.push(host);
    }
    return [...byAddress]
      .filter(([, owners]) => owners.gateways.length + owners.hosts.length > 1)
      .map(([address, owners]): Shared => ({ segment, address, ...owners }));
  });
};

const messages = {
  gateways: {
    words: 'gateway address twice',
    sentence: (v: { readonly places: string; readonly address: string }) =>
      `${v.places} share gateway address ${v.address}`,
  },
  host: {
    words: 'gateway address twice',
    sentence: (v: { readonly hosts: string; readonly address: string; readonly verb: string }) =>
      `${v.hosts} ${v.verb} the gateway’s address ${v.address}`,
  },
};

export const gatewayAddressDuplicate = defineRule({
  id: 'gateway-address-duplicate',
  title: 'A gateway’s own address is its alone on the segment',
  severity: 'blocking',
  looksAt: [...segmentGatewayFacts, 'hosts'],
  why: 'Both answer to ARP for the address, and each host believes whoever answered last. Two gateways that shall share one address need a first-hop redundancy group, with an address of its own for each.',
  seen: 'Connections out of the segment break and heal every few minutes; hosts log that an address is in use twice.',
  sources: [{ document: 'RFC 5227', clause: 'section 2.4' }],
  messages,
  check: (network): readonly Fault<typeof messages>[] =>
    sharedAddresses(network).map(({ segment, address, gateways, hosts }): Fault<typeof messages> => {
      const { design } = network;
      const forwarders = gateways.map(({ forwarder }): ElementRef => ({
        collection: 'forwarders',
        id: forwarder,
      }));
      const owners = hosts.map((id): ElementRef => ({ collection: 'devices', id }));
      const body = {
        elements: [...forwarders, ...owners, { collection: 'segments' as const, id: segment }],
        identity: [segment, ...gateways.map(({ forwarder }) => forwarder), ...hosts],
        properties: [
          ...forwarders.map((ref) => ({ ref, path: ['gateway', 'addresses'] })),
          ...owners.map((ref) => ({ ref, path: ['addresses'] })),
        ],
        basis: [address],
      };
      const places = gatewayPlaces(network, gateways);
      return gateways.length > 1
        ? { message: 'gateways' as const, values: { places: listed(places), address }, ...body }
        : {
            message: 'host' as const,
            values: {
              hosts: listed(hosts.map((id) => entryOf(design.devices, id).name)),
              verb: hosts.length === 1 ? 'has' : 'have',
              address,
            },
            ...body,
          };
    }),
  fixes: (fault, network) => {
    const found = sharedAddresses(network).find(
      ({ segment, address, gateways, hosts }) =>
        address === fault.values.address &&
        [segment, ...gateways.map(({ forwarder }) => forwarder), ...hosts].join(' ') ===
          fault.identity?.join(' '),
    );
    if (found === undefined || found.hosts.length > 0) return [];
    const places = gatewayPlaces(network, found.gateways);
    return found.gateways.map((kept, i) => ({
      id: `keep-${kept.forwarder}`,
      label: `Leave it to ${places[i]!}`,
      sentence: `Takes ${found.address} from ${listed(places.filter((_place, k) => k !== i))}.`,
      patch: {
        forwarders: Object.fromEntries(
          found.gateways
            .filter((other) => other !== kept)
            .map(({ forwarder, gateway }) => {
              const left = (gateway.addresses ?? []).filter((each) => plainAddress(each) !== found.address);
              return [forwarder, { gateway: { addresses: left.length === 0 ? null : left } }];
            }),
        ),
      },
    }));
  },
});
