import { isGateway } from '../model/devices.ts';
import type { Protocol } from '../model/intent.ts';
import { segmentsByForwarder } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { protocolFrames } from './protocol-frames.ts';
import { countWord, listed } from './wording.ts';

// TTL 1: RFC 2328 appendix A.1 (OSPF), RFC 7761 section 4.9 (PIM), RFC 3376 section 4 (IGMP). TTL 255, checked on
// arrival: RFC 9568 section 5.1.1.3 (VRRP).
const sensitive: readonly Protocol[] = ['igmp', 'ospf', 'pim', 'vrrp'];

export const hopLimitLowered = defineRule({
  id: 'hop-limit-lowered',
  title: 'Nothing between the sites of a segment lowers the TTL of its packets',
  severity: 'blocking',
  looksAt: ['gateways', 'profiles', 'forwarders', 'segments'],
  why: 'Neighbours of these protocols believe only packets that no router has handled: sent with a TTL of 1, which doesn’t survive, or of 255, which is checked.',
  seen: 'Neighbours see each other’s packets in a capture, with a TTL of 0 or 254, and still don’t come up.',
  sources: [
    { document: 'RFC 8014', clause: 'section 3.1.2' },
    { document: 'RFC 5082', clause: 'section 3' },
    { document: 'RFC 9568', clause: 'section 5.1.1.3' },
  ],
  messages: {
    lowered: {
      words: 'TTL lowered',
      sentence: (v: { readonly gateway: string; readonly protocols: string; readonly letters: string }) =>
        `${v.gateway} lowers the TTL of ${v.protocols} of segment ${v.letters}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return network.deviceIds.flatMap((id) => {
      const device = design.devices[id]!;
      if (!isGateway(device) || device.profile === undefined) return [];
      // A gateway that routes no multicast has no reason to touch its TTL.
      if (design.profiles[device.profile]!.multicastTtl !== 'lowered') return [];
      if (device.settings?.multicastRouting === false) return [];
      const segments = [
        ...new Set(
          (network.forwardersByDevice.get(id) ?? [])
            .filter((forwarder) =>
              (network.circuitsByForwarder.get(forwarder) ?? []).some(
                ({ circuit }) => circuit.kind === 'tunnel',
              ),
            )
            .flatMap((forwarder) => segmentsByForwarder(network).get(forwarder) ?? []),
        ),
      ]
        .filter((segment) => design.segments[segment]!.protocols?.some((each) => sensitive.includes(each)))
        .sort();
      if (segments.length === 0) return [];
      const protocols = sensitive.filter((each) =>
        segments.some((segment) => design.segments[segment]!.protocols?.includes(each)),
      );
      const ref = { collection: 'devices', id } as const;
      return [
        {
          message: 'lowered',
          values: {
            gateway: device.name,
            protocols:
              protocols.length > 2
                ? `${countWord(protocols.length)} protocols`
                : listed(protocols.map((each) => protocolFrames[each].name)),
            letters: listed(segments.map((segment) => design.segments[segment]!.letter)),
          },
          elements: [ref, ...segments.map((segment) => ({ collection: 'segments' as const, id: segment }))],
          identity: [id],
          properties: [
            { ref, path: ['settings', 'multicastRouting'] },
            { ref: { collection: 'profiles' as const, id: device.profile }, path: ['multicastTtl'] },
          ],
          basis: [...segments, ...protocols],
        },
      ];
    });
  },
  fixes: ({ elements, values }, { design }) => {
    const { id } = elements[0]!;
    if (design.devices[id]!.settings?.multicastRouting !== true) return [];
    return [
      {
        id: 'routing-off',
        label: 'Multicast routing off',
        sentence: `Turns multicast routing on ${values.gateway} off, so that its TTL stays; see that nothing else needs it.`,
        patch: { devices: { [id]: { settings: { multicastRouting: false } } } },
      },
    ];
  },
});
