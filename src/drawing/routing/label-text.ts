import type { Design, Entry } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';

const withoutPrefix = (address: string): string => address.replace(/\/\d+$/, '');

/** What stands at a ring: its endpoint's address, else its name. */
export const endpointLabel = (design: Design, endpoint: string): string => {
  const entry = design.endpoints[endpoint];
  if (entry === undefined) return endpoint;
  return withoutPrefix(entry.ipv4 ?? entry.ipv6 ?? entry.name);
};

/** What stands at a WAN cable: the outside address. On a pair's standby member it says that it holds after failover. */
export const landingLabel = (
  landing: Extract<Entry<'links'>, { kind: 'landing' }>,
  device: Entry<'devices'> | undefined,
  member?: Member,
): string => {
  const address =
    landing.ipv4 ?? landing.ipv6 ?? (landing.dynamic === true ? (landing.dynamicName ?? 'dynamic') : '');
  if (address === '' || device?.kind !== 'ha-pair' || member === undefined) return address;
  const standby = device.mode !== 'active-active' && member !== (device.active ?? 1);
  return standby && landing.members !== '1' && landing.members !== '2'
    ? `${address} after failover`
    : address;
};
