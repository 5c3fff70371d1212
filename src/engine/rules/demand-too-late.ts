import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { tunnelPath } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { DemandLoad } from '../load/load-of.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { demandName, loadFacts, loadReport } from './load-report.ts';

const messages = {
  late: {
    words: 'latency too high',
    sentence: (v: { readonly demand: string; readonly takes: string; readonly allowed: string }) =>
      `${v.demand} takes ${v.takes} one way, ${v.allowed} are allowed`,
  },
  unknown: {
    words: 'latency unknown',
    sentence: (v: { readonly transport: string }) => `The latency of ${v.transport} is not known`,
    why: 'A demand that crosses the transport says how late its packets may be. Without the latency nobody can say whether it holds; half the time of a ping between the two outside addresses will do.',
    seen: 'Whether the application bears the distance is found out on its first day.',
  },
};

const inMilliseconds = (us: number): string => `${Number((us / 1000).toFixed(1))} ms`;

const tunnelsOf = ({ forward, reverse }: DemandLoad): readonly Id[] => [
  ...new Set(
    [forward, reverse].flatMap(({ direction }) =>
      direction.state === 'carried'
        ? direction.hops.flatMap(({ crossing }) => (crossing.collection === 'tunnels' ? [crossing.id] : []))
        : [],
    ),
  ),
];

const lateFaults = (network: Network, demands: readonly DemandLoad[]): readonly Fault<typeof messages>[] =>
  demands.flatMap((load): readonly Fault<typeof messages>[] => {
    const { design } = network;
    const { latencyAllowedUs } = entryOf(design.demands, load.demand);
    const takesUs = Math.max(
      ...[load.forward, load.reverse].map(({ direction }) =>
        direction.state === 'carried' ? (direction.latencyUs ?? 0) : 0,
      ),
    );
    if (latencyAllowedUs === undefined || takesUs <= latencyAllowedUs) return [];
    const ref: ElementRef = { collection: 'demands', id: load.demand };
    return [
      {
        message: 'late',
        values: {
          demand: demandName(design, load.demand),
          takes: inMilliseconds(takesUs),
          allowed: inMilliseconds(latencyAllowedUs),
        },
        elements: [...tunnelsOf(load).map((id): ElementRef => ({ collection: 'tunnels', id })), ref],
        identity: [load.demand],
        properties: [{ ref, path: ['latencyAllowedUs'] }],
        basis: [takesUs, latencyAllowedUs],
      },
    ];
  });

/** Transports of unknown latency, with the demands that allow only so much of it. */
const unknownFaults = (
  network: Network,
  demands: readonly DemandLoad[],
): readonly Fault<typeof messages>[] => {
  const { design } = network;
  const byTransport = new Map<Id, Id[]>();
  for (const load of demands) {
    if (entryOf(design.demands, load.demand).latencyAllowedUs === undefined) continue;
    const transports = tunnelsOf(load).flatMap((tunnel) => {
      const path = tunnelPath(network, tunnel);
      return path.ok && entryOf(design.transports, path.transport).latencyUs === undefined
        ? [path.transport]
        : [];
    });
    for (const id of new Set(transports)) byTransport.set(id, [...(byTransport.get(id) ?? []), load.demand]);
  }
  return [...byTransport].map(([id, concerned]): Fault<typeof messages> => {
    const ref: ElementRef = { collection: 'transports', id };
    return {
      message: 'unknown',
      values: { transport: entryOf(design.transports, id).name },
      elements: [ref, ...concerned.map((demand): ElementRef => ({ collection: 'demands', id: demand }))],
      identity: ['transport', id],
      properties: [{ ref, path: ['latencyUs'] }],
      severity: 'advisory',
      severityReason: 'A fact is missing; nothing is known to be wrong.',
    };
  });
};

export const demandTooLate = defineRule({
  id: 'demand-too-late',
  title: 'Packets of every demand arrive in the time that it allows',
  severity: 'blocking',
  looksAt: loadFacts,
  why: 'No bandwidth makes up for distance: each turn of question and answer waits for the way there and back.',
  seen: 'The application reports timeouts or lost synchronisation, while pings work and lines are idle.',
  sources: ['common practice, no source'],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const demands = loadReport(network)?.demands ?? [];
    return [...lateFaults(network, demands), ...unknownFaults(network, demands)];
  },
});
