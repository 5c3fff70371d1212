import fc from 'fast-check';
import type { StretchForm } from '#engine/stretch/stretch-form.ts';
import type { Protocol } from '#engine/model/intent.ts';

type Form = { -readonly [K in keyof StretchForm]: StretchForm[K] };

/** Ids that are their stems: readable, the same each time. */
export const stemIds = (stem: string): string => stem;

const names = ['Head office', 'Gullhaven', 'Orrin Point', 'Skerry', 'Marl', 'Tarn', 'Velt', 'Wick'];

/** A form for `count` sites on one access that is not trusted. */
export const formOf = (count: number, change: Partial<Form> = {}): StretchForm => ({
  sites: Array.from({ length: count }, (_, i) => ({
    key: `s${i}`,
    name: names[i] ?? `Stage ${i + 1}`,
    gateway: 'firewall',
    landings: [{ transport: 'coast', address: `198.51.100.${10 + i}` }],
  })),
  transports: [{ key: 'coast', name: 'Coastal access', kind: 'internet', mtu: 1500 }],
  segments: [{ key: 'tickets', name: 'Ticketing', subnet: '10.110.0.0/22', protocols: ['ipv4'] }],
  topology: count === 2 ? { kind: 'pair' } : { kind: 'hub', hub: 's0' },
  encrypted: true,
  sampleHosts: true,
  ...change,
});

/** Protocols for which a form alone can vouch: no neighbour protocol that bridges stop, no clock over an uneven line. */
const anywhere: readonly Protocol[] = [
  'ipv4',
  'ipv6',
  'multicast',
  'igmp',
  'ospf',
  'is-is',
  'pim',
  'vrrp',
  'bfd',
  'dhcp',
  'ptp',
  'cfm',
  'real-time-ethernet',
];
const neighbourly: readonly Protocol[] = ['lacp', 'eapol', 'spanning-tree', 'lldp'];

const landing = (transport: string) =>
  fc.record(
    {
      transport: fc.constant(transport),
      dynamic: fc.boolean(),
      nat: fc.constantFrom('none' as const, 'hides' as const, 'forwarded' as const),
      pppoe: fc.boolean(),
    },
    { requiredKeys: ['transport'] },
  );

const reachable = ({ transport, pppoe }: { readonly transport: string; readonly pppoe?: boolean }) => ({
  transport,
  ...(pppoe === undefined ? {} : { pppoe }),
});

/** Forms that can be built: those that contradict themselves are mended on the way, not thrown away. */
export const validForms: fc.Arbitrary<StretchForm> = fc
  .record({
    kind: fc.constantFrom('pair' as const, 'hub' as const, 'chain' as const, 'mesh' as const),
    count: fc.integer({ min: 2, max: 7 }),
    hub: fc.nat(6),
    second: fc.constantFrom('none', 'trusted', 'untrusted'),
    mtu: fc.constantFrom(undefined, 1500, 1600, 9000),
    encrypted: fc.boolean(),
    six: fc.boolean(),
    authentication: fc.constantFrom(undefined, 'certificate' as const, 'pre-shared-key' as const),
    domain: fc.constantFrom(undefined, 'saltmarsh.example'),
    sampleHosts: fc.constantFrom(undefined, true, false),
    gateways: fc.array(fc.constantFrom('firewall' as const, 'ha-pair' as const, 'router' as const), {
      minLength: 7,
      maxLength: 7,
    }),
    lands: fc.array(fc.tuple(landing('coast'), landing('ring'), fc.boolean()), {
      minLength: 7,
      maxLength: 7,
    }),
    segments: fc.array(
      fc.record({
        protocols: fc.uniqueArray(fc.constantFrom(...anywhere), { minLength: 1, maxLength: 5 }),
        neighbour: fc.uniqueArray(fc.constantFrom(...neighbourly), { maxLength: 2 }),
        filtered: fc.boolean(),
        subnet: fc.constantFrom('none', 'v4', 'v6'),
        members: fc.uniqueArray(fc.nat(6), { minLength: 2, maxLength: 7 }),
        everywhere: fc.boolean(),
        vlan: fc.boolean(),
      }),
      { minLength: 1, maxLength: 4 },
    ),
  })
  .map((seed) => {
    const count = seed.kind === 'pair' ? 2 : seed.count;
    // Without encryption everything has to be trusted and free of NAT.
    const encrypted = seed.encrypted || seed.second === 'untrusted';
    const hub = seed.hub % count;
    const isPairOf = (members: readonly number[]): boolean =>
      members.length === 2 &&
      (seed.kind === 'pair' ||
        seed.kind === 'mesh' ||
        (seed.kind === 'hub' && members.includes(hub)) ||
        (seed.kind === 'chain' && Math.abs(members[0]! - members[1]!) === 1));
    const segments = seed.segments.map((segment, i) => {
      const some = [...new Set(segment.members.map((m) => m % count))].sort((a, b) => a - b);
      // The first segment is everywhere, so that no site is left without one.
      const members =
        i === 0 || segment.everywhere || some.length < 2 ? Array.from({ length: count }, (_, m) => m) : some;
      const neighbour = isPairOf(members) ? segment.neighbour : [];
      const protocols = [...segment.protocols, ...neighbour];
      const isContiguous = members.at(-1)! - members[0]! === members.length - 1;
      const mayFilter = isPairOf(members) || seed.kind === 'hub' || (seed.kind === 'chain' && isContiguous);
      const filtered = segment.filtered && mayFilter;
      return {
        key: `seg${i}`,
        name: `Segment ${i + 1}`,
        protocols,
        ...(segment.subnet === 'none'
          ? {}
          : { subnet: segment.subnet === 'v4' ? `10.${110 + i}.0.0/24` : `2001:db8:${i + 1}::/64` }),
        ...(segment.vlan ? { vlan: 200 + i } : {}),
        ...(filtered ? { mustBeFiltered: true } : {}),
        ...((filtered || neighbour.some((each) => each !== 'lldp')) &&
        protocols.includes('real-time-ethernet')
          ? { etherTypes: [0x88b5] }
          : {}),
        ...(members.length === count ? {} : { sites: members.map((m) => `s${m}`) }),
      };
    });
    const hasSecond = seed.second !== 'none';
    return {
      sites: Array.from({ length: count }, (_, i) => {
        const [coast, ring, onRing] = seed.lands[i]!;
        // One end of each join has to be found by the other: all but one site can be reached.
        const mayHide = encrypted && (seed.kind === 'hub' ? i !== hub : i === 0);
        return {
          key: `s${i}`,
          name: names[i]!,
          gateway: seed.gateways[i]!,
          landings: [
            mayHide ? coast : reachable(coast),
            ...(hasSecond && onRing ? [mayHide ? ring : reachable(ring)] : []),
          ],
        };
      }),
      transports: [
        {
          key: 'coast',
          name: 'Coastal access',
          kind: encrypted ? ('internet' as const) : ('own-routed' as const),
          ...(seed.mtu === undefined ? {} : { mtu: seed.mtu }),
        },
        ...(hasSecond
          ? [
              {
                key: 'ring',
                name: 'Terminal ring',
                kind: seed.second === 'trusted' ? ('own-routed' as const) : ('private-routed' as const),
                mtu: 1500,
              },
            ]
          : []),
      ],
      segments,
      topology: seed.kind === 'hub' ? { kind: 'hub' as const, hub: `s${hub}` } : { kind: seed.kind },
      encrypted,
      ...(seed.authentication === undefined ? {} : { authentication: seed.authentication }),
      ...(seed.domain === undefined ? {} : { domain: seed.domain }),
      ...(seed.sampleHosts === undefined ? {} : { sampleHosts: seed.sampleHosts }),
      ...(seed.six && encrypted ? { pools: { loopbacks: '2001:db8:ff::/64' } } : {}),
    };
  });
