import type { Id } from '../model/scalars.ts';
import { associationPath, bareTunnelPath } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';

/** Transports over which something runs now. */
const transportsInUse = (network: Network): ReadonlySet<Id> => {
  const { associations, tunnels } = network.design;
  const paths = [
    ...Object.keys(associations).map((id) => associationPath(network, id)),
    ...Object.keys(tunnels)
      .filter((id) => tunnels[id]!.association === undefined)
      .map((id) => bareTunnelPath(network, id)),
  ];
  return new Set(paths.flatMap((path) => (path.ok ? [path.transport] : [])));
};

export const transportHidesTooBig = defineRule({
  id: 'transport-hides-too-big',
  title: 'Transports tell when a packet is too big for them',
  severity: 'degrading',
  looksAt: ['carriers', 'associations', 'tunnels', 'endpoints', 'landings', 'gateways'],
  why: 'A gateway learns of a narrower path from ICMP messages alone. Where these are filtered it goes on sending packets that nobody delivers.',
  seen: 'After the provider moves the line to another path large packets vanish, and neither end logs anything.',
  sources: [
    { document: 'RFC 8900', clause: 'section 3.8' },
    { document: 'RFC 4890', clause: 'section 4.3.1' },
  ],
  messages: {
    hidden: {
      words: 'ICMP filtered',
      sentence: (v: { readonly transport: string }) => `${v.transport} filters packet-too-big messages`,
    },
  },
  check: (network) => {
    const inUse = transportsInUse(network);
    return Object.entries(network.design.transports).flatMap(([id, { name, filters }]) => {
      if (filters?.includes('packet-too-big') !== true || !inUse.has(id)) return [];
      const ref = { collection: 'transports' as const, id };
      return [
        {
          message: 'hidden',
          values: { transport: name },
          elements: [ref],
          properties: [{ ref, path: ['filters'] }],
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const { kind, filters = [] } = entryOf(network.design.transports, id);
    // Only on a transport of one's own is it in the planner's hands.
    if (kind !== 'own-routed') return [];
    const kept = filters.filter((filter) => filter !== 'packet-too-big');
    return [
      {
        id: 'let-through',
        label: 'Let them through',
        sentence: `States that ${fault.values.transport} lets packet-too-big messages through, which you must have set up.`,
        patch: { transports: { [id]: { filters: kept.length === 0 ? null : kept } } },
      },
    ];
  },
});
