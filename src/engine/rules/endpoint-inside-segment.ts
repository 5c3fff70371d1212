import { defineRule } from './define-rule.ts';
import { perFacts } from './facts.ts';
import type { Family } from '../network/association-path.ts';
import {
  betterAddress,
  families,
  familyField,
  plainAddress,
  readdressPatch,
  segmentSubnetOf,
} from './endpoint-addresses.ts';

interface Inside {
  readonly endpoint: string;
  readonly family: Family;
  readonly address: string;
  readonly subnet: string;
  readonly segment: string;
}

/** Endpoints whose address lies in a subnet of a segment. */
export const insideSegments = perFacts(['endpoints', 'addressing'], (network): readonly Inside[] =>
  Object.entries(network.design.endpoints).flatMap(([endpoint, entry]) =>
    families.flatMap((family) => {
      const address = entry[familyField(family)];
      const subnet = address === undefined ? undefined : segmentSubnetOf(network, address);
      return address === undefined || subnet === undefined ? [] : [{ endpoint, family, address, ...subnet }];
    }),
  ),
);

export const endpointInsideSegment = defineRule({
  id: 'endpoint-inside-segment',
  title: 'Endpoints have addresses outside every segment',
  severity: 'blocking',
  looksAt: ['endpoints', 'addressing', 'gateways', 'tunnels', 'associations', 'landings'],
  why: 'Gateways look for an address of a segment’s subnet on that segment: the tunnel’s own packets are then sent into the tunnel, or asked for by ARP among the hosts.',
  seen: 'The tunnel comes up and goes down again within seconds, or the endpoint can be reached from one side only.',
  sources: ['common practice, no source'],
  messages: {
    inside: {
      words: 'inside a segment',
      sentence: (v: {
        readonly endpoint: string;
        readonly address: string;
        readonly subnet: string;
        readonly segment: string;
      }) => `${v.endpoint} has ${v.address}, inside ${v.subnet} of ${v.segment}`,
    },
  },
  check: (network) =>
    insideSegments(network).map(({ endpoint, family, address, subnet, segment }) => {
      const { design } = network;
      const ref = { collection: 'endpoints', id: endpoint } as const;
      return {
        message: 'inside',
        values: {
          endpoint: design.endpoints[endpoint]!.name,
          address: plainAddress(address),
          subnet,
          segment: design.segments[segment]!.name,
        },
        elements: [ref, { collection: 'segments', id: segment }],
        identity: [endpoint, familyField(family)],
        properties: [{ ref, path: [familyField(family)] }],
        basis: [plainAddress(address), subnet],
      };
    }),
  fixes: (fault, network) => {
    const { design } = network;
    const id = fault.elements[0]!.id;
    const inside = insideSegments(network);
    const family = families.find((candidate) => fault.identity!.includes(familyField(candidate)))!;
    // The addresses of the other endpoints show where this plan keeps its own.
    const [neighbour] = Object.entries(design.endpoints)
      .filter(
        ([other, entry]) =>
          entry[familyField(family)] !== undefined &&
          !inside.some((fellow) => fellow.endpoint === other && fellow.family === family),
      )
      .sort(([x], [y]) => (x < y ? -1 : 1));
    // Without a neighbour only what the selectors name can be better.
    const better = betterAddress(
      network,
      id,
      family,
      neighbour?.[1][familyField(family)] ?? fault.values.address,
    );
    if (better === undefined) return [];
    const plain = better.address.split('/')[0]!;
    return [
      {
        id: 'readdress',
        label: `Set ${fault.values.endpoint} to ${plain}`,
        sentence: `Gives ${fault.values.endpoint} ${plain}, ${better.isNamed || neighbour === undefined ? 'which its selectors name' : `a free address beside ${neighbour[1].name}, in the selectors too`}.`,
        patch: readdressPatch(network, id, family, better.address),
      },
    ];
  },
});
