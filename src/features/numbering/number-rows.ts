import { inLetterOrder } from '../../engine/flood/segment-nodes.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design, Entry } from '../../engine/model/design.ts';
import type { Network } from '../../engine/network/network.ts';
import { addressRangeOf, rangeOf } from '../../engine/numbering/address-range.ts';
import type { NumberClash, NetworkOverlap } from '../../engine/numbering/number-clashes.ts';
import type { NumberingContext, NumberRange } from '../../engine/numbering/numbering-context.ts';
import { clashWords, holderIs, overlapWords } from './clash-words.ts';

/** Where a number lies as to the pools; undefined where there is no number or no pool of its kind. */
export type Standing = 'in a pool' | 'outside the pools' | 'reserved' | undefined;

interface Row {
  readonly id: string;
  readonly standing: Standing;
  /** Who else holds a number of this row; '' for nobody. */
  readonly alsoHeldBy: string;
}

export interface VniRow extends Row {
  readonly name: string;
  readonly a: TunnelEndRow;
  readonly b: TunnelEndRow;
  readonly letters: readonly string[];
}
export interface TunnelEndRow {
  readonly device: string;
  readonly vni: number | undefined;
  readonly udpPort: number | undefined;
}
export interface LoopbackRow extends Row {
  readonly name: string;
  readonly device: string;
  readonly site: string;
  readonly ipv4: string | undefined;
  readonly ipv6: string | undefined;
  readonly tunnels: number;
}
export interface VlanRow extends Row {
  readonly segment: string;
  readonly letter: string;
  readonly segmentName: string;
  readonly site: string;
  readonly siteName: string;
  readonly vlan: number | undefined;
  readonly subnets: readonly string[];
}

/** What all numbers of a design are held against. */
export interface Held {
  readonly design: Design;
  /** The index of the design. */
  readonly network: Network;
  readonly context: NumberingContext;
  readonly clashes: readonly NumberClash[];
  readonly overlaps: readonly NetworkOverlap[];
}

const standingOf = (
  numbers: readonly (number | undefined)[],
  pool: readonly NumberRange[] | undefined,
  reserved: readonly NumberRange[] | undefined,
): Standing => {
  const known = numbers.filter((number) => number !== undefined);
  if (known.length === 0) return undefined;
  const within = (ranges: readonly NumberRange[], number: number): boolean =>
    ranges.some(({ from, to }) => from <= number && number <= to);
  if (reserved !== undefined && known.some((number) => within(reserved, number))) return 'reserved';
  if (pool === undefined) return undefined;
  return known.every((number) => within(pool, number)) ? 'in a pool' : 'outside the pools';
};

const addressStanding = (
  addresses: readonly (string | undefined)[],
  { pools, reserved }: NumberingContext,
): Standing => {
  const known = addresses.filter((address) => address !== undefined).map(addressRangeOf);
  if (known.length === 0) return undefined;
  const within = (prefixes: readonly string[], { family, first }: (typeof known)[number]): boolean =>
    prefixes.some((prefix) => {
      const range = rangeOf(prefix);
      return range.family === family && range.first <= first && first <= range.last;
    });
  if (known.some((address) => within(reserved?.networks ?? [], address))) return 'reserved';
  if (pools?.loopbacks === undefined) return undefined;
  return known.every((address) => within(pools.loopbacks!, address)) ? 'in a pool' : 'outside the pools';
};

/** What else holds numbers of one element of the design, each said once. */
const alsoHeldBy = ({ design, clashes, overlaps }: Held, collection: string, id: string, site?: string) => {
  const isIt = (holder: Parameters<typeof holderIs>[0]): boolean => holderIs(holder, collection, id, site);
  return [
    ...new Set([
      ...clashes.flatMap((clash) => (clash.holders.some(isIt) ? clashWords(design, clash, isIt) : [])),
      ...overlaps.flatMap((overlap) =>
        isIt(overlap.a.holder) || isIt(overlap.b.holder) ? overlapWords(design, overlap, isIt) : [],
      ),
    ]),
  ].join('; ');
};

/** Every tunnel with the numbers at both its ends, by name. */
export const vniRows = (held: Held): readonly VniRow[] => {
  const { design, network, context } = held;
  const carried = tunnelSegments(network);
  const endOf = ({ endpoint, vni, udpPort }: Entry<'tunnels'>['a']): TunnelEndRow => ({
    device: design.devices[design.endpoints[endpoint]!.device]!.name,
    vni,
    udpPort,
  });
  return network.tunnelIds.map((id): VniRow => {
    const tunnel: Entry<'tunnels'> = design.tunnels[id]!;
    return {
      id,
      name: tunnel.name,
      a: endOf(tunnel.a),
      b: endOf(tunnel.b),
      letters: (carried.get(id) ?? []).map((segment) => design.segments[segment]!.letter),
      standing: standingOf([tunnel.a.vni, tunnel.b.vni], context.pools?.vnis, context.reserved?.vnis),
      alsoHeldBy: alsoHeldBy(held, 'tunnels', id),
    };
  });
};

/** Every loopback endpoint with its addresses. */
export const loopbackRows = (held: Held): readonly LoopbackRow[] => {
  const { design, network, context } = held;
  return Object.entries(design.endpoints).map(([id, endpoint]): LoopbackRow => {
    const device = design.devices[endpoint.device]!;
    return {
      id,
      name: endpoint.name,
      device: device.name,
      site: design.sites[device.site]!.name,
      ipv4: endpoint.ipv4,
      ipv6: endpoint.ipv6,
      tunnels: network.tunnelsByEndpoint.get(id)?.length ?? 0,
      standing: addressStanding([endpoint.ipv4, endpoint.ipv6], context),
      alsoHeldBy: alsoHeldBy(held, 'endpoints', id),
    };
  });
};

/** Every site of every segment, in order of letter. */
export const vlanRows = (held: Held): readonly VlanRow[] => {
  const { design, network, context } = held;
  return inLetterOrder(network).flatMap((segment) => {
    const { letter, name, sites } = design.segments[segment]!;
    return Object.entries(sites).flatMap(([site, { vlan, subnets }]): readonly VlanRow[] =>
      design.sites[site] === undefined
        ? []
        : [
            {
              id: `${segment}/${site}`,
              segment,
              letter,
              segmentName: name,
              site,
              siteName: design.sites[site].name,
              vlan,
              subnets: subnets ?? [],
              standing: standingOf([vlan], context.pools?.vlans, context.reserved?.vlans),
              alsoHeldBy: alsoHeldBy(held, 'segments', segment, site),
            },
          ],
    );
  });
};
