import type { Collection, Design, Entry } from '#engine/model/design.ts';
import { collections, emptyDesign } from '#engine/model/design.ts';
import { rankAtEnd } from '#engine/model/rank.ts';

/**
 * Regions of up to ten sites round a hub. A site has a firewall, two switches and two hosts, cabled by link aggregation, and lands on
 * three transports: 5 devices and 15 links. A region has up to 25 tunnels for ten segments: eight that join the hub with one site,
 * one that joins all, one that joins most. So 1,000 devices come with 200 sites, 3,000 links, 500 tunnels and 200 segments. Faults
 * are strewn in: a loop in every tenth region, and in others a VNI that differs, a VLAN left out or a missing second uplink.
 */

type Draft = { -readonly [C in Collection]: { [id: string]: Entry<C> } };

const devicesPerSite = 5;
const sitesPerRegion = 10;
const transports = ['coast', 'fen', 'moor'] as const;
const gigabit = 1_000_000_000;
const rank = 'a0';

const letterOf = (n: number): string => {
  const within = n % 702;
  const last = String.fromCharCode(65 + (within % 26));
  return within < 26 ? last : String.fromCharCode(64 + Math.floor(within / 26)) + last;
};
const twoBytes = (n: number): string => `${n >> 8}.${n & 0xff}`;

interface Region {
  readonly index: number;
  /** Numbers of its sites; the first is the hub. */
  readonly sites: readonly number[];
}
interface SegmentPlan {
  readonly id: string;
  /** First two thirds of its subnet's address. */
  readonly network: string;
  readonly vlan: number;
  readonly sites: readonly number[];
}

const segmentsOf = ({ index, sites }: Region): readonly SegmentPlan[] => {
  const [hub, ...spokes] = sites as [number, ...number[]];
  const most = spokes.slice(0, 8);
  return [
    { id: `g${index}-all`, vlan: 100, sites },
    { id: `g${index}-most`, vlan: 101, sites: [hub, ...most] },
    ...most.map((spoke, i) => ({ id: `g${index}-p${i}`, vlan: 110 + i, sites: [hub, spoke] })),
  ].map((plan, i) => ({ ...plan, network: `10.${twoBytes(64 * 256 + index * sitesPerRegion + i)}` }));
};

const lan = (number: number, vlans: readonly number[], aggregation?: string) => ({
  number,
  role: 'lan' as const,
  mode: 'trunk' as const,
  speedBps: gigabit,
  mtu: 1500,
  allowedVlans: vlans,
  ...(aggregation === undefined ? {} : { aggregation }),
});

const addSite = (draft: Draft, n: number, region: Region, segments: readonly SegmentPlan[]): void => {
  const site = `s${n}`;
  const here = segments.filter((segment) => segment.sites.includes(n));
  const vlans = here.map(({ vlan }) => vlan);
  draft.sites[site] = { name: `Site ${n}` };
  const lags = (count: number, first: number, name: string, allowed: readonly number[]) =>
    Object.fromEntries(
      Array.from({ length: count }, (_, i) => [`${name}${i}`, lan(first + i, allowed, name)]),
    );
  draft.devices[`fw-${site}`] = {
    kind: 'firewall',
    site,
    name: `fw-${site}`,
    ports: {
      ...Object.fromEntries(
        transports.map((_transport, i) => [
          `wan${i}`,
          { number: i + 1, role: 'wan' as const, speedBps: gigabit, mtu: 1500 },
        ]),
      ),
      ...lags(4, 10, 'down', vlans),
    },
  };
  const forgotten = region.index % 5 === 3 && n === region.sites.at(-1) ? vlans.slice(1) : vlans;
  draft.devices[`sw1-${site}`] = {
    kind: 'switch',
    site,
    name: `sw1-${site}`,
    ports: { ...lags(4, 1, 'up', forgotten), ...lags(4, 11, 'next', vlans) },
  };
  const hosts = [0, 1].map((i) => ({ id: `h${i}-${site}`, segment: here[i % here.length]! }));
  draft.devices[`sw2-${site}`] = {
    kind: 'switch',
    site,
    name: `sw2-${site}`,
    ports: {
      ...lags(4, 1, 'up', vlans),
      ...Object.fromEntries(
        hosts.flatMap(({ segment }, i) =>
          [0, 1].map((k) => [
            `h${i}${k}`,
            {
              number: 20 + 2 * i + k,
              role: 'lan' as const,
              mode: 'access' as const,
              vlan: segment.vlan,
              speedBps: gigabit,
              aggregation: `h${i}`,
              stormLimitPps: 500,
            },
          ]),
        ),
      ),
    },
  };
  hosts.forEach(({ id, segment }, i) => {
    draft.devices[id] = {
      kind: 'host',
      site,
      name: id,
      segment: segment.id,
      addresses: [`${segment.network}.${10 + 2 * (n % sitesPerRegion) + i}/24`],
      ports: {
        p0: { number: 1, role: 'lan', mode: 'access', speedBps: gigabit, aggregation: 'both' },
        p1: { number: 2, role: 'lan', mode: 'access', speedBps: gigabit, aggregation: 'both' },
      },
    };
  });
  const cable = (id: string, a: readonly [string, string], b: readonly [string, string]): void => {
    draft.links[id] = {
      kind: 'cable',
      a: { device: a[0], port: a[1] },
      b: { device: b[0], port: b[1] },
    };
  };
  for (let i = 0; i < 4; i += 1) {
    cable(`cb-${site}-a${i}`, [`fw-${site}`, `down${i}`], [`sw1-${site}`, `up${i}`]);
    cable(`cb-${site}-b${i}`, [`sw1-${site}`, `next${i}`], [`sw2-${site}`, `up${i}`]);
    cable(`cb-${site}-h${i}`, [`sw2-${site}`, `h${i >> 1}${i & 1}`], [hosts[i >> 1]!.id, `p${i & 1}`]);
  }
  transports.forEach((transport, i) => {
    draft.links[`ld-${site}-${transport}`] = {
      kind: 'landing',
      device: `fw-${site}`,
      port: `wan${i}`,
      transport,
      ipv4: `172.${16 + i}.${twoBytes(n + 1)}`,
    };
  });
  draft.endpoints[`lo-${site}`] = {
    device: `fw-${site}`,
    name: `lo-${site}`,
    ipv4: `10.0.${twoBytes(n + 1)}/32`,
  };
  for (const { id, vlan } of here)
    draft.forwarders[`br-${site}-${id}`] = {
      device: `fw-${site}`,
      kind: 'bridge',
      name: `br-${vlan}`,
      circuits: { access: { kind: 'port', rank, port: 'down0', vlans: [vlan] } },
    };
};

const associationEnd = (own: number, far: number, start: 'starts' | 'answers') => ({
  device: `fw-s${own}`,
  via: { first: { rank, landing: `ld-s${own}-coast` } },
  ikeVersion: 2 as const,
  identity: `fw-s${own}.saltmarsh.example`,
  authentication: {
    method: 'pre-shared-key' as const,
    vaultEntry: `ipsec s${Math.min(own, far)} s${Math.max(own, far)}`,
  },
  ikeProposals: {
    first: {
      rank,
      encryption: 'aes-gcm-16' as const,
      keyBits: 256 as const,
      prf: 'hmac-sha2-256' as const,
      group: 19,
    },
  },
  espProposals: { first: { rank, encryption: 'aes-gcm-16' as const, keyBits: 256 as const, group: 19 } },
  selectors: {
    loopbacks: { rank, local: `10.0.${twoBytes(own + 1)}/32`, remote: `10.0.${twoBytes(far + 1)}/32` },
  },
  start,
  liveness: { intervalSeconds: 10, tries: 3 },
  perfectForwardSecrecy: true,
  mode: 'tunnel' as const,
  outerDf: 'set' as const,
});

const addTunnel = (
  draft: Draft,
  segment: string,
  from: number,
  to: number,
  vni: number,
  farVni = vni,
): void => {
  const association = `as-s${from}-s${to}`;
  draft.associations[association] ??= {
    name: association,
    a: associationEnd(from, to, 'starts'),
    b: associationEnd(to, from, 'answers'),
  };
  const id = `tn-s${from}-s${to}-${segment}`;
  const end = (site: number, own: number) => ({
    endpoint: `lo-s${site}`,
    vni: own,
    udpPort: 4789,
    outerDf: 'set' as const,
    innerTags: 'strip' as const,
  });
  draft.tunnels[id] = { name: id, a: end(from, vni), b: end(to, farVni), association, family: 4 };
  for (const site of [from, to]) {
    const forwarder = draft.forwarders[`br-s${site}-${segment}`]!;
    draft.forwarders[`br-s${site}-${segment}`] = {
      ...forwarder,
      circuits: {
        ...forwarder.circuits,
        [id]: { kind: 'tunnel', rank: rankAtEnd(forwarder.circuits), tunnel: id },
      },
    };
  }
};

/** A design of so many devices, the same every time. */
export const largeDesign = (deviceCount: number): Design => {
  const draft = Object.fromEntries(collections.map((collection) => [collection, {}])) as unknown as Draft;
  transports.forEach((id, i) => {
    draft.transports[id] = {
      name: `Transport ${id}`,
      kind: 'private-routed',
      trusted: false,
      mtu: 1500,
      latencyUs: 8_000 + 1_000 * i,
      families: [4],
    };
  });
  const siteCount = Math.max(2, Math.round(deviceCount / devicesPerSite));
  let vni = 4_096;
  let letter = 0;
  for (let first = 0, index = 0; first < siteCount; first += sitesPerRegion, index += 1) {
    const sites = Array.from({ length: Math.min(sitesPerRegion, siteCount - first) }, (_, i) => first + i);
    const region: Region = { index, sites };
    const segments = segmentsOf(region);
    for (const { id, vlan, network, sites: joined } of segments) {
      draft.segments[id] = {
        letter: letterOf(letter),
        name: `Segment ${id}`,
        mtu: 1396,
        protocols: ['ipv4'],
        sites: Object.fromEntries(joined.map((site) => [`s${site}`, { vlan, subnets: [`${network}.0/24`] }])),
      };
      letter += 1;
    }
    for (const site of sites) addSite(draft, site, region, segments);
    for (const { id, sites: joined } of segments) {
      const [hub, ...spokes] = joined as [number, ...number[]];
      spokes.forEach((spoke, i) => {
        vni += 1;
        addTunnel(draft, id, hub, spoke, vni, index % 5 === 1 && i === 7 ? vni + 500_000 : vni);
      });
      if (index % 10 === 0 && id.endsWith('-all') && spokes.length > 1) {
        vni += 1;
        addTunnel(draft, id, spokes[0]!, spokes[1]!, vni);
      }
    }
  }
  return { ...emptyDesign(`${deviceCount} devices`), ...draft };
};
