import { tunnelSegments } from '../flood/tunnel-segments.ts';
import type { ElementRef } from '../model/design.ts';
import type { Protocol } from '../model/intent.ts';
import type { Id } from '../model/scalars.ts';
import { tunnelPath } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule, type Fault } from './define-rule.ts';

/** Protocols whose neighbours give each other up. */
const watchful: readonly Protocol[] = ['bfd', 'vrrp', 'ospf', 'is-is', 'pim'];
// RFC 9568 section 6.1: a gateway group waits for three advertisements; common practice for BFD as well.
const messagesInTimeout = 3;

interface Early {
  readonly segment: Id;
  readonly timeoutUs: number;
  /** What takes longer: a pair that fails over, or the unevenness of a transport between two of their messages. */
  readonly slower: ElementRef & { readonly collection: 'devices' | 'transports' };
  readonly takesUs: number;
  readonly leastUs: number;
}

/** What the segment's tunnels run over that is slower than its neighbours' patience: the slowest of it. */
const slowerThings = (
  network: Network,
  tunnels: readonly Id[],
): readonly Omit<Early, 'segment' | 'timeoutUs'>[] =>
  tunnels.flatMap((id) => {
    const { design } = network;
    const tunnel = entryOf(design.tunnels, id);
    const pairs = ends.flatMap((end): readonly Omit<Early, 'segment' | 'timeoutUs'>[] => {
      const deviceId = deviceOfTunnelEnd(network, tunnel, end);
      const device = entryOf(design.devices, deviceId);
      if (device.kind !== 'ha-pair' || device.failoverUs === undefined) return [];
      return [
        {
          slower: { collection: 'devices', id: deviceId },
          takesUs: device.failoverUs,
          leastUs: device.failoverUs,
        },
      ];
    });
    const path = tunnelPath(network, id);
    const jitterUs = path.ok ? entryOf(design.transports, path.transport).jitterUs : undefined;
    if (!path.ok || jitterUs === undefined) return pairs;
    return [
      ...pairs,
      {
        slower: { collection: 'transports', id: path.transport },
        takesUs: jitterUs,
        leastUs: messagesInTimeout * jitterUs,
      },
    ];
  });

const earlySegments = (network: Network): readonly Early[] => {
  const bySegment = new Map<Id, Id[]>();
  for (const [tunnel, segments] of tunnelSegments(network))
    for (const segment of segments) bySegment.set(segment, [...(bySegment.get(segment) ?? []), tunnel]);
  return [...bySegment].flatMap(([segment, tunnels]): readonly Early[] => {
    const { neighbourTimeoutUs: timeoutUs, protocols } = entryOf(network.design.segments, segment);
    if (timeoutUs === undefined || !protocols?.some((each) => watchful.includes(each))) return [];
    const [worst] = slowerThings(network, tunnels)
      .filter(({ leastUs }) => timeoutUs <= leastUs)
      .sort((a, b) => b.leastUs - a.leastUs || (a.slower.id < b.slower.id ? -1 : 1));
    return worst === undefined ? [] : [{ segment, timeoutUs, ...worst }];
  });
};

const timeText = (us: number): string =>
  us >= 1_000_000 ? `${Number((us / 1_000_000).toFixed(1))} s` : `${Number((us / 1000).toFixed(1))} ms`;

const messages = {
  failover: {
    words: 'neighbours too hasty',
    sentence: (v: {
      readonly segment: string;
      readonly timeout: string;
      readonly slower: string;
      readonly takes: string;
    }) =>
      `Neighbours on segment ${v.segment} give up after ${v.timeout}, ${v.slower} fails over in ${v.takes}`,
  },
  jitter: {
    words: 'neighbours too hasty',
    sentence: (v: {
      readonly segment: string;
      readonly timeout: string;
      readonly slower: string;
      readonly takes: string;
    }) =>
      `Neighbours on segment ${v.segment} give up after ${v.timeout}, ${v.slower} is uneven by up to ${v.takes}`,
    why: 'A neighbour is given up after about three messages of it are missed. On a transport whose delay varies by as much as lies between two of them, late ones count as missed.',
    seen: 'Neighbours go down and come back within a second in busy hours; gateway groups change hands for no reason.',
  },
};

export const neighboursGiveUpEarly = defineRule({
  id: 'neighbours-give-up-early',
  title: 'Neighbours on a segment wait longer than what carries it may pause',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'While a pair fails over nothing crosses its tunnels. Neighbours that give each other up sooner turn a pause that nobody would have noticed into a change of routes or of the active gateway.',
  seen: 'With every failover of the pair routing changes, too, or two gateways are active for a moment.',
  sources: [
    { document: 'RFC 5880', clause: 'section 6.8.4' },
    { document: 'RFC 9568', clause: 'section 2.5' },
  ],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    return earlySegments(network).map(({ segment, timeoutUs, slower, takesUs }): Fault<typeof messages> => {
      const ref: ElementRef = { collection: 'segments', id: segment };
      const isPair = slower.collection === 'devices';
      return {
        message: isPair ? 'failover' : 'jitter',
        values: {
          segment: entryOf(design.segments, segment).letter,
          timeout: timeText(timeoutUs),
          slower: entryOf<{ readonly name: string }>(design[slower.collection], slower.id).name,
          takes: timeText(takesUs),
        },
        elements: [ref, slower],
        identity: [segment],
        properties: [
          { ref, path: ['neighbourTimeoutUs'] },
          { ref: slower, path: [isPair ? 'failoverUs' : 'jitterUs'] },
        ],
        basis: [timeoutUs, takesUs, slower.id],
      };
    });
  },
  fixes: (fault, network) => {
    const found = earlySegments(network).find(({ segment }) => segment === fault.identity?.[0]);
    if (found === undefined) return [];
    // Half as long again, so that a pause of just that length is outlived.
    const neighbourTimeoutUs = Math.ceil((found.leastUs * 1.5) / 1000) * 1000;
    return [
      {
        id: 'wait-longer',
        label: `Wait ${timeText(neighbourTimeoutUs)}`,
        sentence: `States that neighbours on segment ${fault.values.segment} wait ${timeText(neighbourTimeoutUs)}; set their timers so.`,
        patch: { segments: { [found.segment]: { neighbourTimeoutUs } } },
      },
    ];
  },
});
