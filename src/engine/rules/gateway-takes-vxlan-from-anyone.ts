import { isGateway } from '../model/devices.ts';
import { defineRule } from './define-rule.ts';
import { isTrusted } from './trusted-transport.ts';
import { landingOf } from '../network/association-path.ts';

export const gatewayTakesVxlanFromAnyone = defineRule({
  id: 'gateway-takes-vxlan-from-anyone',
  title: 'Gateways take VXLAN from their peers only',
  severity: 'blocking',
  looksAt: ['gateways', 'landings', 'carriers'],
  why: 'VXLAN knows no passwords: anybody who sends to UDP 4789 with the right VNI puts frames into the segment, behind every firewall.',
  seen: 'Nothing on site; in a capture on the WAN port, VXLAN from addresses that nobody knows.',
  sources: [{ document: 'RFC 7348', clause: 'section 7' }],
  messages: {
    open: {
      words: 'open to anyone',
      sentence: (v: { readonly gateway: string; readonly transport: string }) =>
        `${v.gateway} takes VXLAN from anyone on ${v.transport}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return network.deviceIds.flatMap((id) => {
      const device = design.devices[id]!;
      if (!isGateway(device) || device.settings?.vxlanFrom !== 'anyone') return [];
      const transport = (network.landingsByDevice.get(id) ?? [])
        .map((landing) => landingOf(network, landing).transport)
        .sort()
        .find((each) => !isTrusted(design.transports[each]!));
      if (transport === undefined) return [];
      const ref = { collection: 'devices', id } as const;
      return [
        {
          message: 'open',
          values: { gateway: device.name, transport: design.transports[transport]!.name },
          elements: [ref, { collection: 'transports' as const, id: transport }],
          identity: [id],
          properties: [{ ref, path: ['settings', 'vxlanFrom'] }],
          basis: [transport],
        },
      ];
    });
  },
  fixes: ({ elements, values }) => [
    {
      id: 'peers',
      label: 'From peers only',
      sentence: `States that ${values.gateway} takes VXLAN from its peers only, which you must have set up.`,
      patch: { devices: { [elements[0]!.id]: { settings: { vxlanFrom: 'peers' } } } },
    },
  ],
});
