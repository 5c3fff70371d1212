import type { Id } from '../model/scalars.ts';
import type { DesignFacts } from '../network/network.ts';
import type { DesignNumbers } from './numbering-context.ts';

const sorted = <T extends number | string>(values: Iterable<T | undefined>): readonly T[] =>
  [...new Set([...values].filter((value) => value !== undefined))].sort((a, b) => (a < b ? -1 : 1));

/** Everything numbered in a design, as another design's context holds it. */
export const numbersOf = (design: DesignFacts): Required<DesignNumbers> => ({
  name: design.meta.title,
  vnis: sorted(Object.values(design.tunnels).flatMap(({ a, b }) => [a.vni, b.vni])),
  vlans: sorted(
    Object.values(design.segments).flatMap(({ sites }) => Object.values(sites).map(({ vlan }) => vlan)),
  ),
  tunnelNames: sorted(Object.values(design.tunnels).map(({ name }) => name)),
  loopbacks: sorted(
    Object.values(design.endpoints).flatMap(({ ipv4, ipv6 }) => [ipv4?.split('/')[0], ipv6?.split('/')[0]]),
  ),
  networks: sorted(
    Object.values(design.segments).flatMap(({ sites }) =>
      Object.values(sites).flatMap(({ subnets }) => subnets ?? []),
    ),
  ),
});

/** VLANs that mean something at a site: of segments, ports and circuits. */
export const vlansAt = (design: DesignFacts, site: Id): ReadonlySet<number> => {
  const used = new Set<number>();
  for (const { sites } of Object.values(design.segments)) {
    const vlan = sites[site]?.vlan;
    if (vlan !== undefined) used.add(vlan);
  }
  const here = new Set<Id>();
  for (const [id, device] of Object.entries(design.devices)) {
    if (device.site !== site) continue;
    here.add(id);
    for (const { vlan, nativeVlan, allowedVlans } of Object.values(device.ports)) {
      if (vlan !== undefined) used.add(vlan);
      if (nativeVlan !== undefined) used.add(nativeVlan);
      if (Array.isArray(allowedVlans)) for (const one of allowedVlans as readonly number[]) used.add(one);
    }
  }
  for (const { device, circuits } of Object.values(design.forwarders))
    if (here.has(device))
      for (const circuit of Object.values(circuits))
        if (circuit.kind === 'port' && typeof circuit.vlans !== 'string')
          for (const vlan of circuit.vlans) used.add(vlan);
  return used;
};

/** Every address that somebody in the design has: endpoints, hosts, landings and gateways. */
export const addressesOf = (design: DesignFacts): readonly string[] =>
  [
    ...Object.values(design.endpoints).flatMap(({ ipv4, ipv6 }) => [ipv4, ipv6]),
    ...Object.values(design.devices).flatMap((device) =>
      device.kind === 'host' ? (device.addresses ?? []) : [],
    ),
    ...Object.values(design.links).flatMap((link) => (link.kind === 'landing' ? [link.ipv4, link.ipv6] : [])),
    ...Object.values(design.forwarders).flatMap(({ gateway }) => [
      ...(gateway?.addresses ?? []),
      gateway?.redundancy?.address,
    ]),
  ].filter((address) => address !== undefined);
