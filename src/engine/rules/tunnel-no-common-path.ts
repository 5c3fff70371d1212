import { bareTunnelPath } from '../network/association-path.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { noPathFixes, noPathMessages, sayNoPath } from './no-path.ts';
import { bareTunnelRunner } from './other-path.ts';
import { tunnelDevices } from './places.ts';

const messages = {
  ...noPathMessages,
  oneDevice: {
    words: 'one device only',
    sentence: (v: { readonly tunnel: string; readonly device: string }) =>
      `Both ends of ${v.tunnel} are on ${v.device}`,
  },
};

export const tunnelNoCommonPath = defineRule({
  id: 'tunnel-no-common-path',
  title: 'Both ends of a tunnel outside IPsec land on one transport with one address family',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'The endpoints have no way to each other, so that nothing crosses the tunnel.',
  seen: 'Pings between the endpoints fail, and hosts see their own site only.',
  sources: [{ document: 'RFC 7348', clause: 'section 4' }],
  messages,
  check: (network) =>
    Object.entries(network.design.tunnels).flatMap(([id, tunnel]): readonly Fault<typeof messages>[] => {
      if (tunnel.association !== undefined) return [];
      const devices = tunnelDevices(network.design, tunnel);
      const ref = { collection: 'tunnels', id } as const;
      const mark = { kind: 'cut', tunnel: id } as const;
      const endpoints = [
        { ref, path: ['a', 'endpoint'] },
        { ref, path: ['b', 'endpoint'] },
      ];
      if (devices.a === devices.b)
        return [
          {
            message: 'oneDevice',
            values: { tunnel: tunnel.name, device: network.design.devices[devices.a]!.name },
            elements: [ref],
            properties: endpoints,
            basis: [devices.a],
            mark,
          },
        ];
      const path = bareTunnelPath(network, id);
      if (path.ok) return [];
      return [
        {
          ...sayNoPath(network, bareTunnelRunner(network, id), path.reason),
          elements: [ref],
          properties: [
            { ref, path: ['a', 'via'] },
            { ref, path: ['b', 'via'] },
          ],
          basis: [JSON.stringify(path.reason)],
          mark,
        },
      ];
    }),
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const path = bareTunnelPath(network, id);
    return path.ok ? [] : noPathFixes(network, bareTunnelRunner(network, id), path.reason);
  },
});
