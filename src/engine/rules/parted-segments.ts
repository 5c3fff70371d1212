import type { Barrier } from '../flood/barrier.ts';
import { inLetterOrder } from '../flood/segment-nodes.ts';
import type { SegmentReach } from '../flood/segment-reach.ts';
import { segmentReach } from '../flood/segment-reach.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';

/** Segments of which some don't hear some others, in order of letter. */
export const partedSegments: (network: Network) => readonly SegmentReach[] = perNetwork((network) =>
  inLetterOrder(network)
    .map((segment) => segmentReach(network, segment))
    .filter(({ partings }) => partings.length > 0),
);

/** The VLAN that a segment has at a device's site. */
export const meantVlan = ({ design }: Network, segment: Id, device: Id): number | undefined =>
  entryOf(design.segments, segment).sites[entryOf(design.devices, device).site]?.vlan;

export type VlanBarrier = Extract<
  Barrier,
  {
    readonly code:
      'vlan-not-allowed' | 'other-access-vlan' | 'no-native-vlan' | 'tag-at-access-port' | 'no-circuit';
  }
>;

/** Whether a barrier is a port or a gateway that leaves out the VLAN which the segment has there. */
export const isVlanBarrier = (network: Network, segment: Id, barrier: Barrier): barrier is VlanBarrier => {
  switch (barrier.code) {
    case 'no-native-vlan':
      return meantVlan(network, segment, barrier.device) !== undefined;
    case 'no-circuit':
      return barrier.vlan === 0 || barrier.vlan === meantVlan(network, segment, barrier.device);
    case 'vlan-not-allowed':
    case 'other-access-vlan':
    case 'tag-at-access-port':
      return barrier.vlan === meantVlan(network, segment, barrier.device);
    default:
      return false;
  }
};

/** Whether an isolation group keeps tunnels apart from each other, and nothing else. */
export const isolatesTunnels = (network: Network, forwarder: Id, group: string): boolean =>
  (network.circuitsByForwarder.get(forwarder) ?? []).every(
    ({ circuit }) => circuit.isolation !== group || circuit.kind === 'tunnel',
  );
