import { segmentReach } from '../../engine/flood/segment-reach.ts';
import { inLetterOrder } from '../../engine/flood/segment-nodes.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Entry } from '../../engine/model/design.ts';
import type { Network } from '../../engine/network/network.ts';
import { capacitiesOf } from '../../engine/rules/segment-capacity.ts';
import { protocolWords } from '../../engine/model/protocol-words.ts';

/** A segment in one line: what it needs and what it gets. */
export interface SegmentRow {
  readonly id: string;
  readonly letter: string;
  readonly name: string;
  readonly protocols: string;
  readonly neededBytes: number | undefined;
  /** The largest IP packet that its narrowest tunnel lets through whole; undefined where no tunnel carries it or a fact is missing. */
  readonly fittingBytes: number | undefined;
  readonly mustBeFiltered: boolean | undefined;
  readonly hosts: number;
  readonly hostsExpected: number | undefined;
  readonly sites: number;
  readonly tunnels: number;
  readonly demands: number;
  readonly joined: Joined;
}

/** Whether all places of a segment hear each other. */
export type Joined = 'all' | 'parted' | 'one-place' | 'nowhere';

/** One site of a segment. */
export interface PlaceRow {
  readonly key: string;
  readonly segment: string;
  readonly letter: string;
  readonly segmentName: string;
  readonly site: string;
  readonly siteName: string;
  readonly vlan: number | undefined;
  readonly subnets: readonly string[];
  readonly hosts: number;
  readonly landing: Landing;
}

export type Landing =
  | { readonly kind: 'no-vlan' }
  /** Nothing at the site has its VLAN. */
  | { readonly kind: 'unattached' }
  | { readonly kind: 'joined' }
  /** Only some of its places hear this one: which part of how many, counted from 1. */
  | { readonly kind: 'parted'; readonly parts: readonly number[]; readonly of: number };

const reachOf = (network: Network, id: string) => {
  const { groups, partings, unattachedSites } = segmentReach(network, id);
  const isParted = partings.length > 0;
  const partsBySite = new Map<string, Set<number>>();
  groups.forEach(({ points }, part) => {
    for (const { site } of points) {
      const parts = partsBySite.get(site);
      if (parts === undefined) partsBySite.set(site, new Set([part + 1]));
      else parts.add(part + 1);
    }
  });
  return { groups, isParted, partsBySite, unattachedSites: new Set(unattachedSites) };
};

/** All segments in order of letter. */
export const segmentRows = (network: Network): readonly SegmentRow[] => {
  const { design } = network;
  const carriedBy = new Map<string, number>();
  for (const [, segments] of tunnelSegments(network))
    for (const id of segments) carriedBy.set(id, (carriedBy.get(id) ?? 0) + 1);
  const capacities = capacitiesOf(network);
  const demands = Object.values(design.demands);
  return inLetterOrder(network).map((id) => {
    const segment: Entry<'segments'> = design.segments[id]!;
    const reach = reachOf(network, id);
    return {
      id,
      letter: segment.letter,
      name: segment.name,
      protocols: (segment.protocols ?? []).map((protocol) => protocolWords[protocol]).join(', '),
      neededBytes: segment.mtu,
      fittingBytes: capacities.get(id)?.[0]?.largestBytes,
      mustBeFiltered: segment.mustBeFiltered,
      hosts: network.hostsBySegment.get(id)?.length ?? 0,
      hostsExpected: segment.hostsExpected,
      sites: Object.keys(segment.sites).length,
      tunnels: carriedBy.get(id) ?? 0,
      demands: demands.filter((demand) => demand.segment === id).length,
      joined: reach.isParted
        ? 'parted'
        : reach.partsBySite.size === 0
          ? 'nowhere'
          : reach.unattachedSites.size > 0
            ? 'parted'
            : reach.partsBySite.size === 1
              ? 'one-place'
              : 'all',
    };
  });
};

/** Every site of every segment, or of one; segments in order of letter, sites in the order of the design. */
export const placeRows = (network: Network, only?: string): readonly PlaceRow[] => {
  const { design } = network;
  return inLetterOrder(network)
    .filter((id) => only === undefined || id === only)
    .flatMap((id) => {
      const segment: Entry<'segments'> = design.segments[id]!;
      const reach = reachOf(network, id);
      const hosts = new Map<string, number>();
      for (const host of network.hostsBySegment.get(id) ?? []) {
        const { site } = design.devices[host]!;
        hosts.set(site, (hosts.get(site) ?? 0) + 1);
      }
      return Object.entries(design.sites).flatMap(([site, { name }]): readonly PlaceRow[] => {
        const at = segment.sites[site];
        if (at === undefined) return [];
        const parts = reach.partsBySite.get(site);
        return [
          {
            key: `${id}/${site}`,
            segment: id,
            letter: segment.letter,
            segmentName: segment.name,
            site,
            siteName: name,
            vlan: at.vlan,
            subnets: at.subnets ?? [],
            hosts: hosts.get(site) ?? 0,
            landing:
              parts !== undefined
                ? reach.isParted
                  ? { kind: 'parted', parts: [...parts], of: reach.groups.length }
                  : { kind: 'joined' }
                : at.vlan === undefined
                  ? { kind: 'no-vlan' }
                  : { kind: 'unattached' },
          },
        ];
      });
    });
};

/** A place's state in words. */
export const landingWords = (landing: Landing): string => {
  switch (landing.kind) {
    case 'no-vlan':
      return 'no VLAN stated';
    case 'unattached':
      return 'nothing here has its VLAN';
    case 'joined':
      return 'joined';
    case 'parted':
      return `part ${landing.parts.join(' and ')} of ${landing.of}`;
  }
};

export const joinedWords: { readonly [J in Joined]: string } = {
  all: 'all joined',
  parted: 'parted',
  'one-place': 'at one site only',
  nowhere: 'lands nowhere',
};
