import { tunnelSegments } from '../flood/tunnel-segments.ts';
import type { Protocol } from '../model/intent.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { siteNameOf } from './places.ts';

// RFC 2328 A.1, RFC 7761 section 4.9, RFC 9568 section 5.1.1.2, RFC 3376 section 4: groups of 224.0.0.0/24. IS-IS and
// precision time over Ethernet go to group addresses, too (registration list; from memory). RFC 4861: neighbour discovery.
const needGroups: readonly Protocol[] = ['multicast', 'igmp', 'ospf', 'is-is', 'pim', 'vrrp', 'ptp'];

/** Whether a segment can't do without multicast. IPv6 alone is left to the check that follows its neighbour discovery. */
const needsGroups = (protocols: readonly Protocol[] | undefined): boolean =>
  protocols?.some((each) => needGroups.includes(each)) === true ||
  (protocols?.includes('ipv6') === true && protocols.includes('ipv4'));

/** The segments whose frames pass a forwarder into or out of a tunnel, in order of id. */
export const segmentsThrough = (network: Network, forwarder: Id): readonly Id[] => {
  const carried = tunnelSegments(network);
  const circuits = network.circuitsByForwarder.get(forwarder) ?? [];
  return [
    ...new Set(
      circuits.flatMap(({ circuit }) =>
        circuit.kind === 'tunnel' ? (carried.get(circuit.tunnel) ?? []) : [],
      ),
    ),
  ].sort();
};

export const multicastDroppedOnPath = defineRule({
  id: 'multicast-dropped-on-path',
  title: 'Forwarders pass the multicast that their segments need',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'VXLAN carries multicast only where the gateways copy it into their tunnels. Routing protocols, gateway groups and media streams all live on it.',
  seen: 'Plain traffic works; receivers at the far site stay silent, routers find no neighbour, and a gateway group has two active members.',
  sources: [
    { document: 'RFC 7348', clause: 'section 4.2' },
    { document: 'RFC 8293', clause: 'section 3' },
  ],
  messages: {
    dropped: {
      words: 'multicast dropped',
      sentence: (v: { readonly forwarder: string; readonly place: string; readonly segment: string }) =>
        `${v.forwarder} at ${v.place} drops multicast of segment ${v.segment}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...network.circuitsByForwarder.keys()].flatMap((id) => {
      const { multicast, name, device } = entryOf(design.forwarders, id);
      if (multicast !== 'drop') return [];
      const ref = { collection: 'forwarders' as const, id };
      return segmentsThrough(network, id)
        .filter((segment) => needsGroups(entryOf(design.segments, segment).protocols))
        .map((segment) => ({
          message: 'dropped' as const,
          values: {
            forwarder: name,
            place: siteNameOf(design, device),
            segment: entryOf(design.segments, segment).letter,
          },
          elements: [ref, { collection: 'segments' as const, id: segment }],
          properties: [
            { ref, path: ['multicast'] },
            { ref: { collection: 'segments' as const, id: segment }, path: ['protocols'] },
          ],
        }));
    });
  },
  fixes: (fault) => [
    {
      id: 'flood',
      label: 'Pass it on',
      sentence: `Lets ${fault.values.forwarder} at ${fault.values.place} copy multicast to all its circuits.`,
      patch: { forwarders: { [fault.elements[0]!.id]: { multicast: 'flood' } } },
    },
  ],
});
