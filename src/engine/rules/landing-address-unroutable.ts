import type { AddressRange } from '../reference/address-ranges.ts';
import type { Landing, Network } from '../network/network.ts';
import { perObject } from '../network/network.ts';
import { addressRangeOf } from './address-range.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { families, familyField } from './endpoint-addresses.ts';
import { siteNameOf } from './places.ts';
import { countWord, sentenceCase } from './wording.ts';

interface Special {
  readonly field: 'ipv4' | 'ipv6';
  readonly address: string;
  readonly range: AddressRange;
}
interface Found extends Special {
  readonly landing: string;
}

const specialOf = perObject((landing: Landing): readonly Special[] =>
  families.flatMap((family) => {
    const field = familyField(family);
    const address = landing[field];
    const range = address === undefined ? undefined : addressRangeOf(address);
    return address === undefined || range === undefined ? [] : [{ field, address, range }];
  }),
);

/** Outside addresses in a special range, in order of landing. */
const specialAddresses = ({ design, landingsByTransport }: Network): readonly Found[] =>
  [...landingsByTransport.values()]
    .flat()
    .sort()
    .flatMap((landing) => {
      const link = design.links[landing]!;
      return link.kind === 'landing' ? specialOf(link).map((special) => ({ landing, ...special })) : [];
    });

// What a person calls an address that no transport carries.
const neverUsable = {
  'link-local': 'link-local',
  loopback: 'a loopback address',
  multicast: 'a multicast group',
  unspecified: 'no address at all',
} as const satisfies { readonly [R in AddressRange]?: string };

const messages = {
  never: {
    words: 'address unusable',
    sentence: (v: { readonly address: string; readonly place: string; readonly range: string }) =>
      `Outside address ${v.address} at ${v.place} is ${v.range}`,
  },
  hidden: {
    words: 'NAT not stated',
    sentence: (v: {
      readonly address: string;
      readonly place: string;
      readonly range: string;
      readonly transport: string;
    }) => `${v.range} ${v.address} at ${v.place} on ${v.transport}, without NAT`,
    why: 'No such address travels on the internet: somewhere a NAT replaces it. Unstated, the eight bytes of UDP around ESP are missing from every packet size, and nobody notices that this end can’t be reached.',
    seen: 'IKE moves to UDP 4500 by itself, large packets no longer fit, and the other end can’t start.',
  },
  documentation: {
    words: 'placeholder address',
    sentence: (v: { readonly count: number; readonly address: string; readonly place: string }) =>
      v.count === 1
        ? `Outside address ${v.address} at ${v.place} is for documentation`
        : `${sentenceCase(countWord(v.count))} outside addresses are for documentation only`,
    why: 'Addresses of the documentation ranges are never routed; they stand for ones that are not known yet. A design that only shows something may be marked as an example.',
    seen: 'Nothing answers: the first IKE packet goes nowhere.',
  },
};

export const landingAddressUnroutable = defineRule({
  id: 'landing-address-unroutable',
  title: 'WAN ports have addresses that the transport can carry',
  severity: 'blocking',
  looksAt: ['landings', 'carriers', 'gateways', 'sites', 'meta'],
  why: 'Such an address means nothing beyond its own wire, or its own device: nobody can send to it.',
  seen: 'The gateway shows its WAN port as up, and no packet ever comes back.',
  sources: [
    { document: 'RFC 5737', clause: 'section 3' },
    { document: 'RFC 3927', clause: 'section 1' },
    { document: 'RFC 6598', clause: 'section 7' },
    { document: 'RFC 1918', clause: 'section 3' },
  ],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    const found = specialAddresses(network);
    const refOf = (id: string) => ({ collection: 'links' as const, id });
    const placeOf = (id: string): string => {
      const link = design.links[id]!;
      return link.kind === 'landing' ? siteNameOf(design, link.device) : '';
    };
    const single = found.flatMap(({ landing, field, address, range }): Fault<typeof messages>[] => {
      const link = design.links[landing]!;
      if (link.kind !== 'landing' || range === 'documentation') return [];
      const ref = refOf(landing);
      const body = {
        elements: [ref],
        identity: [landing, field],
        properties: [{ ref, path: [field] }],
        basis: [address],
      };
      const values = { address, place: placeOf(landing) };
      if (range !== 'private' && range !== 'shared')
        return [
          {
            message: 'never',
            values: { ...values, range: neverUsable[range] },
            ...body,
          },
        ];
      const transport = design.transports[link.transport]!;
      if (transport.kind !== 'internet' || link.nat !== undefined) return [];
      return [
        {
          message: 'hidden',
          values: { ...values, range: sentenceCase(range), transport: transport.name },
          ...body,
        },
      ];
    });
    const placeholders =
      design.meta.example === true ? [] : found.filter((each) => each.range === 'documentation');
    const [first] = placeholders;
    if (first === undefined) return single;
    return [
      ...single,
      {
        message: 'documentation',
        values: { count: placeholders.length, address: first.address, place: placeOf(first.landing) },
        elements: [...new Set(placeholders.map(({ landing }) => landing))].map(refOf),
        identity: ['documentation'],
        properties: placeholders.map(({ landing, field }) => ({ ref: refOf(landing), path: [field] })),
        basis: placeholders.map(({ address }) => address),
        severity: 'advisory',
        severityReason: 'Such an address stands for one that is not known yet.',
      },
    ];
  },
  fixes: (fault) => {
    if (fault.message === 'documentation')
      return [
        {
          id: 'example',
          label: 'Mark as an example',
          sentence: 'Marks this design as an example, in which such addresses are in place.',
          patch: { meta: { example: true } },
        },
      ];
    if (fault.message !== 'hidden') return [];
    return [
      {
        id: 'state-nat',
        label: 'State the NAT',
        sentence: `States that ${fault.values.place} is behind NAT on ${fault.values.transport}.`,
        patch: { links: { [fault.elements[0]!.id]: { nat: {} } } },
      },
    ];
  },
});
