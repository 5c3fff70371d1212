import ipaddr from 'ipaddr.js';
import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, diffPatch, joinPatches } from '../model/merge-patch.ts';
import type { Family } from '../network/association-path.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { ends } from '../network/network.ts';
import { indexNetwork } from '../network/index-network.ts';
import { associationEndOf } from '../network/selectors-cover.ts';
import { coverPatch } from './selector-patch.ts';

export const families = [4, 6] as const satisfies readonly Family[];
export const familyField = (family: Family): 'ipv4' | 'ipv6' => (family === 4 ? 'ipv4' : 'ipv6');
const hostBits = (family: Family): number => (family === 4 ? 32 : 128);

/** One spelling for one address, prefix length left out. */
export const plainAddress = (text: string): string => ipaddr.parse(text.split('/')[0]!).toNormalizedString();

/** True when the prefix, such as a subnet, holds the address. */
export const prefixHolds = (prefix: string, address: string): boolean => {
  const range = ipaddr.parseCIDR(prefix);
  const single = ipaddr.parse(address.split('/')[0]!);
  return range[0].kind() === single.kind() && single.match(range);
};

/** Every subnet of every segment, with the segment's id. */
export const segmentSubnets = (
  design: DesignFacts,
): readonly (readonly [subnet: string, segment: string])[] =>
  Object.entries(design.segments).flatMap(([id, segment]) =>
    Object.values(segment.sites).flatMap(({ subnets }) =>
      (subnets ?? []).map((subnet) => [subnet, id] as const),
    ),
  );

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
const freeAddressNear = (design: DesignFacts, near: string): string | undefined => {
  const bytes = ipaddr.parse(near.split('/')[0]!).toByteArray();
  const family: Family = bytes.length === 4 ? 4 : 6;
  const last = family === 4 ? 254 : 0xffff;
  const start = family === 4 ? bytes[3]! : bytes[14]! * 256 + bytes[15]!;
  const used = usedAddresses(design);
  const subnets = segmentSubnets(design).map(([subnet]) => subnet);
  for (let step = 0; step < last; step += 1) {
    const host = ((start + step) % last) + 1;
    const candidate = ipaddr
      .fromByteArray(
        family === 4 ? [...bytes.slice(0, 3), host] : [...bytes.slice(0, 14), host >> 8, host & 0xff],
      )
      .toString();
    if (!used.has(plainAddress(candidate)) && !subnets.some((subnet) => prefixHolds(subnet, candidate)))
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
  const subnets = segmentSubnets(design).map(([subnet]) => subnet);
  const named = addressesInSelectors(network, endpoint, family).find(
    (prefix) => !taken.has(plainAddress(prefix)) && !subnets.some((subnet) => prefixHolds(subnet, prefix)),
  );
  if (named !== undefined) return { address: named, isNamed: true };
  const free = freeAddressNear(design, near);
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
