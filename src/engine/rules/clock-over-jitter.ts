import type { Id } from '../model/scalars.ts';
import { tunnelPath } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';

interface Shaken {
  readonly segment: Id;
  readonly tunnel: Id;
  readonly transport: Id;
  readonly jitterUs: number;
}

/** Segments that carry precision time, with the most uneven transport that they cross. */
const shakenClocks = (network: Network): readonly Shaken[] => {
  const { design } = network;
  const worst = new Map<Id, Shaken>();
  for (const [tunnel, segments] of tunnelSegments(network))
    for (const segment of segments) {
      if (entryOf(design.segments, segment).protocols?.includes('ptp') !== true) continue;
      const path = tunnelPath(network, tunnel);
      if (!path.ok) continue;
      const { jitterUs } = entryOf(design.transports, path.transport);
      if (jitterUs === undefined || jitterUs <= (worst.get(segment)?.jitterUs ?? 0)) continue;
      worst.set(segment, { segment, tunnel, transport: path.transport, jitterUs });
    }
  return [...worst.values()];
};

const inMilliseconds = (us: number): string =>
  us < 1000 ? `${us} µs` : `${Number((us / 1000).toFixed(1))} ms`;

export const clockOverJitter = defineRule({
  id: 'clock-over-jitter',
  title: 'Clocks that must agree closely have a time source at their own site',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'A clock learns the time only as well as packets take equally long both ways. Encryption, queues and a WAN that differs by direction spoil that by far more than a microsecond, even where every packet arrives.',
  seen: 'Clocks follow, but wander by as much as the transport’s jitter; machines that need them closer report lost synchronisation.',
  sources: ['common practice, no source'],
  messages: {
    shaken: {
      words: 'clock over jitter',
      sentence: (v: { readonly segment: string; readonly transport: string; readonly jitter: string }) =>
        `PTP of segment ${v.segment} crosses ${v.transport}, jitter ${v.jitter}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return shakenClocks(network).map(({ segment, tunnel, transport, jitterUs }) => {
      const ref = { collection: 'segments' as const, id: segment };
      return {
        message: 'shaken',
        values: {
          segment: entryOf(design.segments, segment).letter,
          transport: entryOf(design.transports, transport).name,
          jitter: inMilliseconds(jitterUs),
        },
        elements: [
          ref,
          { collection: 'tunnels' as const, id: tunnel },
          { collection: 'transports' as const, id: transport },
        ],
        identity: [segment],
        properties: [
          { ref, path: ['protocols'] },
          { ref: { collection: 'transports' as const, id: transport }, path: ['jitterUs'] },
        ],
        basis: [transport, jitterUs],
        severityReason:
          'How close the clocks must be is not part of a design; closer than this jitter they can’t be.',
      };
    });
  },
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const { protocols = [], name } = entryOf(network.design.segments, id);
    return [
      {
        id: 'drop-need',
        label: 'Don’t promise PTP',
        sentence: `Takes precision time off what ${name} must carry; each site needs a time source of its own.`,
        patch: { segments: { [id]: { protocols: protocols.filter((each) => each !== 'ptp') } } },
      },
    ];
  },
});
