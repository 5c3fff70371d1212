import type { ElementRef } from '../model/design.ts';
import type { DesignFacts } from '../network/network.ts';
import type { AddressRange } from './address-range.ts';
import { addressRangeOf, overlaps, rangeOf } from './address-range.ts';
import type { NumberingContext, NumberRange } from './numbering-context.ts';
import { isInRanges, noNumberingContext } from './numbering-context.ts';

/** Who holds a number: an element of the design, another design, a reservation, or a network in use. */
export type Holder =
  | { readonly by: 'element'; readonly ref: ElementRef; readonly path: readonly string[] }
  | { readonly by: 'design'; readonly name?: string }
  | { readonly by: 'reservation' }
  | { readonly by: 'network-in-use'; readonly of?: string };

/** One number that more than one holds. */
export interface NumberClash {
  readonly kind: 'vni' | 'vlan' | 'loopback' | 'tunnel-name';
  readonly value: number | string;
  /** For a VLAN: the site at which two segments have it. */
  readonly site?: string;
  /** Two or more, those of the design first. */
  readonly holders: readonly Holder[];
}
/** Two networks, or a network and an address, that share addresses though they are nothing in common. */
export interface NetworkOverlap {
  readonly a: { readonly network: string; readonly holder: Holder };
  readonly b: { readonly network: string; readonly holder: Holder };
}

type Kind = NumberClash['kind'];
interface Held {
  readonly kind: Kind;
  readonly value: number | string;
  readonly site?: string;
  readonly holder: Holder;
}

const element = (collection: ElementRef['collection'], id: string, ...path: readonly string[]): Holder => ({
  by: 'element',
  ref: { collection, id },
  path,
});

/** Numbers of the design's own; a tunnel holds its VNI once, however many ends say it. */
const ownNumbers = (design: DesignFacts): readonly Held[] => [
  ...Object.entries(design.tunnels).flatMap(([id, { name, a, b }]): Held[] => [
    { kind: 'tunnel-name', value: name, holder: element('tunnels', id, 'name') },
    ...(a.vni === undefined
      ? []
      : [{ kind: 'vni' as const, value: a.vni, holder: element('tunnels', id, 'a', 'vni') }]),
    ...(b.vni === undefined || b.vni === a.vni
      ? []
      : [{ kind: 'vni' as const, value: b.vni, holder: element('tunnels', id, 'b', 'vni') }]),
  ]),
  ...Object.entries(design.segments).flatMap(([id, { sites }]) =>
    Object.entries(sites).flatMap(([site, { vlan }]): Held[] =>
      vlan === undefined
        ? []
        : [{ kind: 'vlan', value: vlan, site, holder: element('segments', id, 'sites', site, 'vlan') }],
    ),
  ),
  ...Object.entries(design.endpoints).flatMap(([id, endpoint]) =>
    (['ipv4', 'ipv6'] as const).flatMap((family): Held[] => {
      const address = endpoint[family];
      return address === undefined
        ? []
        : [{ kind: 'loopback', value: canonical(address), holder: element('endpoints', id, family) }];
    }),
  ),
];

/** One text for one address, however it is written. */
const canonical = (address: string): string => {
  const { family, first } = addressRangeOf(address);
  return `${family} ${first}`;
};

const neighbours = (context: NumberingContext): readonly Held[] =>
  (context.otherDesigns ?? []).flatMap(({ name, vnis, tunnelNames, loopbacks }) => {
    const holder: Holder = { by: 'design', ...(name === undefined ? {} : { name }) };
    return [
      ...(vnis ?? []).map((value): Held => ({ kind: 'vni', value, holder })),
      ...(tunnelNames ?? []).map((value): Held => ({ kind: 'tunnel-name', value, holder })),
      ...(loopbacks ?? []).map((value): Held => ({ kind: 'loopback', value: canonical(value), holder })),
    ];
  });

const order: readonly Kind[] = ['vni', 'vlan', 'loopback', 'tunnel-name'];

/**
 * Numbers of the design that something else holds, too: another element of it, another design, a reservation. VLANs clash
 * at a site, not between sites or designs. In order of kind and number.
 */
export const numberClashes = (
  design: DesignFacts,
  context: NumberingContext = noNumberingContext,
): readonly NumberClash[] => {
  const byNumber = new Map<string, Held[]>();
  const keyOf = ({ kind, value, site }: Held): string => `${kind} ${value} ${site ?? ''}`;
  for (const held of ownNumbers(design)) {
    const list = byNumber.get(keyOf(held));
    if (list === undefined) byNumber.set(keyOf(held), [held]);
    else list.push(held);
  }
  for (const held of neighbours(context)) byNumber.get(keyOf(held))?.push(held);
  const reserved: { readonly [kind in Kind]?: readonly NumberRange[] } = {
    vni: context.reserved?.vnis ?? [],
    vlan: context.reserved?.vlans ?? [],
  };
  const clashes: NumberClash[] = [];
  for (const [first, ...others] of byNumber.values()) {
    const { kind, value, site, holder } = first!;
    const holders: Holder[] = [holder, ...others.map((held) => held.holder)];
    if (typeof value === 'number' && isInRanges(reserved[kind], value)) holders.push({ by: 'reservation' });
    if (holders.length < 2) continue;
    clashes.push({
      kind,
      value: kind === 'loopback' ? addressOf(design, holder) : value,
      ...(site === undefined ? {} : { site }),
      holders,
    });
  }
  return clashes.sort(
    (x, y) =>
      order.indexOf(x.kind) - order.indexOf(y.kind) ||
      (typeof x.value === 'number' && typeof y.value === 'number'
        ? x.value - y.value
        : String(x.value) < String(y.value)
          ? -1
          : 1),
  );
};

const addressOf = (design: DesignFacts, holder: Holder): string => {
  if (holder.by !== 'element') throw new Error('a loopback of the design is held by one of its endpoints');
  const { ipv4, ipv6 } = design.endpoints[holder.ref.id]!;
  return (holder.path[0] === 'ipv4' ? ipv4! : ipv6!).split('/')[0]!;
};

interface Placed extends AddressRange {
  readonly network: string;
  readonly holder: Holder;
  /** Networks that share this may overlap: the sites of one segment hold one subnet. */
  readonly common: string;
  /** False for what isn't the design's: two of those are none of its business. */
  readonly isOwn: boolean;
}

const ownNetworks = (design: DesignFacts): readonly Placed[] => [
  ...Object.entries(design.segments).flatMap(([id, { sites }]) =>
    Object.entries(sites).flatMap(([site, { subnets }]) =>
      (subnets ?? []).map((network): Placed => ({
        ...rangeOf(network),
        network,
        holder: element('segments', id, 'sites', site, 'subnets'),
        common: `segment ${id}`,
        isOwn: true,
      })),
    ),
  ),
  ...Object.entries(design.endpoints).flatMap(([id, endpoint]) =>
    (['ipv4', 'ipv6'] as const).flatMap((family): Placed[] => {
      const network = endpoint[family];
      return network === undefined
        ? []
        : [
            {
              ...addressRangeOf(network),
              network,
              holder: element('endpoints', id, family),
              // Equal addresses are clashes of numbers.
              common: 'endpoints',
              isOwn: true,
            },
          ];
    }),
  ),
];

const foreignNetworks = (context: NumberingContext): readonly Placed[] => {
  const foreign = (network: string, holder: Holder, range = rangeOf(network)): Placed => ({
    ...range,
    network,
    holder,
    common: 'foreign',
    isOwn: false,
  });
  return [
    ...(context.networksInUse ?? []).map(({ network, of }) =>
      foreign(network, { by: 'network-in-use', ...(of === undefined ? {} : { of }) }),
    ),
    ...(context.otherDesigns ?? []).flatMap(({ name, networks }) =>
      (networks ?? []).map((network) =>
        foreign(network, { by: 'design', ...(name === undefined ? {} : { name }) }),
      ),
    ),
    ...(context.reserved?.networks ?? []).map((network) => foreign(network, { by: 'reservation' })),
  ];
};

/** A segment's subnet that another design names just so is one network in two designs. */
const isSameNetwork = (x: Placed, y: Placed): boolean => {
  const other = x.isOwn ? y : x;
  const own = x.isOwn ? x : y;
  return (
    other.holder.by === 'design' &&
    own.common.startsWith('segment ') &&
    x.first === y.first &&
    x.last === y.last
  );
};

/**
 * Networks of the design that share addresses with others: subnets of two segments, an endpoint inside a subnet, and either
 * with other designs, reservations and networks in use. A subnet that another design has just so is the same network. In
 * order of address.
 */
export const networkOverlaps = (
  design: DesignFacts,
  context: NumberingContext = noNumberingContext,
): readonly NetworkOverlap[] => {
  const all = [...ownNetworks(design), ...foreignNetworks(context)].sort(
    (x, y) =>
      x.family - y.family || (x.first < y.first ? -1 : x.first > y.first ? 1 : x.last > y.last ? -1 : 1),
  );
  const found: NetworkOverlap[] = [];
  // Those that began before and may still reach on.
  let open: Placed[] = [];
  for (const one of all) {
    open = open.filter((before) => before.family === one.family && before.last >= one.first);
    for (const before of open)
      if (
        overlaps(before, one) &&
        (before.isOwn || one.isOwn) &&
        before.common !== one.common &&
        !isSameNetwork(before, one)
      )
        found.push({
          a: { network: before.network, holder: before.holder },
          b: { network: one.network, holder: one.holder },
        });
    open.push(one);
  }
  return found;
};
