import { bpduReach } from '../flood/spanning-tree.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { siteNameOf } from './places.ts';
import { portLabel, portRef } from './port-label.ts';
import { devicePortOf, hearings } from './tree-ports.ts';
import { listed, namedOrCounted } from './wording.ts';

interface Tripped {
  readonly device: Id;
  readonly port: Id;
  readonly guard: 'guard' | 'root-guard';
  /** Devices whose BPDUs come in. */
  readonly senders: readonly Id[];
  readonly tunnels: readonly Id[];
  /** True where every BPDU that comes in has crossed the overlay. */
  readonly isRemote: boolean;
}

const trippedGuards = (network: Network): readonly Tripped[] => {
  const listeners = bpduReach(network);
  const byPort = new Map<string, Tripped>();
  for (const { at, from, tunnels, hearsBetter } of hearings(listeners)) {
    const guarded = devicePortOf(network, at);
    const guard = guarded?.facts.bpdus;
    if (guarded === undefined || (guard !== 'guard' && !(guard === 'root-guard' && hearsBetter))) continue;
    const key = `${guarded.device} ${guarded.port}`;
    const before = byPort.get(key);
    byPort.set(key, {
      device: guarded.device,
      port: guarded.port,
      guard,
      senders: [...new Set([...(before?.senders ?? []), listeners[from.bridge]!.place.device])].sort(),
      tunnels: [...new Set([...(before?.tunnels ?? []), ...tunnels])].sort(),
      isRemote: (before?.isRemote ?? true) && tunnels.length > 0,
    });
  }
  return [...byPort.values()];
};

export const portGuardTrips = defineRule({
  id: 'port-guard-trips',
  title: 'A port with BPDU guard or root guard hears no BPDU that trips it',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'BPDU guard shuts a port at the first BPDU, root guard blocks it while a better root is heard. Meant for the ports of hosts, it lets another bridge’s spanning tree, here or at a far site, decide about this port.',
  seen: 'The port goes down, or blocks, when the cable or the tunnel comes up; whoever clears it sees it go down again a moment later.',
  sources: ['common practice, no source'],
  messages: {
    guard: {
      words: 'guard shuts port',
      sentence: (v: { readonly port: string; readonly senders: string }) =>
        `BPDU guard shuts ${v.port}: BPDUs of ${v.senders} come in there`,
    },
    rootGuard: {
      words: 'root guard blocks',
      sentence: (v: { readonly port: string; readonly senders: string }) =>
        `Root guard blocks ${v.port}: ${v.senders} has a better root there`,
    },
  },
  check: (network) => {
    const { design } = network;
    return trippedGuards(network).map(({ device, port, guard, senders, tunnels }) => {
      const ref = portRef(device, port);
      return {
        message: guard === 'guard' ? ('guard' as const) : ('rootGuard' as const),
        values: {
          port: portLabel(design, device, port),
          senders: namedOrCounted(
            senders.map((id) => `${entryOf(design.devices, id).name} at ${siteNameOf(design, id)}`),
            'bridges',
          ),
        },
        elements: [
          ref,
          ...senders.map((id) => ({ collection: 'devices' as const, id })),
          ...tunnels.map((id) => ({ collection: 'tunnels' as const, id })),
        ],
        identity: [device, port],
        properties: [{ ref, path: ['bpdus'] }],
        basis: [guard, ...senders],
        ...(guard === 'guard'
          ? {
              severity: 'blocking' as const,
              severityReason: 'All that is behind the port is cut off with the first BPDU.',
            }
          : {}),
      };
    });
  },
  fixes: (fault, network) => {
    const found = trippedGuards(network).find(
      ({ device, port }) => device === fault.identity?.[0] && port === fault.identity[1],
    );
    if (found === undefined) return [];
    const { device, port, isRemote } = found;
    const label = portLabel(network.design, device, port);
    const patch = (bpdus: 'filter' | null) => ({ devices: { [device]: { ports: { [port]: { bpdus } } } } });
    const filter: Fix = {
      id: 'filter',
      label: 'Filter BPDUs there',
      sentence: `Lets ${label} neither send nor take BPDUs, so that the trees on both sides of the overlay stay apart.`,
      patch: patch('filter'),
    };
    return [
      ...(isRemote ? [filter] : []),
      {
        id: 'unguard',
        label: 'Take the guard off',
        sentence: `Lets ${label} take part in the spanning tree of ${listed(found.senders.map((id) => entryOf(network.design.devices, id).name))}.`,
        patch: patch(null),
      },
    ];
  },
});
