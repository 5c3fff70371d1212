import type { Id } from '../model/scalars.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import type { Network } from '../network/network.ts';
import { perPairOfVersions } from '../network/network.ts';
import { blockedIn } from './forwarding.ts';
import { placesOf } from './places.ts';
import { endDevices, rebuiltDevices } from './rebuilt-devices.ts';
import { blockedPorts } from './spanning-tree.ts';

/** Devices of which a tunnel comes up in one version and not, or for another reason not, in the other. */
const withOtherTunnelStates = (before: Network, now: Network): readonly Id[] => {
  const [old, states] = [tunnelStates(before), tunnelStates(now)];
  if (old === states) return [];
  return now.tunnelIds.flatMap((id) =>
    old.get(id) === states.get(id) ? [] : endDevices(now.design, now.design.tunnels[id]),
  );
};

/** The device of each blocked port or circuit, by a name that is the same in every version. */
const blockedByName = (network: Network): ReadonlyMap<string, Id> =>
  new Map(
    [...blockedPorts(network)].map((key) => {
      const { place, ordinal } = blockedIn(placesOf(network), key);
      const name = place.kind === 'forwarder' ? `${place.forwarder}@${place.member}` : place.device;
      return [`${place.kind} ${name} ${ordinal}`, place.device];
    }),
  );

const withOtherBlockedPorts = (before: Network, now: Network): readonly Id[] => {
  const [old, blocked] = [blockedByName(before), blockedByName(now)];
  const onlyIn = (one: ReadonlyMap<string, Id>, other: ReadonlyMap<string, Id>): readonly Id[] =>
    [...one].filter(([name]) => !other.has(name)).map(([, device]) => device);
  return [...onlyIn(old, blocked), ...onlyIn(blocked, old)];
};

/**
 * The devices that may do otherwise with a frame than they did in an earlier version, gone ones included. Whatever was found
 * out by following frames stands while they meet none of these.
 */
export const touchedDevices = perPairOfVersions(
  (before, now): ReadonlySet<Id> =>
    new Set([
      ...rebuiltDevices(before, now),
      ...withOtherTunnelStates(before, now),
      ...withOtherBlockedPorts(before, now),
    ]),
);
