import { associationStates, tunnelStates } from '../network/can-come-up.ts';
import type { Network } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { listed, namedOrCounted } from './wording.ts';

type Filter = 'esp' | 'udp-500' | 'udp-4500' | 'udp-4789';
const filterNames: { readonly [F in Filter]: string } = {
  // RFC 4303 section 2; RFC 7296 section 2 and section 2.23; RFC 7348 section 5.
  esp: 'ESP',
  'udp-500': 'UDP 500',
  'udp-4500': 'UDP 4500',
  'udp-4789': 'UDP 4789',
};

interface Hit {
  readonly transport: string;
  readonly filter: Filter;
  readonly collection: 'associations' | 'tunnels';
  readonly id: string;
}

const hits = (network: Network): readonly Hit[] => {
  const found: Hit[] = [];
  const take = (collection: Hit['collection'], id: string, transport: string, filter: string): void => {
    found.push({ collection, id, transport, filter: filter as Filter });
  };
  for (const [id, { reasons }] of associationStates(network))
    for (const reason of reasons)
      if (reason.code === 'transport-filters') take('associations', id, reason.transport, reason.filter);
  for (const [id, { reasons }] of tunnelStates(network))
    for (const reason of reasons)
      if (reason.code === 'transport-filters') take('tunnels', id, reason.transport, reason.filter);
  return found;
};

export const transportFiltersNeeded = defineRule({
  id: 'transport-filters-needed',
  title: 'A transport lets through what the tunnels over it are made of',
  severity: 'blocking',
  looksAt: ['carriers', 'associations', 'tunnels', 'endpoints', 'landings', 'gateways'],
  why: 'IKE, ESP and VXLAN each need their own port or protocol on the way. What one of them is refused never comes up.',
  seen: 'Without UDP 500 the first packet is never answered; without UDP 4500 IKE stops after it has found the NAT; without ESP the association is up and empty.',
  sources: [
    { document: 'RFC 7296', clause: 'section 2 and section 2.23' },
    { document: 'RFC 4303', clause: 'section 2' },
    { document: 'RFC 7348', clause: 'section 5' },
  ],
  messages: {
    filtered: {
      words: 'filtered on path',
      sentence: (v: {
        readonly transport: string;
        readonly filters: string;
        readonly users: string;
        readonly isOne: boolean;
      }) => `${v.transport} filters ${v.filters}, which ${v.users} need${v.isOne ? 's' : ''}`,
    },
  },
  check: (network) => {
    const { design } = network;
    const all = hits(network);
    return [...new Set(all.map(({ transport }) => transport))].map((transport) => {
      const here = all.filter((hit) => hit.transport === transport);
      const filters = [...new Set(here.map(({ filter }) => filter))].sort();
      const users = [...new Set(here.map(({ collection, id }) => `${collection} ${id}`))]
        .sort()
        .map((text) => {
          const [collection, id] = text.split(' ') as [Hit['collection'], string];
          return { collection, id };
        });
      const ref = { collection: 'transports', id: transport } as const;
      return {
        message: 'filtered',
        values: {
          transport: design.transports[transport]!.name,
          filters: listed(filters.map((filter) => filterNames[filter])),
          users: namedOrCounted(
            users.map(({ collection, id }) => design[collection][id]!.name),
            'associations and tunnels',
          ),
          isOne: users.length === 1,
        },
        elements: [ref, ...users],
        identity: [transport],
        properties: [{ ref, path: ['filters'] }],
        basis: filters,
      };
    });
  },
  fixes: (fault, network) => {
    const { design } = network;
    const id = fault.elements[0]!.id;
    const { kind, filters = [] } = design.transports[id]!;
    // Only on a transport of one's own is it in the planner's hands.
    if (kind !== 'own-routed') return [];
    const opened = new Set<string>(fault.basis as readonly string[]);
    const kept = filters.filter((filter) => !opened.has(filter));
    return [
      {
        id: 'open',
        label: 'Let it through',
        sentence: `States that ${fault.values.transport} lets ${fault.values.filters} through, which you must have set up.`,
        patch: { transports: { [id]: { filters: kept.length === 0 ? null : kept } } },
      },
    ];
  },
});
