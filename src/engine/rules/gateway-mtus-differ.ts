import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { capacitiesOf } from './segment-capacity.ts';
import { segmentGateways, type SegmentGateway } from './segment-gateways.ts';
import { listed } from './wording.ts';

interface Differing {
  readonly segment: Id;
  readonly gateways: readonly SegmentGateway[];
  readonly mtus: readonly number[];
  readonly by: 'neighbours' | 'advertised';
}

const mtuOf = ({ gateway }: SegmentGateway): number => gateway.mtu ?? 0;

const differing = (network: Network): readonly Differing[] => {
  const capacities = capacitiesOf(network);
  return [...segmentGateways(network)].flatMap(([segment, all]): readonly Differing[] => {
    const { protocols } = entryOf(network.design.segments, segment);
    const known = all.filter(({ gateway }) => gateway.mtu !== undefined);
    const largestBytes = capacities.get(segment)?.[0]?.largestBytes ?? Infinity;
    // A gateway that sends more than fits is told as such; lowering it may end the difference.
    if (known.some((each) => mtuOf(each) > largestBytes)) return [];
    const isRouted = protocols?.includes('ospf') === true || protocols?.includes('is-is') === true;
    const heard = isRouted ? known : known.filter(({ gateway }) => gateway.routerAdvertisements === true);
    const mtus = [...new Set(heard.map(mtuOf))].sort((a, b) => a - b);
    return mtus.length < 2
      ? []
      : [{ segment, gateways: heard, mtus, by: isRouted ? 'neighbours' : 'advertised' }];
  });
};

interface Values {
  readonly segment: string;
  readonly mtus: string;
}

export const gatewayMtusDiffer = defineRule({
  id: 'gateway-mtus-differ',
  title: 'Gateways that speak to one another on a segment have one MTU',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'OSPF refuses a neighbour whose interface MTU is larger than its own, and IS-IS fills its hellos up to the MTU so that a difference shows: the routers never become neighbours.',
  seen: 'Neighbours see each other’s hellos and stay stuck exchanging their databases.',
  sources: [
    { document: 'RFC 2328', clause: 'section 10.6' },
    { document: 'RFC 3719', clause: 'section 6' },
  ],
  messages: {
    neighbours: {
      words: 'MTUs differ',
      sentence: (v: Values) => `Gateways of segment ${v.segment} differ in MTU: ${v.mtus}`,
    },
    advertised: {
      words: 'MTUs differ',
      sentence: (v: Values) => `Routers of segment ${v.segment} advertise MTUs ${v.mtus}`,
      why: 'A host uses the MTU that it heard last, whichever router it came from.',
      seen: 'The packet size of a host changes with every advertisement, and with it what gets through.',
    },
  },
  check: (network) =>
    differing(network).map(({ segment, gateways, mtus, by }) => {
      const refs = gateways.map(({ forwarder }) => ({ collection: 'forwarders' as const, id: forwarder }));
      const body = {
        values: {
          segment: entryOf(network.design.segments, segment).letter,
          mtus: listed(mtus.map(String)),
        },
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment],
        properties: refs.map((ref) => ({ ref, path: ['gateway', 'mtu'] })),
        basis: [...mtus],
      };
      return by === 'neighbours'
        ? { message: 'neighbours' as const, ...body }
        : {
            message: 'advertised' as const,
            ...body,
            severity: 'degrading' as const,
            severityReason: 'No routing protocol runs on the segment; hosts alone are concerned.',
            sources: [{ document: 'RFC 4861', clause: 'section 6.3.4' }],
          };
    }),
  fixes: (fault, network) => {
    const found = differing(network).find(({ segment }) => segment === fault.identity?.[0]);
    if (found === undefined) return [];
    const least = found.mtus[0]!;
    return [
      {
        id: 'set-least',
        label: `Set all to ${least}`,
        sentence: `Sets the MTU of the segment’s gateways to ${least} bytes, the smallest of them.`,
        patch: {
          forwarders: Object.fromEntries(
            found.gateways
              .filter((each) => mtuOf(each) !== least)
              .map(({ forwarder }) => [forwarder, { gateway: { mtu: least } }]),
          ),
        },
      },
    ];
  },
});
