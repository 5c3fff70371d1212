import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { demandName, loadFacts, loadReport, rateText } from './load-report.ts';

interface Limited {
  readonly demand: Id;
  readonly way: 'forwardBps' | 'reverseBps';
  readonly wantedBps: number;
  readonly flows: number;
  readonly perFlowBps: number;
}

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
      const perFlowBps = at.reachable?.oneFlow.find(({ kind }) => kind === 'loss')?.limitBps;
      return wantedBps === undefined || perFlowBps === undefined || perFlowBps * flows >= wantedBps
        ? []
        : [{ demand, way, wantedBps, flows, perFlowBps }];
    });
    return ways.sort((a, b) => b.wantedBps / b.perFlowBps - a.wantedBps / a.perFlowBps).slice(0, 1);
  });

export const demandFlowLimited = defineRule({
  id: 'demand-flow-limited',
  title: 'No demand asks more of its flows than loss and distance let TCP reach',
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
  },
  check: (network) =>
    limitedDemands(network).map(({ demand, way, wantedBps, flows, perFlowBps }) => {
      const ref: ElementRef = { collection: 'demands', id: demand };
      return {
        message: 'limited',
        values: {
          demand: demandName(network.design, demand),
          wanted: rateText(wantedBps),
          could: rateText(perFlowBps * flows),
        },
        elements: [ref],
        properties: [
          { ref, path: [way] },
          { ref, path: ['flows'] },
        ],
        basis: [wantedBps, perFlowBps, flows],
        severityReason:
          'Traffic that is not TCP, or a TCP that doesn’t take loss for congestion, is not held back.',
      };
    }),
  fixes: (fault, network) => {
    const found = limitedDemands(network).find(({ demand }) => demand === fault.elements[0]!.id);
    if (found === undefined) return [];
    const flows = Math.ceil(found.wantedBps / found.perFlowBps);
    return [
      {
        id: 'more-flows',
        label: `Use ${flows} flows`,
        sentence: `States that ${fault.values.demand} is spread over ${flows} flows; the application must be set up so.`,
        patch: { demands: { [found.demand]: { flows } } },
      },
    ];
  },
});
