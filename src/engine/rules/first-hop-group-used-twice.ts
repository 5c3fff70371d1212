import type { Network } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { plainAddress } from './endpoint-addresses.ts';
import { segmentGatewayFacts, segmentGateways, type SegmentGateway } from './segment-gateways.ts';
import { siteNameOf } from './places.ts';

const addressOf = ({ gateway }: SegmentGateway): string | undefined =>
  gateway.redundancy?.address === undefined ? undefined : plainAddress(gateway.redundancy.address);

interface Clash {
  readonly segment: string;
  readonly group: number;
  /** The gateways of each virtual address, those of one family only. */
  readonly byAddress: readonly (readonly [address: string, gateways: readonly SegmentGateway[]])[];
}

const clashes = (network: Network): readonly Clash[] =>
  [...segmentGateways(network)].flatMap(([segment, gateways]) => {
    const groups = new Map<string, Map<string, SegmentGateway[]>>();
    for (const each of gateways) {
      const address = addressOf(each);
      if (address === undefined) continue;
      // RFC 9568 section 5.2.3: IPv4 and IPv6 count their virtual routers apart.
      const key = `${each.gateway.redundancy!.group} ${address.includes(':') ? 6 : 4}`;
      const byAddress = groups.get(key) ?? new Map<string, SegmentGateway[]>();
      groups.set(key, byAddress.set(address, [...(byAddress.get(address) ?? []), each]));
    }
    return [...groups].flatMap(([key, byAddress]) =>
      byAddress.size < 2 ? [] : [{ segment, group: Number(key.split(' ')[0]), byAddress: [...byAddress] }],
    );
  });

export const firstHopGroupUsedTwice = defineRule({
  id: 'first-hop-group-used-twice',
  title: 'A first-hop redundancy group of a segment stands for one address',
  severity: 'blocking',
  looksAt: segmentGatewayFacts,
  why: 'The group’s number makes its MAC address. Two groups of one number on one segment have one MAC address in two places, or take each other for the same group.',
  seen: 'The gateway’s MAC address moves between a port and the tunnel several times a second, or one of the two gateways falls silent.',
  sources: [{ document: 'RFC 9568', clause: 'section 7.3' }],
  messages: {
    twice: {
      words: 'group used twice',
      sentence: (v: {
        readonly group: number;
        readonly addressA: string;
        readonly placeA: string;
        readonly addressB: string;
        readonly placeB: string;
      }) => `Group ${v.group} is ${v.addressA} at ${v.placeA}, ${v.addressB} at ${v.placeB}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return clashes(network).map(({ segment, group, byAddress }) => {
      const [[addressA, [first]], [addressB, [second]]] = byAddress as unknown as readonly [
        readonly [string, readonly [SegmentGateway]],
        readonly [string, readonly [SegmentGateway]],
      ];
      const refs = byAddress.flatMap(([, gateways]) =>
        gateways.map(({ forwarder }) => ({ collection: 'forwarders' as const, id: forwarder })),
      );
      return {
        message: 'twice',
        values: {
          group,
          addressA,
          placeA: siteNameOf(design, first.device),
          addressB,
          placeB: siteNameOf(design, second.device),
        },
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment, String(group)],
        properties: refs.map((ref) => ({ ref, path: ['gateway', 'redundancy', 'group'] })),
        basis: byAddress.map(([address]) => address),
      };
    });
  },
  fixes: (fault, network) => {
    const [segment, group] = fault.identity!;
    const clash = clashes(network).find((each) => each.segment === segment && String(each.group) === group);
    const used = new Set(
      (segmentGateways(network).get(segment!) ?? []).map(({ gateway }) => gateway.redundancy?.group),
    );
    const free = Array.from({ length: 255 }, (_, i) => i + 1).filter((number) => !used.has(number));
    const others = clash?.byAddress.slice(1) ?? [];
    if (others.length === 0 || free.length < others.length) return [];
    return [
      {
        id: 'renumber',
        label: others.length === 1 ? `Group ${free[0]!} for ${others[0]![0]}` : 'Renumber all but one',
        sentence: `Leaves group ${fault.values.group} to ${fault.values.addressA} and gives the rest numbers that nobody on the segment has.`,
        patch: {
          forwarders: Object.fromEntries(
            others.flatMap(([, gateways], i) =>
              gateways.map(({ forwarder }) => [forwarder, { gateway: { redundancy: { group: free[i]! } } }]),
            ),
          ),
        },
      },
    ];
  },
});
