import type { Design } from '#engine/model/design.ts';
import { designBuilder } from '#engine/model/design-builder.ts';

const vlans = { a: 110, b: 120, c: 130 } as const;
type Letter = keyof typeof vlans;

/** Saltmarsh Ferries: head office and three terminals on a coastal access, two terminals on the ferries' own ring as well. */
export const ferriesDesign = (options: { readonly hubOnBoth?: boolean } = {}): Design => {
  const builder = designBuilder('Terminals stretch')
    .transport('coast', {
      name: 'Coastal access',
      kind: 'internet',
      trusted: false,
      mtu: 1500,
      latencyUs: 18_000,
      jitterUs: 3_000,
      lossPpm: 200,
    })
    .transport('harbour', {
      name: 'Harbour ring',
      kind: 'own-routed',
      trusted: true,
      mtu: 1500,
      latencyUs: 4_000,
    });
  for (const [id, vlan] of Object.entries(vlans))
    builder.segment(id, {
      letter: id.toUpperCase(),
      name: `Segment ${id}`,
      vlan,
      subnet: `10.${vlan}.0.0/16`,
    });
  const sites: readonly (readonly [id: string, name: string, both: boolean, hosts: readonly Letter[]])[] = [
    ['ho', 'Head office', options.hubOnBoth === true, ['a', 'b', 'c']],
    ['gul', 'Gullhaven', false, ['a', 'b']],
    ['orr', 'Orrin Point', true, ['a', 'b', 'c']],
    ['ske', 'Skerry', true, ['a', 'c']],
  ];
  sites.forEach(([id, name, both, hosts], i) =>
    builder.site(id, {
      name,
      gateway: id === 'ho' ? 'ha-pair' : 'firewall',
      segments: ['a', 'b', 'c'],
      hosts: hosts.map((segment) => ({
        name: `${segment}-${id}`,
        segment,
        address: `10.${vlans[segment]}.${i}.20/16`,
      })),
      landings: {
        coast: { ipv4: `198.51.100.${10 + i}` },
        ...(both ? { harbour: { ipv4: `10.64.8.${i + 1}` } } : {}),
      },
      loopbacks: {
        coast: `10.255.0.${i + 1}/32`,
        ...(both ? { harbour: `10.255.1.${i + 1}/32` } : {}),
      },
    }),
  );
  const vni = (base: number) => (segment: string) => base + segment.charCodeAt(0) - 97;
  builder
    .join('ho', 'gul', { transport: 'coast', segments: ['a', 'b'], vni: vni(10_010) })
    .join('ho', 'orr', { transport: 'coast', segments: ['a', 'b'], vni: vni(10_020) })
    .join('ho', 'ske', { transport: 'coast', segments: ['a', 'c'], vni: vni(10_030) })
    .join('orr', 'ske', { transport: 'harbour', segments: ['c'], vni: vni(10_200), protectedBy: false });
  if (options.hubOnBoth === true)
    builder.join('ho', 'orr', { transport: 'harbour', segments: ['c'], vni: vni(10_300) });
  return builder.build();
};
