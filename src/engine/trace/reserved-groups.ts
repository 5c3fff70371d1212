import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { Place } from '../flood/places.ts';

export type ReservedTreatment = 'drop' | 'pass' | 'peer';

// IEEE 802.1Q-2022 table 8-1, read at second hand; the name of 07 from memory.
export const reservedGroupNames: { readonly [octet: string]: string } = {
  '00': 'spanning tree',
  '01': 'MAC control',
  '02': 'slow protocols',
  '03': 'port authentication',
  '04': 'MAC-specific control',
  '07': 'local management',
  '08': 'provider spanning tree',
  '0d': 'provider VLAN registration',
  '0e': 'nearest bridge',
};

/**
 * What a device does with a frame to 01-80-C2-00-00-0x. A profile's word counts. Without one, a device that takes part in
 * spanning tree or in the aggregate on the port it came in on takes such frames itself, and filters all others.
 */
// IEEE 802.1Q-2022 section 8.6.3, table 8-1: a C-VLAN bridge filters all sixteen.
export const reservedTreatment = (
  network: Network,
  device: Id,
  octet: string,
  at: { readonly isAggregate: boolean; readonly hasSpanningTree: boolean },
): { readonly treatment: ReservedTreatment; readonly says: 'profile' | 'standard' } => {
  const { profile } = entryOf(network.design.devices, device);
  if (octet === '00' && at.hasSpanningTree) return { treatment: 'peer', says: 'standard' };
  const stated =
    profile === undefined ? undefined : entryOf(network.design.profiles, profile).reservedGroups?.[octet];
  if (stated !== undefined) return { treatment: stated, says: 'profile' };
  return { treatment: octet === '02' && at.isAggregate ? 'peer' : 'drop', says: 'standard' };
};

/** Whether a switch or a forwarder takes part in spanning tree. */
export const hasSpanningTree = (network: Network, place: Place): boolean => {
  const { settings } = entryOf(network.design.devices, place.device);
  if (place.kind === 'host') return false;
  if (place.kind === 'switch') return settings?.spanningTree?.mode === 'on';
  const forwarder = entryOf(network.design.forwarders, place.forwarder);
  return forwarder.kind === 'bridge' && (forwarder.spanningTree ?? settings?.spanningTree)?.mode === 'on';
};
