import type { Network } from '../network/network.ts';
import { forwardingMembers, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';

/** Devices at the far ends of an endpoint's tunnels. */
const peersOf = (network: Network, endpoint: string): readonly string[] =>
  (network.tunnelsByEndpoint.get(endpoint) ?? []).map(
    ({ tunnel, end }) =>
      network.design.endpoints[network.design.tunnels[tunnel]![otherEnd(end)].endpoint]!.device,
  );

export const endpointOnOneMember = defineRule({
  id: 'endpoint-on-one-member',
  title: 'An HA pair’s endpoint belongs to the pair, or each member has its own tunnels',
  severity: 'blocking',
  looksAt: ['endpoints', 'tunnels', 'gateways'],
  why: 'When the other member takes over, the address to which the far ends send stays behind on the failed one, and every tunnel to it with it.',
  seen: 'All is well until the first failover; then the pair’s new active member is up and no site reaches it.',
  sources: [{ document: 'RFC 8014', clause: 'section 4.4' }],
  messages: {
    owned: {
      words: 'one member only',
      sentence: (v: { readonly endpoint: string; readonly member: string; readonly pair: string }) =>
        `${v.endpoint} belongs to ${v.member} alone and doesn’t fail over`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.endpoints).flatMap(([id, { name, device, member }]) => {
      const pair = design.devices[device]!;
      if (member === undefined || pair.kind !== 'ha-pair') return [];
      const twins = (network.endpointsByDevice.get(device) ?? []).filter(
        (other) => design.endpoints[other]!.member === (member === 1 ? 2 : 1),
      );
      const reachedOtherwise = new Set(twins.flatMap((twin) => peersOf(network, twin)));
      const peers = peersOf(network, id);
      if (peers.length === 0 || peers.every((peer) => reachedOtherwise.has(peer))) return [];
      const ref = { collection: 'endpoints', id } as const;
      return [
        {
          message: 'owned',
          values: { endpoint: name, member: pair.memberNames[member], pair: pair.name },
          elements: [ref, { collection: 'devices', id: device }],
          identity: [id],
          properties: [{ ref, path: ['member'] }],
          basis: [member],
          severityReason: forwardingMembers(pair).includes(member)
            ? 'Nothing is wrong until the pair fails over; then all its tunnels are down.'
            : 'That member stands by, so that its tunnels are down already.',
        },
      ];
    });
  },
  fixes: (fault) => {
    const { endpoint, pair } = fault.values;
    return [
      {
        id: 'share',
        label: `Give it to ${pair}`,
        sentence: `Lets ${endpoint} belong to ${pair} as a whole, so that it moves with the active role.`,
        patch: { endpoints: { [fault.elements[0]!.id]: { member: null } } },
      },
    ];
  },
});
