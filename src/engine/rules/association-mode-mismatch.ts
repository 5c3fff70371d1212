import { ends, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

export const associationModeMismatch = defineRule({
  id: 'association-mode-mismatch',
  title: 'Both ends of an association use one mode',
  severity: 'degrading',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'Transport mode is a wish that the other end may leave unanswered: keys are then made in tunnel mode, with an IP header more on every packet, unless the end that asked gives up.',
  seen: 'The association is up and large packets don’t fit; or it comes up and is deleted at once, again and again.',
  sources: [{ document: 'RFC 7296', clause: 'section 1.3.1' }],
  messages: {
    differ: {
      words: 'modes differ',
      sentence: (v: { readonly transport: string; readonly tunnel: string }) =>
        `Transport mode at ${v.transport}, tunnel mode at ${v.tunnel}`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const transport = ends.find((end) => association[end].mode === 'transport');
      if (transport === undefined || association[otherEnd(transport)].mode !== 'tunnel') return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'differ',
          values: { transport: places[transport], tunnel: places[otherEnd(transport)] },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'mode'] })),
          basis: [transport],
        },
      ];
    }),
  fixes: ({ elements, values }) => [
    {
      id: 'tunnel-mode',
      label: 'Tunnel mode at both ends',
      sentence: `Lets ${values.transport} use tunnel mode, as ${values.tunnel} does.`,
      patch: { associations: { [elements[0]!.id]: { a: { mode: 'tunnel' }, b: { mode: 'tunnel' } } } },
    },
  ],
});
