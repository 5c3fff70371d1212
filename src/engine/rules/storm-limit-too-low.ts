import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { limitedPorts } from './hosts-behind-port.ts';
import { portLabel } from './port-label.ts';
import { counted } from './wording.ts';

// Common practice, no source: after a power cut every host asks for its neighbours about once a second; ten times that
// still stops a storm.
const broadcastsPerHost = 1;
const roomPerHost = 10;
const usualLimitPps = 500;

export const stormLimitTooLow = defineRule({
  id: 'storm-limit-too-low',
  title: 'A port’s storm limit leaves room for what its hosts send by right',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'Address resolution, leases and routing neighbours all live on broadcasts and multicasts. A limit below what the hosts send by right drops them like a storm.',
  seen: 'Hosts lose each other for seconds, most of all after a power cut when all ask at once; the port counts dropped broadcasts.',
  sources: ['common practice, no source'],
  messages: {
    low: {
      words: 'storm limit low',
      sentence: (v: { readonly limitPps: number; readonly port: string; readonly hosts: number }) =>
        `Storm limit ${v.limitPps}/s at ${v.port}, with ${counted(v.hosts, 'host', 'hosts')} behind it`,
    },
  },
  check: (network) => {
    const { design } = network;
    return limitedPorts(network, 'stormLimitPps').flatMap((each) => {
      const { hosts } = each;
      if (hosts * broadcastsPerHost <= each.limit) return [];
      const ref = { collection: 'devices', id: each.device, port: each.port } as const;
      return [
        {
          message: 'low',
          values: { limitPps: each.limit, port: portLabel(design, each.device, each.port), hosts },
          elements: [ref],
          properties: [{ ref, path: ['stormLimitPps'] }],
          basis: [each.limit, hosts],
        },
      ];
    });
  },
  fixes: ({ elements, values }) => {
    const { id, port } = elements[0]!;
    const stormLimitPps = Math.max(usualLimitPps, roomPerHost * values.hosts);
    return [
      {
        id: 'raise',
        label: `Set it to ${stormLimitPps}/s`,
        sentence: `Sets the storm limit of ${values.port} to ${stormLimitPps} packets per second.`,
        patch: { devices: { [id]: { ports: { [port!]: { stormLimitPps } } } } },
      },
    ];
  },
});
