import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { loadFacts, loadReport } from './load-report.ts';

// RFC 4303 section 2.2: 32 bits on the packet; the number must not come round under one key.
const sequenceNumbers = 2 ** 32;

interface Hurried {
  readonly association: Id;
  readonly packetsPerSecond: number;
  readonly lastsSeconds: number;
  readonly lifetimeSeconds: number;
}

/** Associations whose packets would use up the numbers before the keys are renewed. */
const hurried = (network: Network): readonly Hurried[] => {
  const { design } = network;
  const rates = new Map<string, number>();
  for (const { element, direction, load } of loadReport(network)?.elements ?? []) {
    if (element.collection !== 'tunnels') continue;
    const { association } = entryOf(design.tunnels, element.id);
    if (association === undefined) continue;
    const key = `${association} ${direction}`;
    rates.set(key, (rates.get(key) ?? 0) + load.packetsPerSecond);
  }
  return Object.entries(design.associations).flatMap(([id, association]): readonly Hurried[] => {
    // RFC 7296 section 3.3.2 (from memory): extended numbers are used where both ends propose them.
    if (ends.every((end) => association[end].extendedSequence !== false)) return [];
    const lifetimes = ends.flatMap((end) => association[end].childLifetimeSeconds ?? []);
    const packetsPerSecond = Math.max(rates.get(`${id} a-to-b`) ?? 0, rates.get(`${id} b-to-a`) ?? 0);
    if (lifetimes.length === 0 || packetsPerSecond === 0) return [];
    const lifetimeSeconds = Math.min(...lifetimes);
    const lastsSeconds = Math.floor(sequenceNumbers / packetsPerSecond);
    return lastsSeconds >= lifetimeSeconds
      ? []
      : [{ association: id, packetsPerSecond, lastsSeconds, lifetimeSeconds }];
  });
};

export const sequenceNumbersRunOut = defineRule({
  id: 'sequence-numbers-run-out',
  title: 'Keys are renewed before their sequence numbers are used up',
  severity: 'degrading',
  looksAt: loadFacts,
  why: 'A packet’s number may not come round under one key. At this rate 32 bits are used up before the key’s lifetime ends; then the association stops, or renews its keys far more often than planned.',
  seen: 'Under full load keys are renewed out of turn, or traffic stops for a moment again and again, hours apart.',
  sources: [{ document: 'RFC 4303', clause: 'section 2.2.1' }],
  messages: {
    used: {
      words: 'numbers run out',
      sentence: (v: { readonly association: string; readonly minutes: number }) =>
        `${v.association} runs out of sequence numbers in ${v.minutes} min`,
    },
  },
  check: (network) =>
    hurried(network).map(({ association, packetsPerSecond, lastsSeconds, lifetimeSeconds }) => {
      const ref = { collection: 'associations' as const, id: association };
      return {
        message: 'used',
        values: {
          association: entryOf(network.design.associations, association).name,
          minutes: Math.floor(lastsSeconds / 60),
        },
        elements: [ref],
        properties: ends.flatMap((end) => [
          { ref, path: [end, 'extendedSequence'] },
          { ref, path: [end, 'childLifetimeSeconds'] },
        ]),
        basis: [packetsPerSecond, lifetimeSeconds],
      };
    }),
  fixes: (fault) => [
    {
      id: 'extend',
      label: 'Use 64-bit numbers',
      sentence: `Turns on extended sequence numbers at both ends of ${fault.values.association}.`,
      patch: {
        associations: {
          [fault.elements[0]!.id]: { a: { extendedSequence: true }, b: { extendedSequence: true } },
        },
      },
    },
  ],
});
