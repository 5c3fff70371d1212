import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';

// Common practice, no source: every 10 s, three tries.
const usualLiveness = { intervalSeconds: 10, tries: 3 };

export const associationWithoutLiveness = defineRule({
  id: 'association-without-liveness',
  title: 'The ends of an association check that the other is alive',
  severity: 'degrading',
  looksAt: ['associations'],
  why: 'VXLAN has no keepalive of its own: where IPsec has none either, nobody notices that a peer is gone, and frames vanish until the keys run out.',
  seen: 'After the far gateway restarts this one shows the association as up for up to an hour, and nothing arrives.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.4' }, 'common practice, no source'],
  messages: {
    unwatched: {
      words: 'nobody checks',
      sentence: (v: { readonly association: string }) =>
        `No end of ${v.association} checks that its peer is alive`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      if (ends.some((end) => association[end].liveness !== 'off')) return [];
      const ref = { collection: 'associations' as const, id };
      return [
        {
          message: 'unwatched',
          values: { association: association.name },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'liveness'] })),
        },
      ];
    }),
  fixes: (fault) => [
    {
      id: 'check-both',
      label: 'Check at both ends',
      sentence: `Lets both ends of ${fault.values.association} check every ${usualLiveness.intervalSeconds} s, ${usualLiveness.tries} tries.`,
      patch: {
        associations: {
          [fault.elements[0]!.id]: { a: { liveness: usualLiveness }, b: { liveness: usualLiveness } },
        },
      },
    },
  ],
});
