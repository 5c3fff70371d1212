import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { limitedPorts } from './hosts-behind-port.ts';
import { portLabel } from './port-label.ts';
import { counted } from './wording.ts';

// Common practice, no source: room for half as many again.
const roomFor = (hosts: number): number => Math.ceil(1.5 * hosts);

export const macLimitTooLow = defineRule({
  id: 'mac-limit-too-low',
  title: 'A port’s MAC limit leaves room for the hosts behind it',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'The port takes no frame from a MAC address beyond its limit. Which hosts that meets depends on who spoke first.',
  seen: 'After a restart some hosts are cut off, each time others; the port counts violations.',
  sources: [
    { document: 'RFC 4762', clause: 'section 14' },
    { document: 'RFC 6820', clause: 'section 7.3' },
  ],
  messages: {
    low: {
      words: 'MAC limit low',
      sentence: (v: { readonly limit: number; readonly port: string; readonly hosts: number }) =>
        `MAC limit ${v.limit} at ${v.port}, with ${counted(v.hosts, 'host', 'hosts')} behind it`,
    },
  },
  check: (network) => {
    const { design } = network;
    return limitedPorts(network, 'macLimit').flatMap((each) => {
      const { hosts } = each;
      if (hosts <= each.limit) return [];
      const ref = { collection: 'devices', id: each.device, port: each.port } as const;
      return [
        {
          message: 'low',
          values: { limit: each.limit, port: portLabel(design, each.device, each.port), hosts },
          elements: [ref],
          properties: [{ ref, path: ['macLimit'] }],
          basis: [each.limit, hosts],
        },
      ];
    });
  },
  fixes: ({ elements, values }) => {
    const { id, port } = elements[0]!;
    const macLimit = roomFor(values.hosts);
    return [
      {
        id: 'raise',
        label: `Set it to ${macLimit}`,
        sentence: `Sets the MAC limit of ${values.port} to ${macLimit}, half as many again as the hosts behind it.`,
        patch: { devices: { [id]: { ports: { [port!]: { macLimit } } } } },
      },
    ];
  },
});
