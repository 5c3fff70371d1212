import type { ElementRef } from '../model/design.ts';
import type { End, Network } from '../network/network.ts';
import { ends, entryOf, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

const microsecondsPerSecond = 1_000_000;

interface Hasty {
  readonly association: string;
  readonly end: End;
  readonly pair: string;
  readonly waitsUs: number;
  readonly failoverUs: number;
}

/** Ends that give their peer up before it can have failed over. */
const hastyEnds = (network: Network): readonly Hasty[] =>
  Object.entries(network.design.associations).flatMap(([id, association]) =>
    ends.flatMap((end): readonly Hasty[] => {
      const { liveness } = association[end];
      const pair = entryOf(network.design.devices, association[otherEnd(end)].device);
      // Without shared state the association doesn't outlive a failover, however long its peer waits.
      if (
        liveness === undefined ||
        liveness === 'off' ||
        pair.kind !== 'ha-pair' ||
        pair.failoverUs === undefined ||
        pair.stateSync === false
      )
        return [];
      const waitsUs = liveness.intervalSeconds * liveness.tries * microsecondsPerSecond;
      return waitsUs > pair.failoverUs
        ? []
        : [
            {
              association: id,
              end,
              pair: association[otherEnd(end)].device,
              waitsUs,
              failoverUs: pair.failoverUs,
            },
          ];
    }),
  );

const inSeconds = (us: number): string => `${Number((us / microsecondsPerSecond).toFixed(1))} s`;

export const livenessShorterThanFailover = defineRule({
  id: 'liveness-shorter-than-failover',
  title: 'Liveness checks wait longer than the peer takes to fail over',
  severity: 'degrading',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'The end gives its peer up while the other member is just taking over, and tears down keys that would have gone on working.',
  seen: 'Every failover of the pair costs a full negotiation, although its members share their state.',
  sources: ['common practice, no source'],
  messages: {
    hasty: {
      words: 'gives up early',
      sentence: (v: {
        readonly place: string;
        readonly waits: string;
        readonly pair: string;
        readonly takes: string;
      }) => `${v.place} waits ${v.waits} for ${v.pair}, which fails over in ${v.takes}`,
    },
  },
  check: (network) =>
    hastyEnds(network).map(({ association, end, pair, waitsUs, failoverUs }) => {
      const { design } = network;
      const ref: ElementRef = { collection: 'associations', id: association };
      return {
        message: 'hasty',
        values: {
          place: associationPlaces(design, entryOf(design.associations, association))[end],
          waits: inSeconds(waitsUs),
          pair: entryOf(design.devices, pair).name,
          takes: inSeconds(failoverUs),
        },
        elements: [ref, { collection: 'devices', id: pair }],
        identity: [association, end],
        properties: [
          { ref, path: [end, 'liveness'] },
          { ref: { collection: 'devices', id: pair }, path: ['failoverUs'] },
        ],
        basis: [waitsUs, failoverUs],
      };
    }),
  fixes: (fault, network) => {
    const [id, end] = fault.identity as readonly [string, End];
    const { liveness } = entryOf(network.design.associations, id)[end];
    const hasty = hastyEnds(network).find((each) => each.association === id && each.end === end);
    if (hasty === undefined || liveness === undefined || liveness === 'off') return [];
    const tries = Math.floor(hasty.failoverUs / (liveness.intervalSeconds * microsecondsPerSecond)) + 2;
    return [
      {
        id: 'more-tries',
        label: `Try ${tries} times`,
        sentence: `Lets ${fault.values.place} try ${tries} times, ${liveness.intervalSeconds} s apart, before it gives ${fault.values.pair} up.`,
        patch: { associations: { [id]: { [end]: { liveness: { tries } } } } },
      },
    ];
  },
});
