import type { Collection, DeepReadonly, Design, Entry } from './design.ts';
import { collections, emptyDesign } from './design.ts';
import type { hostFaces } from './devices.ts';
import type { Protocol, Segment } from './intent.ts';
import type { AssociationEnd, Tunnel } from './overlay.ts';
import { parseDesign } from './parse-design.ts';
import { firstRanks, rankAtEnd } from './rank.ts';
import type { Landing, Transport } from './underlay.ts';

type Face = (typeof hostFaces)[number];
type Draft = { -readonly [C in Collection]: { [id: string]: Entry<C> } };

export interface SegmentPlan {
  readonly letter: string;
  readonly name: string;
  readonly vlan: number;
  readonly subnet: string;
  readonly protocols?: readonly Protocol[];
  readonly mtu?: number;
  readonly mustBeFiltered?: boolean;
}
export interface HostPlan {
  readonly name: string;
  readonly segment: string;
  readonly face?: Face;
  readonly address?: string;
}
export interface SitePlan {
  readonly name: string;
  readonly gateway?: 'firewall' | 'ha-pair' | 'router';
  readonly gatewayName?: string;
  readonly memberNames?: readonly [string, string];
  readonly segments: readonly string[];
  readonly hosts?: readonly HostPlan[];
  /** What the site's gateway has on each transport it lands on. */
  readonly landings: { readonly [transport: string]: DeepReadonly<Partial<Landing>> };
  /** Loopback address by transport, /32 or /128. */
  readonly loopbacks: { readonly [transport: string]: string };
  readonly withoutSwitch?: boolean;
}
export interface JoinPlan {
  readonly transport: string;
  readonly segments: readonly string[];
  readonly vni: (segment: string) => number;
  /** Absent: an IPsec association with the usual strong proposals. false: bare tunnels. */
  readonly protectedBy?: false | DeepReadonly<Partial<Omit<AssociationEnd, 'device' | 'via'>>>;
  readonly isolation?: string;
  readonly tunnel?: Partial<Tunnel['a']>;
}

export interface DesignBuilder {
  readonly add: <C extends Collection>(collection: C, id: string, entry: Entry<C>) => DesignBuilder;
  readonly meta: (meta: Design['meta']) => DesignBuilder;
  readonly segment: (id: string, plan: SegmentPlan) => DesignBuilder;
  readonly transport: (id: string, transport: DeepReadonly<Transport>) => DesignBuilder;
  readonly site: (id: string, plan: SitePlan) => DesignBuilder;
  readonly join: (from: string, to: string, plan: JoinPlan) => DesignBuilder;
  /** The design so far; throws with all problems when the parts do not fit together, which is the caller's bug. */
  readonly build: () => Design;
}

const gigabit = 1_000_000_000;
const isV6 = (address: string): boolean => address.includes(':');

/**
 * Puts a design together from parts as a person would: sites with a gateway, a switch and hosts, joined by associations and
 * tunnels. Ids follow the names (`fw-gul`, `sw-gul`, `as-ho-gul`, `tn-ho-gul-a`, `br-gul-a`), so that tests can name them.
 */
export const designBuilder = (title: string): DesignBuilder => {
  let meta: Design['meta'] = { title };
  const draft = Object.fromEntries(collections.map((collection) => [collection, {}])) as unknown as Draft;
  const plans = new Map<string, SitePlan>();
  const gatewayOf = (site: string): string => `fw-${site}`;
  const endpointOf = (site: string, transport: string): string => {
    const first = Object.keys(plans.get(site)!.loopbacks)[0];
    return transport === first ? `lo-${site}` : `lo-${site}-${transport}`;
  };

  const builder: DesignBuilder = {
    add: (collection, id, entry) => {
      (draft[collection] as { [id: string]: typeof entry })[id] = entry;
      return builder;
    },
    meta: (next) => {
      meta = next;
      return builder;
    },
    segment: (id, plan) => {
      const { vlan: _vlan, subnet: _subnet, protocols, ...rest } = plan;
      const segment: DeepReadonly<Segment> = { ...rest, protocols: protocols ?? ['ipv4'], sites: {} };
      segmentPlans.set(id, plan);
      return builder.add('segments', id, segment);
    },
    transport: (id, transport) => builder.add('transports', id, transport),
    site: (id, plan) => {
      plans.set(id, plan);
      builder.add('sites', id, { name: plan.name });
      addGateway(id, plan);
      addSegmentsOf(id, plan);
      addAccess(id, plan);
      return builder;
    },
    join: (from, to, plan) => {
      join(from, to, plan);
      return builder;
    },
    build: () => {
      const parsed = parseDesign({ ...emptyDesign(title), meta, ...draft });
      if (!parsed.ok)
        throw new Error(parsed.problems.map((p) => `${p.path}: ${p.value}, ${p.expected}`).join('\n'));
      return parsed.value;
    },
  };
  const segmentPlans = new Map<string, SegmentPlan>();

  const addGateway = (id: string, plan: SitePlan): void => {
    const transports = Object.keys(plan.landings);
    const kind = plan.gateway ?? 'firewall';
    const name = plan.gatewayName ?? gatewayOf(id);
    const ports = {
      ...Object.fromEntries(
        transports.map((_transport, i) => [
          `wan${i + 1}`,
          { number: i + 1, name: `wan${i + 1}`, role: 'wan' as const, speedBps: gigabit, mtu: 1500 },
        ]),
      ),
      lan1: {
        number: transports.length + 1,
        name: 'lan1',
        role: 'lan' as const,
        mode: 'trunk' as const,
        speedBps: gigabit,
        mtu: 1500,
        allowedVlans: plan.segments.map((segment) => segmentPlans.get(segment)!.vlan),
      },
      lan2: {
        number: transports.length + 2,
        name: 'lan2',
        role: 'lan' as const,
        mode: 'trunk' as const,
        speedBps: gigabit,
        mtu: 1500,
      },
    };
    if (kind === 'ha-pair') {
      const sync = transports.length + 3;
      builder.add('devices', gatewayOf(id), {
        kind,
        site: id,
        name,
        memberNames: { 1: plan.memberNames?.[0] ?? `${name}-1`, 2: plan.memberNames?.[1] ?? `${name}-2` },
        mode: 'active-standby',
        active: 1,
        stateSync: true,
        failoverUs: 2_000_000,
        ports: {
          ...ports,
          sync1: { number: sync, name: 'sync1', role: 'member-link', speedBps: gigabit },
          sync2: { number: sync + 1, name: 'sync2', role: 'member-link', speedBps: gigabit },
        },
      });
      for (const port of ['sync1', 'sync2'])
        builder.add('links', `cb-${id}-${port}`, {
          kind: 'cable',
          a: { device: gatewayOf(id), port, member: 1 },
          b: { device: gatewayOf(id), port, member: 2 },
        });
    } else {
      builder.add('devices', gatewayOf(id), { kind, site: id, name, ports });
    }
    transports.forEach((transport, i) =>
      builder.add('links', `ld-${id}-${transport}`, {
        kind: 'landing',
        device: gatewayOf(id),
        port: `wan${i + 1}`,
        transport,
        ...plan.landings[transport],
      }),
    );
    for (const [transport, address] of Object.entries(plan.loopbacks)) {
      const endpoint = endpointOf(id, transport);
      const place = isV6(address) ? { ipv6: address } : { ipv4: address };
      builder.add('endpoints', endpoint, { device: gatewayOf(id), name: endpoint, ...place });
    }
  };

  const addSegmentsOf = (id: string, plan: SitePlan): void => {
    for (const segment of plan.segments) {
      const { vlan, subnet } = segmentPlans.get(segment)!;
      const before = draft.segments[segment]!;
      draft.segments[segment] = { ...before, sites: { ...before.sites, [id]: { vlan, subnets: [subnet] } } };
      const [rank] = firstRanks(1);
      builder.add('forwarders', `br-${id}-${segment}`, {
        device: gatewayOf(id),
        kind: 'bridge',
        name: `br-${vlan}`,
        circuits: { access: { kind: 'port', rank: rank!, port: 'lan1', vlans: [vlan] } },
      });
    }
  };

  const addAccess = (id: string, plan: SitePlan): void => {
    if (plan.withoutSwitch === true) return;
    const isPair = plan.gateway === 'ha-pair';
    const uplinks = isPair ? 2 : 1;
    const hosts = plan.hosts ?? [];
    const trunk = {
      role: 'lan' as const,
      mode: 'trunk' as const,
      speedBps: gigabit,
      mtu: 1500,
      allowedVlans: plan.segments.map((segment) => segmentPlans.get(segment)!.vlan),
    };
    builder.add('devices', `sw-${id}`, {
      kind: 'switch',
      site: id,
      name: `sw-${id}`,
      ports: {
        ...Object.fromEntries(
          Array.from({ length: uplinks }, (_, i) => [`p${i + 1}`, { ...trunk, number: i + 1 }]),
        ),
        ...Object.fromEntries(
          hosts.map((host, i) => [
            `p${uplinks + i + 1}`,
            {
              number: uplinks + i + 1,
              role: 'lan' as const,
              mode: 'access' as const,
              vlan: segmentPlans.get(host.segment)!.vlan,
              speedBps: gigabit,
              mtu: 1500,
              stormLimitPps: 500,
            },
          ]),
        ),
      },
    });
    for (let i = 1; i <= uplinks; i += 1)
      builder.add('links', `cb-${id}-up${i}`, {
        kind: 'cable',
        a: { device: `sw-${id}`, port: `p${i}` },
        b: { device: gatewayOf(id), port: 'lan1', ...(isPair ? { member: i as 1 | 2 } : {}) },
      });
    hosts.forEach((host, i) => {
      builder.add('devices', host.name, {
        kind: 'host',
        site: id,
        name: host.name,
        segment: host.segment,
        ...(host.face === undefined ? {} : { face: host.face }),
        ...(host.address === undefined ? {} : { addresses: [host.address] }),
        ports: { p1: { number: 1, role: 'lan', mode: 'access', speedBps: gigabit, mtu: 1500 } },
      });
      builder.add('links', `cb-${host.name}`, {
        kind: 'cable',
        a: { device: host.name, port: 'p1' },
        b: { device: `sw-${id}`, port: `p${uplinks + i + 1}` },
      });
    });
  };

  const joinEnd = (
    site: string,
    peer: string,
    plan: JoinPlan,
    start: 'starts' | 'answers',
  ): DeepReadonly<AssociationEnd> => {
    const [rank] = firstRanks(1);
    return {
      device: gatewayOf(site),
      via: { first: { rank: rank!, landing: `ld-${site}-${plan.transport}` } },
      ikeVersion: 2,
      identity: `${gatewayOf(site)}.saltmarsh.example`,
      authentication: { method: 'pre-shared-key', vaultEntry: `ipsec ${[site, peer].sort().join(' ')}` },
      ikeProposals: {
        first: { rank: rank!, encryption: 'aes-gcm-16', keyBits: 256, prf: 'hmac-sha2-256', group: 19 },
      },
      espProposals: { first: { rank: rank!, encryption: 'aes-gcm-16', keyBits: 256, group: 19 } },
      selectors: {
        loopbacks: {
          rank: rank!,
          local: plans.get(site)!.loopbacks[plan.transport]!,
          remote: plans.get(peer)!.loopbacks[plan.transport]!,
        },
      },
      start,
      liveness: { intervalSeconds: 10, tries: 3 },
      perfectForwardSecrecy: true,
      extendedSequence: true,
      ikeLifetimeSeconds: 14_400,
      childLifetimeSeconds: 3_600,
      replayWindow: 128,
      mode: 'tunnel',
      outerDf: 'set',
      whenDown: 'drop',
      ...(plan.protectedBy === false ? {} : plan.protectedBy),
    };
  };

  const join = (from: string, to: string, plan: JoinPlan): void => {
    const second = Object.keys(plans.get(from)!.loopbacks)[0] === plan.transport ? '' : `-${plan.transport}`;
    const association = `as-${from}-${to}${second}`;
    const isProtected = plan.protectedBy !== false;
    const [rank] = firstRanks(1);
    if (isProtected)
      builder.add('associations', association, {
        name: association,
        a: joinEnd(from, to, plan, 'starts'),
        b: joinEnd(to, from, plan, 'answers'),
      });
    for (const segment of plan.segments) {
      const tunnel = `tn-${from}-${to}-${segment}${second}`;
      const end = (site: string) => ({
        endpoint: endpointOf(site, plan.transport),
        vni: plan.vni(segment),
        udpPort: 4789,
        outerDf: 'set' as const,
        innerTags: 'strip' as const,
        ...(isProtected ? {} : { via: { first: { rank: rank!, landing: `ld-${site}-${plan.transport}` } } }),
        ...plan.tunnel,
      });
      builder.add('tunnels', tunnel, {
        name: tunnel,
        a: end(from),
        b: end(to),
        ...(isProtected ? { association } : {}),
        family: isV6(plans.get(from)!.loopbacks[plan.transport]!) ? 6 : 4,
      });
      for (const site of [from, to]) {
        const id = `br-${site}-${segment}`;
        const forwarder = draft.forwarders[id]!;
        draft.forwarders[id] = {
          ...forwarder,
          circuits: {
            ...forwarder.circuits,
            [tunnel]: {
              kind: 'tunnel',
              rank: rankAtEnd(forwarder.circuits),
              tunnel,
              ...(plan.isolation === undefined ? {} : { isolation: plan.isolation }),
            },
          },
        };
      }
    }
  };

  return builder;
};
