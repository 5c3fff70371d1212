import { circuitRemovesTag } from '../network/frame-tags.ts';
import type { End, Network, PortCircuit, Tunnel } from '../network/network.ts';

type TagMode = 'keep' | 'strip';

/** What an end of a tunnel does with inner tags: what it says itself, else its device's setting, else the standard's default. */
export const tagModeOf = ({ design }: Network, tunnel: Tunnel, end: End, device: string): TagMode =>
  // RFC 7348 section 6.1: without configuration an inner tag is stripped at the sender and discarded at the receiver.
  tunnel[end].innerTags ?? (design.devices[device]!.settings?.keepInnerTags === true ? 'keep' : 'strip');

/** True when frames keep their VLAN tag inside the forwarder that a port's circuit leads to. */
export const keepsTags = (circuit: PortCircuit): boolean =>
  circuit.vlans !== 'untagged' && !circuitRemovesTag(circuit);
