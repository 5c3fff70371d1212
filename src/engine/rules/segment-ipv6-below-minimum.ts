import type { Id } from '../model/scalars.ts';
import { joinPatches } from '../model/merge-patch.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { SMALLEST_LINK_MTU_BYTES } from '../reference/ip.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { carriesIpv6, raisePath } from './packet-size-fixes.ts';
import { capacitiesOf, needOf } from './segment-capacity.ts';

// RFC 8200 section 5.
const leastBytes = SMALLEST_LINK_MTU_BYTES.ipv6;

interface Below {
  readonly segment: Id;
  readonly bytes: number;
  /** True where the tunnels are the limit, and not what the segment commits to. */
  readonly byTunnels: boolean;
}

const belowMinimum = (network: Network): readonly Below[] => {
  const capacities = capacitiesOf(network);
  return Object.keys(network.design.segments).flatMap((segment): readonly Below[] => {
    if (!carriesIpv6(network, segment)) return [];
    const largestBytes = capacities.get(segment)?.[0]?.largestBytes ?? Infinity;
    const { mtu = Infinity } = entryOf(network.design.segments, segment);
    const bytes = Math.min(largestBytes, mtu);
    // What the segment sends and its tunnels don't take is told as such.
    const isOversize = (needOf(network, segment)?.needBytes ?? 0) > largestBytes;
    return bytes >= leastBytes || isOversize
      ? []
      : [{ segment, bytes, byTunnels: largestBytes < leastBytes }];
  });
};

export const segmentIpv6BelowMinimum = defineRule({
  id: 'segment-ipv6-below-minimum',
  title: 'A segment that carries IPv6 takes packets of 1,280 bytes',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'IPv6 asks 1,280 bytes of every link. Hosts send packets of that size without asking, and refuse a smaller MTU.',
  seen: 'IPv4 works. IPv6 finds its neighbours and opens connections that hang as soon as data flows.',
  sources: [{ document: 'RFC 8200', clause: 'section 5' }],
  messages: {
    below: {
      words: 'below IPv6 minimum',
      sentence: (v: { readonly segment: string; readonly bytes: number }) =>
        `IPv6 of segment ${v.segment} has ${v.bytes} bytes, ${leastBytes} are the least`,
    },
  },
  check: (network) =>
    belowMinimum(network).map(({ segment, bytes }) => {
      const ref = { collection: 'segments' as const, id: segment };
      return {
        message: 'below',
        values: { segment: entryOf(network.design.segments, segment).letter, bytes },
        elements: [ref],
        properties: [
          { ref, path: ['mtu'] },
          { ref, path: ['protocols'] },
        ],
        basis: [bytes],
      };
    }),
  fixes: (fault, network) => {
    const segment = fault.elements[0]!.id;
    const found = belowMinimum(network).find((each) => each.segment === segment);
    if (found === undefined) return [];
    const { design } = network;
    const { name, mtu } = entryOf(design.segments, segment);
    const commit = { segments: { [segment]: { mtu: leastBytes } } };
    if (!found.byTunnels)
      return [
        {
          id: 'raise-segment',
          label: `Raise ${name} to ${leastBytes}`,
          sentence: `Commits ${name} to packets of ${leastBytes} bytes, which fit through all its tunnels.`,
          patch: commit,
        },
      ];
    const tight = (capacitiesOf(network).get(segment) ?? []).filter(
      ({ largestBytes }) => largestBytes < leastBytes,
    );
    return raisePath(network, leastBytes, tight).map((fix): Fix =>
      mtu === undefined ? fix : { ...fix, patch: joinPatches(design, [fix.patch, commit]) },
    );
  },
});
