import { expectedForwarding } from '../flood/expected-forwarding.ts';
import { portKey, type Network } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { portLabel } from './port-label.ts';
import { counted } from './wording.ts';

interface LimitedPort {
  readonly device: string;
  readonly port: string;
  readonly limit: number;
}

const limitedPorts = ({ design, deviceIds }: Network): readonly LimitedPort[] =>
  deviceIds.flatMap((device) =>
    Object.keys(design.devices[device]!.ports)
      .sort()
      .flatMap((port) => {
        const limit = design.devices[device]!.ports[port]!.macLimit;
        return limit === undefined ? [] : [{ device, port, limit }];
      }),
  );

/** Hosts of the design whose MAC addresses the port learns: those behind a gateway's circuits, or plugged into a switch's port. */
const hostsBehind = (network: Network, { device, port }: LimitedPort): ReadonlySet<string> => {
  const { design } = network;
  const hosts = new Set<string>();
  for (const { forwarder, id, circuit } of network.circuitsByPort.get(portKey(device, port)) ?? []) {
    if (circuit.kind !== 'port') continue;
    const learned = expectedForwarding(network, forwarder).find((each) => each.circuit === id);
    for (const host of learned?.hosts ?? []) hosts.add(host);
  }
  for (const { cable, end } of network.cablesByPort.get(portKey(device, port)) ?? []) {
    const link = design.links[cable]!;
    if (link.kind !== 'cable') continue;
    const far = link[end === 'a' ? 'b' : 'a'].device;
    if (design.devices[far]!.kind === 'host') hosts.add(far);
  }
  return hosts;
};

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
    return limitedPorts(network).flatMap((each) => {
      const hosts = hostsBehind(network, each).size;
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
