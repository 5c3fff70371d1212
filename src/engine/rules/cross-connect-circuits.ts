import type { Fix } from './finding.ts';
import { rankAtEnd } from '../model/rank.ts';
import { defineRule } from './define-rule.ts';
import { siteNameOf } from './places.ts';
import { counted } from './wording.ts';

export const crossConnectCircuits = defineRule({
  id: 'cross-connect-circuits',
  title: 'A cross-connect joins exactly one port and one tunnel',
  severity: 'blocking',
  looksAt: ['forwarders', 'gateways', 'sites', 'tunnels', 'endpoints'],
  why: 'A cross-connect learns no addresses: it hands every frame from its one side to its other. With more or fewer circuits there is no other side to hand it to.',
  seen: 'The equipment refuses the setting, or frames of the surplus circuit go nowhere.',
  sources: [{ document: 'RFC 4664', clause: 'section 3.1.1' }],
  messages: {
    wrong: {
      words: 'not one-to-one',
      sentence: (v: {
        readonly forwarder: string;
        readonly place: string;
        readonly ports: string;
        readonly tunnels: string;
      }) => `${v.forwarder} at ${v.place} joins ${v.ports} and ${v.tunnels}`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.forwarders).flatMap(([id, { kind, name, device, circuits }]) => {
      if (kind !== 'cross-connect') return [];
      const count = { port: 0, tunnel: 0 };
      for (const circuit of Object.values(circuits)) count[circuit.kind] += 1;
      if (count.port === 1 && count.tunnel === 1) return [];
      const ref = { collection: 'forwarders', id } as const;
      return [
        {
          message: 'wrong',
          values: {
            forwarder: name,
            place: siteNameOf(design, device),
            ports: counted(count.port, 'port', 'ports'),
            tunnels: counted(count.tunnel, 'tunnel', 'tunnels'),
          },
          elements: [ref],
          properties: [{ ref, path: ['circuits'] }],
          basis: [count.port, count.tunnel],
        },
      ];
    }),
  fixes: (fault, network) => {
    const { design } = network;
    const id = fault.elements[0]!.id;
    const { device, circuits, name } = design.forwarders[id]!;
    const kinds = Object.values(circuits).map(({ kind }) => kind);
    const asBridge: Fix = {
      id: 'make-bridge',
      label: 'Make it a bridge',
      sentence: `Turns ${name} into a bridge, which joins any number of circuits and filters nothing.`,
      patch: { forwarders: { [id]: { kind: 'bridge', policy: null } } },
    };
    if (kinds.length > 2 || (kinds.length === 2 && kinds[0] === kinds[1])) return [asBridge];
    if (kinds.length !== 1 || kinds[0] !== 'port') return [];
    // One port alone: a tunnel of this device that no forwarder claims is the likely other side.
    return (network.tunnelsByDevice.get(device) ?? [])
      .filter(
        ({ tunnel }) => !(network.circuitsByTunnel.get(tunnel) ?? []).some((at) => at.device === device),
      )
      .map(({ tunnel }): Fix => ({
        id: `join-${tunnel}`,
        label: `Join ${design.tunnels[tunnel]!.name}`,
        sentence: `Joins ${design.tunnels[tunnel]!.name}, which no forwarder of ${design.devices[device]!.name} uses yet.`,
        patch: {
          forwarders: {
            [id]: { circuits: { [tunnel]: { kind: 'tunnel', rank: rankAtEnd(circuits), tunnel } } },
          },
        },
      }));
  },
});
