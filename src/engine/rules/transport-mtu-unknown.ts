import { defineRule } from './define-rule.ts';

export const transportMtuUnknown = defineRule({
  id: 'transport-mtu-unknown',
  title: 'The MTU of every transport in use is known',
  severity: 'advisory',
  looksAt: ['transports', 'landings'],
  why: 'Without it nobody can say which packets fit through the tunnels, and no check of packet sizes speaks. Measure it between the two outside addresses with pings that must not be fragmented.',
  seen: 'Pings and small requests work from the first day; whatever fills a packet may hang.',
  sources: ['common practice, no source'],
  messages: {
    unknown: {
      words: 'MTU unknown',
      sentence: (v: { readonly transport: string }) => `The MTU of ${v.transport} is not known`,
    },
  },
  check: ({ design, landingsByTransport }) =>
    Object.entries(design.transports).flatMap(([id, { name, mtu }]) => {
      if (mtu !== undefined || !landingsByTransport.has(id)) return [];
      const ref = { collection: 'transports', id } as const;
      return [
        {
          message: 'unknown',
          values: { transport: name },
          elements: [ref],
          properties: [{ ref, path: ['mtu'] }],
        },
      ];
    }),
});
