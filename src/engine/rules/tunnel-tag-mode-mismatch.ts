import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { tunnelPlaces } from './places.ts';
import { keepsTags, tagModeOf } from './tag-mode.ts';

/** True when frames enter the tunnel with their VLAN tag on, as the forwarders at this end are set up. */
const sendsTags = (network: Network, id: string, device: string): boolean =>
  (network.circuitsByTunnel.get(id) ?? [])
    .filter((at) => at.device === device)
    .some(({ forwarder }) =>
      (network.circuitsByForwarder.get(forwarder) ?? []).some(
        ({ circuit }) => circuit.kind === 'port' && keepsTags(circuit),
      ),
    );

export const tunnelTagModeMismatch = defineRule({
  id: 'tunnel-tag-mode-mismatch',
  title: 'Both ends of a tunnel treat inner VLAN tags alike',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'forwarders', 'gateways', 'sites'],
  why: 'Frames that one end sends with their VLAN tag are discarded by an end that expects none; frames whose tag is stripped lose their VLAN on the way to an end that expects it.',
  seen: 'Untagged frames cross, tagged ones vanish without a message, or come out in the wrong VLAN.',
  sources: [
    { document: 'RFC 7348', clause: 'section 6.1' },
    { document: 'RFC 8365', clause: 'section 5.1' },
  ],
  messages: {
    differ: {
      words: 'tag modes differ',
      sentence: (v: { readonly keeper: string; readonly stripper: string; readonly tunnel: string }) =>
        `Inner tags kept at ${v.keeper}, discarded at ${v.stripper}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.tunnels).flatMap(([id, tunnel]) => {
      const device = {
        a: deviceOfTunnelEnd(network, tunnel, 'a'),
        b: deviceOfTunnelEnd(network, tunnel, 'b'),
      };
      const keeper = ends.find((end) => tagModeOf(network, tunnel, end, device[end]) === 'keep');
      if (keeper === undefined) return [];
      const stripper = otherEnd(keeper);
      if (tagModeOf(network, tunnel, stripper, device[stripper]) === 'keep') return [];
      // As long as no tagged frame enters the tunnel the two modes do the same.
      if (!ends.some((end) => sendsTags(network, id, device[end]))) return [];
      const places = tunnelPlaces(design, tunnel);
      const ref = { collection: 'tunnels', id } as const;
      return [
        {
          message: 'differ',
          values: { tunnel: tunnel.name, keeper: places[keeper], stripper: places[stripper] },
          elements: [ref],
          properties: [
            { ref, path: ['a', 'innerTags'] },
            { ref, path: ['b', 'innerTags'] },
          ],
          basis: [keeper],
        },
      ];
    });
  },
  fixes: (fault, { design }) => {
    const id = fault.elements[0]!.id;
    const { keeper, stripper, tunnel } = fault.values;
    const strips = tunnelPlaces(design, design.tunnels[id]!).a === keeper ? 'b' : 'a';
    return [
      {
        id: 'keep',
        label: `Keep tags at ${stripper}`,
        sentence: `Lets ${tunnel} keep inner tags at ${stripper} too; tagged frames grow by 4 bytes.`,
        patch: { tunnels: { [id]: { [strips]: { innerTags: 'keep' } } } },
      },
    ];
  },
});
