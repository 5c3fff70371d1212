import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { plainAddress } from './endpoint-addresses.ts';
import { segmentGatewayFacts, segmentGateways, type SegmentGateway } from './segment-gateways.ts';
import { namedOrCounted } from './wording.ts';

interface Group {
  readonly segment: Id;
  readonly group: number;
  readonly members: readonly SegmentGateway[];
}

/** First-hop redundancy groups whose members stand at several sites. */
const groupsAcrossSites = (network: Network): readonly Group[] =>
  [...segmentGateways(network)].flatMap(([segment, gateways]) => {
    const byGroup = new Map<number, SegmentGateway[]>();
    for (const each of gateways) {
      const { redundancy } = each.gateway;
      if (redundancy !== undefined)
        byGroup.set(redundancy.group, [...(byGroup.get(redundancy.group) ?? []), each]);
    }
    return [...byGroup]
      .map(([group, members]): Group => ({ segment, group, members }))
      .filter(({ members }) => {
        const addresses = members.flatMap(({ gateway }) =>
          gateway.redundancy?.address === undefined ? [] : [plainAddress(gateway.redundancy.address)],
        );
        // One number for two addresses is two groups that met by chance.
        return new Set(members.map(({ site }) => site)).size > 1 && new Set(addresses).size < 2;
      });
  });

export const gatewayGroupAcrossSites = defineRule({
  id: 'gateway-group-across-sites',
  title: 'A first-hop redundancy group stays at one site',
  severity: 'degrading',
  looksAt: segmentGatewayFacts,
  why: 'While all is well the far site’s hosts leave through the tunnel and back. When the tunnel is cut each side finds itself alone and becomes active, and nothing decides who goes on when it heals. Accept it knowingly, or give each site a gateway of its own.',
  seen: 'After a cut both sites have an active gateway; after it heals connections reset until one has given way.',
  sources: [{ document: 'RFC 9568', clause: 'section 6.1' }, 'common practice, no source'],
  messages: {
    across: {
      words: 'group across sites',
      sentence: (v: { readonly group: number; readonly segment: string; readonly places: string }) =>
        `Gateway group ${v.group} of segment ${v.segment} spans ${v.places}`,
    },
  },
  check: (network) =>
    groupsAcrossSites(network).map(({ segment, group, members }) => {
      const { design } = network;
      const sites = [...new Set(members.map(({ site }) => site))];
      const refs = members.map(({ forwarder }) => ({ collection: 'forwarders' as const, id: forwarder }));
      return {
        message: 'across',
        values: {
          group,
          segment: entryOf(design.segments, segment).letter,
          places: namedOrCounted(
            sites.map((id) => entryOf(design.sites, id).name),
            'sites',
          ),
        },
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment, String(group)],
        properties: refs.map((ref) => ({ ref, path: ['gateway', 'redundancy', 'group'] })),
        basis: members.map(({ forwarder }) => forwarder),
      };
    }),
});
