import type { DemandWay } from '../load/load-of.ts';
import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { TCP_LARGEST_WINDOW_BYTES } from '../reference/tcp.ts';
import { defineRule } from './define-rule.ts';
import { demandName, loadFacts, loadReport, rateText } from './load-report.ts';

interface Limited {
  readonly demand: Id;
  readonly way: 'forwardBps' | 'reverseBps';
  readonly wantedBps: number;
  readonly flows: number;
  readonly perFlowBps: number;
  readonly by: 'loss' | 'window';
  readonly rttUs: number | undefined;
}

const roundTripUs = (...ways: readonly DemandWay[]): number | undefined =>
  ways.reduce<number | undefined>((sum, { direction }) => {
    const latencyUs = direction.state === 'carried' ? direction.latencyUs : undefined;
    return sum === undefined || latencyUs === undefined ? undefined : sum + latencyUs;
  }, 0);

/** Demands whose flows, lost packets and distance being what they are, can't reach what is asked of them; the worse way of each. */
const limitedDemands = (network: Network): readonly Limited[] =>
  (loadReport(network)?.demands ?? []).flatMap(({ demand, forward, reverse }): readonly Limited[] => {
    const entry = entryOf(network.design.demands, demand);
    const { flows } = entry;
    if (flows === undefined) return [];
    const ways = [
      { way: 'forwardBps' as const, at: forward },
      { way: 'reverseBps' as const, at: reverse },
    ].flatMap(({ way, at }): readonly Limited[] => {
      const wantedBps = entry[way];
      // The lowest ceiling comes first.
      const own = at.reachable?.oneFlow.find(({ kind }) => kind === 'loss' || kind === 'window');
      if (wantedBps === undefined || own === undefined || own.limitBps * flows >= wantedBps) return [];
      const by = own.kind === 'window' ? 'window' : 'loss';
      return [
        { demand, way, wantedBps, flows, perFlowBps: own.limitBps, by, rttUs: roundTripUs(forward, reverse) },
      ];
    });
    return ways.sort((a, b) => b.wantedBps / b.perFlowBps - a.wantedBps / a.perFlowBps).slice(0, 1);
  });

export const demandFlowLimited = defineRule({
  id: 'demand-flow-limited',
  title: 'No demand asks more of its flows than loss, window and distance let TCP reach',
  severity: 'degrading',
  looksAt: loadFacts,
  why: 'After each lost packet TCP halves its rate and needs many round trips to win it back. The farther and the lossier the way, the less a single flow reaches, whatever the line could carry.',
  seen: 'The line is half empty and the transfer slow; starting a second one beside it doubles the total.',
  sources: [
    { document: 'RFC 3819', clause: 'section 8.5.1' },
    { document: 'RFC 7323', clause: 'section 1.1' },
  ],
  messages: {
    limited: {
      words: 'flow too slow',
      sentence: (v: { readonly demand: string; readonly wanted: string; readonly could: string }) =>
        `${v.demand} needs ${v.wanted}, loss leaves TCP ${v.could}`,
    },
    window: {
      words: 'window too small',
      sentence: (v: { readonly demand: string; readonly wanted: string; readonly could: string }) =>
        `${v.demand} needs ${v.wanted}, its window leaves ${v.could}`,
      why: 'A sender may have one window underway and then waits for an answer, a whole round trip later: window divided by round trip is all that a flow reaches, at any bandwidth.',
      seen: 'The line is all but empty and nothing is lost; the same transfer is quick between neighbours.',
    },
  },
  check: (network) =>
    limitedDemands(network).map(({ demand, way, wantedBps, flows, perFlowBps, by }) => {
      const ref: ElementRef = { collection: 'demands', id: demand };
      return {
        message: by === 'window' ? ('window' as const) : ('limited' as const),
        values: {
          demand: demandName(network.design, demand),
          wanted: rateText(wantedBps),
          could: rateText(perFlowBps * flows),
        },
        elements: [ref],
        properties: [
          { ref, path: [way] },
          { ref, path: ['flows'] },
          ...(by === 'window' ? [{ ref, path: ['windowBytes'] }] : []),
        ],
        basis: [wantedBps, perFlowBps, flows],
        ...(by === 'window'
          ? {
              severity: 'advisory' as const,
              severityReason: 'A setting of the hosts cures it; the way itself carries what is asked.',
            }
          : {
              severityReason:
                'Traffic that is not TCP, or a TCP that doesn’t take loss for congestion, is not held back.',
            }),
      };
    }),
  fixes: (fault, network) => {
    const found = limitedDemands(network).find(({ demand }) => demand === fault.elements[0]!.id);
    if (found === undefined) return [];
    const flows = Math.ceil(found.wantedBps / found.perFlowBps);
    const windowBytes =
      found.by === 'window' && found.rttUs !== undefined
        ? Math.ceil((found.wantedBps * found.rttUs) / (8_000_000 * found.flows))
        : undefined;
    return [
      ...(windowBytes === undefined || windowBytes > TCP_LARGEST_WINDOW_BYTES
        ? []
        : [
            {
              id: 'larger-window',
              label: `Use a window of ${windowBytes} bytes`,
              sentence: `States that ${fault.values.demand} has ${windowBytes} bytes underway at a time; the hosts must be set up so.`,
              patch: { demands: { [found.demand]: { windowBytes } } },
            },
          ]),
      {
        id: 'more-flows',
        label: `Use ${flows} flows`,
        sentence: `States that ${fault.values.demand} is spread over ${flows} flows; the application must be set up so.`,
        patch: { demands: { [found.demand]: { flows } } },
      },
    ];
  },
});
