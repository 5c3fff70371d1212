import { VXLAN_UDP_PORT } from '../reference/vxlan.ts';
import { defineRule, type Fault } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { tunnelPlaces } from './places.ts';

const messages = {
  differ: {
    words: 'UDP ports differ',
    sentence: (v: {
      readonly portA: number;
      readonly placeA: string;
      readonly portB: number;
      readonly placeB: string;
    }) => `UDP port ${v.portA} at ${v.placeA}, ${v.portB} at ${v.placeB}`,
  },
  unstated: {
    words: 'UDP port unstated',
    sentence: (v: { readonly port: number; readonly place: string; readonly other: string }) =>
      `UDP port ${v.port} at ${v.place}, not stated at ${v.other}`,
    why: 'Equipment has one of two defaults, the assigned port or an older one. Beside an end that uses another than the assigned port, the default is most likely wrong.',
  },
};

export const tunnelUdpPortMismatch = defineRule({
  id: 'tunnel-udp-port-mismatch',
  title: 'Both ends of a tunnel use the same UDP port',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'gateways', 'sites'],
  why: 'An end takes VXLAN out of UDP only on its own port; packets to another port are answered with port unreachable or dropped.',
  seen: 'The association is up and pings between the endpoints pass. VXLAN packets arrive, and the far gateway answers them with port unreachable or says nothing.',
  sources: [{ document: 'RFC 7348', clause: 'section 5' }],
  messages,
  check: ({ design }) =>
    Object.entries(design.tunnels).flatMap(([id, tunnel]): readonly Fault<typeof messages>[] => {
      const { udpPort: portA } = tunnel.a;
      const { udpPort: portB } = tunnel.b;
      if (portA === portB) return [];
      const places = tunnelPlaces(design, tunnel);
      const ref = { collection: 'tunnels', id } as const;
      if (portA === undefined || portB === undefined) {
        const port = (portA ?? portB)!;
        if (port === VXLAN_UDP_PORT) return [];
        const [place, other] = portB === undefined ? [places.a, places.b] : [places.b, places.a];
        return [
          {
            message: 'unstated',
            values: { port, place, other },
            elements: [ref],
            properties: [{ ref, path: [portB === undefined ? 'b' : 'a', 'udpPort'] }],
            basis: [port],
            severity: 'advisory',
            severityReason: 'The other end may be set up right; the design doesn’t say so.',
          },
        ];
      }
      return [
        {
          message: 'differ',
          values: { portA, placeA: places.a, portB, placeB: places.b },
          elements: [ref],
          properties: [
            { ref, path: ['a', 'udpPort'] },
            { ref, path: ['b', 'udpPort'] },
          ],
          basis: [portA, portB],
          mark: { kind: 'cut', tunnel: id },
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const id = fault.elements[0]!.id;
    const { name } = design.tunnels[id]!;
    if (fault.message === 'unstated') {
      const { port: udpPort, other } = fault.values;
      return [
        {
          id: 'same',
          label: `Set ${other} to ${udpPort}`,
          sentence: `Sets the UDP port of ${name} at ${other} to ${udpPort}, as at the other end.`,
          patch: { tunnels: { [id]: { a: { udpPort }, b: { udpPort } } } },
        },
      ];
    }
    const { portA, portB, placeA, placeB } = fault.values;
    const set = (end: 'a' | 'b', udpPort: number, place: string): Fix => ({
      id: `set-${end}`,
      label: `Set ${place} to ${udpPort}`,
      sentence: `Sets the UDP port of ${name} at ${place} to ${udpPort}, as at the other end.`,
      patch: { tunnels: { [id]: { [end]: { udpPort } } } },
    });
    const toB = set('b', portA, placeB);
    const toA = set('a', portB, placeA);
    if (portA === VXLAN_UDP_PORT) return [toB, toA];
    if (portB === VXLAN_UDP_PORT) return [toA, toB];
    const udpPort = VXLAN_UDP_PORT;
    return [
      {
        id: 'set-both',
        label: `Set both ends to ${udpPort}`,
        sentence: `Sets the UDP port of ${name} to ${udpPort}, the one assigned to VXLAN, at both ends.`,
        patch: { tunnels: { [id]: { a: { udpPort }, b: { udpPort } } } },
      },
      toB,
      toA,
    ];
  },
});
