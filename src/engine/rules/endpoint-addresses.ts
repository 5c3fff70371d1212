import ipaddr from 'ipaddr.js';
import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, diffPatch, joinPatches } from '../model/merge-patch.ts';
import type { Family } from '../network/association-path.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { ends, perObject } from '../network/network.ts';
import { indexNetwork } from '../network/index-network.ts';
import { parsePrefix } from '../network/parse-prefix.ts';
import { associationEndOf } from '../network/selectors-cover.ts';
import { coverPatch } from './selector-patch.ts';

export const families = [4, 6] as const satisfies readonly Family[];
export const familyField = (family: Family): 'ipv4' | 'ipv6' => (family === 4 ? 'ipv4' : 'ipv6');
const hostBits = (family: Family): number => (family === 4 ? 32 : 128);

/** One spelling for one address, prefix length left out. */
export const plainAddress = (text: string): string => ipaddr.parse(text.split('/')[0]!).toNormalizedString();

interface Subnet {
  readonly subnet: string;
  readonly segment: string;
}

/** The first bits of an address, as text that is equal where they are. */
const firstBits = (bytes: readonly number[], count: number): string =>
  bytes.map((byte, i) => byte & (0xff00 >> Math.min(8, Math.max(0, count - 8 * i))) & 0xff).join('.');

// By family and prefix length, then by the prefix's bits: one look-up per length instead of one per subnet.
type Segments = DesignFacts['segments'];
const subnetIndex = perObject((segments: Segments): ReadonlyMap<string, ReadonlyMap<string, Subnet>> => {
  const byLength = new Map<string, Map<string, Subnet>>();
  for (const segment of Object.keys(segments).sort())
    for (const { subnets } of Object.values(segments[segment]!.sites))
      for (const subnet of subnets ?? []) {
        const [address, length] = parsePrefix(subnet);
        const bytes = address.toByteArray();
        const group = `${bytes.length} ${length}`;
        const bits = firstBits(bytes, length);
        const known = byLength.get(group) ?? new Map<string, Subnet>();
        byLength.set(group, known);
        const before = known.get(bits);
        // Several sites may spell one subnet each; the answer must not depend on their order.
        if (before === undefined || (before.segment === segment && subnet < before.subnet))
          known.set(bits, { subnet, segment });
      }
  return byLength;
});

const narrowestSubnet = (segments: Segments, address: string): Subnet | undefined => {
  const bytes = ipaddr.parse(address.split('/')[0]!).toByteArray();
  let narrowest: { readonly length: number; readonly found: Subnet } | undefined;
  for (const [group, subnets] of subnetIndex(segments)) {
    const [byteCount, length] = group.split(' ').map(Number) as [number, number];
    if (byteCount !== bytes.length) continue;
    const found = subnets.get(firstBits(bytes, length));
    if (found !== undefined && (narrowest === undefined || length > narrowest.length))
      narrowest = { length, found };
  }
  return narrowest?.found;
};

const subnetsFound = perObject((_segments: Segments) => new Map<string, Subnet | undefined>());

/** The narrowest subnet of a segment that holds the address; undefined where it lies outside all segments. */
export const segmentSubnetOf = ({ design }: Network, address: string): Subnet | undefined => {
  const found = subnetsFound(design.segments);
  if (!found.has(address)) found.set(address, narrowestSubnet(design.segments, address));
  return found.get(address);
};

const usedAddresses = (design: DesignFacts): ReadonlySet<string> => {
  const used = new Set<string>();
  const take = (address: string | undefined): void => {
    if (address !== undefined) used.add(plainAddress(address));
  };
  for (const { ipv4, ipv6 } of Object.values(design.endpoints)) [ipv4, ipv6].forEach(take);
  for (const link of Object.values(design.links))
    if (link.kind === 'landing') [link.ipv4, link.ipv6].forEach(take);
  for (const device of Object.values(design.devices))
    if (device.kind === 'host') device.addresses?.forEach(take);
  // What a selector names is spoken for, even where the endpoint that had it has moved.
  for (const { a, b } of Object.values(design.associations))
    for (const end of [a, b])
      for (const { local, remote } of Object.values(end.selectors ?? {})) [local, remote].forEach(take);
  return used;
};

/**
 * The lowest free endpoint address near the given one, outside every segment: in the same /24 (IPv4) or /112 (IPv6), from
 * just above it, then from the block's start. With the host's own prefix length, as endpoints have it.
 */
const freeAddressNear = (network: Network, near: string): string | undefined => {
  const { design } = network;
  const bytes = ipaddr.parse(near.split('/')[0]!).toByteArray();
  const family: Family = bytes.length === 4 ? 4 : 6;
  const last = family === 4 ? 254 : 0xffff;
  const start = family === 4 ? bytes[3]! : bytes[14]! * 256 + bytes[15]!;
  const used = usedAddresses(design);
  for (let step = 0; step < last; step += 1) {
    const host = ((start + step) % last) + 1;
    const candidate = ipaddr
      .fromByteArray(
        family === 4 ? [...bytes.slice(0, 3), host] : [...bytes.slice(0, 14), host >> 8, host & 0xff],
      )
      .toString();
    if (!used.has(plainAddress(candidate)) && segmentSubnetOf(network, candidate) === undefined)
      return `${candidate}/${hostBits(family)}`;
  }
  return undefined;
};

/** Single addresses that the selectors beside an endpoint's tunnels name for it, spelt as they stand there. */
const addressesInSelectors = (network: Network, endpoint: string, family: Family): readonly string[] => {
  const { design } = network;
  const named = new Set<string>();
  for (const { tunnel: id, end } of network.tunnelsByEndpoint.get(endpoint) ?? []) {
    const tunnel = design.tunnels[id]!;
    if (tunnel.association === undefined) continue;
    const association = design.associations[tunnel.association]!;
    const side = associationEndOf(network, tunnel, association, end);
    if (side === undefined) continue;
    for (const { local } of Object.values(association[side].selectors ?? {}))
      if (local.endsWith(`/${hostBits(family)}`) && (family === 4) !== local.includes(':')) named.add(local);
  }
  return [...named].sort();
};

/** The address that an endpoint should rather have: one that its selectors name and nobody has, else the next free one. */
export const betterAddress = (
  network: Network,
  endpoint: string,
  family: Family,
  near: string,
): { readonly address: string; readonly isNamed: boolean } | undefined => {
  const { design } = network;
  const taken = new Set(
    Object.values(design.endpoints).flatMap((entry) => {
      const address = entry[familyField(family)];
      return address === undefined ? [] : [plainAddress(address)];
    }),
  );
  const named = addressesInSelectors(network, endpoint, family).find(
    (prefix) => !taken.has(plainAddress(prefix)) && segmentSubnetOf(network, prefix) === undefined,
  );
  if (named !== undefined) return { address: named, isNamed: true };
  const free = freeAddressNear(network, near);
  return free === undefined ? undefined : { address: free, isNamed: false };
};

/**
 * Gives an endpoint an address. Selectors that named the old one name the new one, and where they still leave out a tunnel
 * of this endpoint, a selector is added.
 */
export const readdressPatch = (
  network: Network,
  endpoint: string,
  family: Family,
  address: string,
): MergePatch => {
  const { design } = network;
  const field = familyField(family);
  const old = design.endpoints[endpoint]![field];
  const patches: MergePatch[] = [{ endpoints: { [endpoint]: { [field]: address } } }];
  const isOld = (prefix: string): boolean =>
    old !== undefined &&
    prefix.endsWith(`/${hostBits(family)}`) &&
    plainAddress(prefix) === plainAddress(old);
  for (const { tunnel: id, end } of network.tunnelsByEndpoint.get(endpoint) ?? []) {
    const tunnel = design.tunnels[id]!;
    if (tunnel.association === undefined) continue;
    const association = design.associations[tunnel.association]!;
    const mine = associationEndOf(network, tunnel, association, end);
    if (mine === undefined) continue;
    for (const side of ends)
      for (const [selector, prefixes] of Object.entries(association[side].selectors ?? {})) {
        const half = side === mine ? 'local' : 'remote';
        if (isOld(prefixes[half]))
          patches.push({
            associations: {
              [tunnel.association]: { [side]: { selectors: { [selector]: { [half]: address } } } },
            },
          });
      }
  }
  const readdressed = applyPatch(design, joinPatches(design, patches));
  const tunnels = (network.tunnelsByEndpoint.get(endpoint) ?? []).map(({ tunnel }) => tunnel);
  const covered = applyPatch(readdressed, coverPatch(indexNetwork(readdressed), tunnels));
  return diffPatch(design, covered);
};
