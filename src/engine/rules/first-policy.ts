import type { MergePatch } from '../model/merge-patch.ts';
import type { Protocol } from '../model/intent.ts';
import { firstRanks } from '../model/rank.ts';
import type { DesignFacts } from '../network/network.ts';
import { passesProtocol, protocolFrames, type PolicyRule } from './protocol-frames.ts';

type Rule = Omit<PolicyRule, 'rank'>;

// RFC 2328 appendix A.1, RFC 7761 section 4.9, RFC 9568 section 5.1: these speak to link-local groups.
const multicastSpeakers: readonly Protocol[] = ['multicast', 'igmp', 'ospf', 'pim', 'vrrp'];

const ranked = (rules: { readonly [id: string]: Rule }): { readonly [id: string]: PolicyRule } => {
  const ranks = firstRanks(Object.keys(rules).length);
  return Object.fromEntries(Object.entries(rules).map(([id, rule], i) => [id, { rank: ranks[i]!, ...rule }]));
};

/**
 * A policy to begin with: address resolution, IP between the segments' own subnets, multicast where a segment needs it,
 * and everything else denied and logged. A person narrows it down.
 */
export const firstPolicy = (design: DesignFacts, segments: readonly string[]): MergePatch => {
  const entries = segments.map((id) => design.segments[id]!);
  const subnets = [
    ...new Set(entries.flatMap(({ sites }) => Object.values(sites).flatMap((site) => site.subnets ?? []))),
  ].sort();
  const protocols = new Set<Protocol>(entries.flatMap((segment) => segment.protocols ?? []));
  const within = (isV6: boolean): Pick<Rule, 'sources' | 'destinations'> => {
    const own = subnets.filter((subnet) => subnet.includes(':') === isV6);
    return own.length === 0 ? {} : { sources: own, destinations: own };
  };
  const hasV6 = protocols.has('ipv6') || subnets.some((subnet) => subnet.includes(':'));
  const rules: { readonly [id: string]: Rule } = {
    arp: { name: 'Address resolution', action: 'permit', direction: 'both', frames: 'arp' },
    ipv4: {
      name: 'IPv4 between the sites',
      action: 'permit',
      direction: 'both',
      frames: 'ipv4',
      ...within(false),
    },
    ...(hasV6
      ? {
          // RFC 4861 section 4: neighbour discovery is ICMPv6, next header 58.
          discovery: {
            name: 'Neighbour discovery',
            action: 'permit',
            direction: 'both',
            frames: 'ipv6',
            protocol: 58,
          },
          ipv6: {
            name: 'IPv6 between the sites',
            action: 'permit',
            direction: 'both',
            frames: 'ipv6',
            ...within(true),
          },
        }
      : {}),
    ...(multicastSpeakers.some((protocol) => protocols.has(protocol))
      ? { multicast: { name: 'Multicast', action: 'permit', direction: 'both', frames: 'multicast' } }
      : {}),
  };
  const more = [...protocols].sort().flatMap((protocol): (readonly [string, Rule])[] => {
    const { name, permit } = protocolFrames[protocol];
    return permit === undefined || passesProtocol(ranked(rules), protocol)
      ? []
      : [[protocol, { name, action: 'permit', direction: 'both', ...permit }]];
  });
  return ranked({
    ...rules,
    ...Object.fromEntries(more),
    rest: { name: 'Everything else', action: 'deny', direction: 'both', frames: 'any', log: true },
  }) as unknown as MergePatch;
};
