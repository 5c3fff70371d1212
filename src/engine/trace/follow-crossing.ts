import type { Barrier } from '../flood/barrier.ts';
import type { Visit } from '../flood/forwarding.ts';
import type { Place } from '../flood/places.ts';
import type { ElementRef } from '../model/design.ts';
import type { Tags } from '../network/frame-tags.ts';
import { outerVlan } from '../network/frame-tags.ts';
import type { PortGroup } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, forwardingMembers, otherEnd } from '../network/network.ts';
import type { Id } from '../model/scalars.ts';
import { crossWire } from './cross-wire.ts';
import type { Crossing, End, Following, Hop } from './follower.ts';
import { crossingKey, dropped } from './follower.ts';
import { bytesOnWire } from './hop-wire.ts';
import type { Passed } from './pass-device.ts';
import { decidersOf, endOf, passDevice } from './pass-device.ts';
import { hasSpanningTree, reservedTreatment } from './reserved-groups.ts';

/** The far side of a crossing, or the port at which a frame comes in from outside. */
interface Arrival {
  readonly device: Id;
  /** Absent for arrivals through a tunnel. */
  readonly group?: PortGroup;
  readonly tunnel?: Id;
  readonly tags: Tags;
  readonly hopLimit: number;
}

const nothing: Passed = { facts: [], onward: [], stopped: [] };
const ended = (end: End): Passed => ({ ...nothing, end });

const ofDevice = (device: Id): ElementRef => ({ collection: 'devices', id: device });

/** How a host takes a frame that gets to it. */
const atHost = ({ frame }: Following, device: Id, hopLimit: number): End => {
  const { destination, requiredHopLimit } = frame;
  if (destination.kind === 'host' && destination.host !== device)
    return dropped({ code: 'not-addressed', device }, true);
  // RFC 5082 section 3: what must come from a neighbour is sent with 255 and dropped where it arrives with less.
  if (hopLimit < requiredHopLimit)
    return dropped({ code: 'hop-limit-required', device, hopLimit, requires: requiredHopLimit });
  return { code: 'delivered', to: ofDevice(device) };
};

/** Frames to the reserved groups are judged before any VLAN or circuit; undefined where the frame goes its usual way. */
const reservedEnd = (following: Following, arrival: Arrival, places: readonly Place[]): End | undefined => {
  const { network, frame, assume } = following;
  const { destination } = frame;
  const device = entryOf(network.design.devices, arrival.device);
  if (destination.kind !== 'reserved' || device.kind === 'host') return undefined;
  const { octet } = destination;
  const { treatment, says } = reservedTreatment(network, arrival.device, octet, {
    isAggregate: arrival.group?.aggregation !== undefined,
    hasSpanningTree: places.some((place) => hasSpanningTree(network, place)),
  });
  // What a bridge takes itself comes untagged: its neighbour on the cable sent it.
  if (treatment === 'peer' && arrival.tags === 0) return { code: 'delivered', to: ofDevice(arrival.device) };
  if (treatment === 'pass') return undefined;
  if (says === 'standard')
    assume(
      'reserved-group',
      ofDevice(arrival.device),
      `${device.name} is taken to keep to the standard and forward nothing to 01-80-C2-00-00-${octet.toUpperCase()}. Some equipment does, when told to or by habit.`,
    );
  return dropped({ code: 'reserved-group', device: arrival.device, octet, says }, says === 'standard');
};

/** Why nobody at the far side takes the frame. */
const refusal = (following: Following, arrival: Arrival, barriers: readonly Barrier[]): End => {
  const [barrier] = barriers;
  const end = barrier === undefined ? undefined : endOf(barrier);
  if (end !== undefined) return end;
  const { device, group, tunnel, tags } = arrival;
  if (tunnel !== undefined) return dropped({ code: 'tunnel-unclaimed', tunnel, device });
  const port = group!.port;
  const entry = entryOf(following.network.design.devices, device);
  if (entry.kind === 'switch') return dropped({ code: 'no-native-vlan', device, port });
  return forwardingMembers(entry).includes(group!.member)
    ? dropped({ code: 'no-circuit', device, port, vlan: outerVlan(tags) })
    : dropped({ code: 'standby', device, member: group!.member, port }, true);
};

const arrive = (
  following: Following,
  arrival: Arrival,
  into: (forwarding: 'real' | 'explaining', visit: Visit) => void,
): Passed => {
  const { network } = following;
  const { device, group, tags, hopLimit } = arrival;
  const entry = entryOf(network.design.devices, device);
  const places = decidersOf(network).real.places.byDevice.get(device) ?? [];
  const isSilent = group !== undefined && !forwardingMembers(entry).includes(group.member);
  const reserved = isSilent ? undefined : reservedEnd(following, arrival, places);
  if (reserved !== undefined) return ended(reserved);

  const passed: Passed[] = [];
  into('real', (place, ordinal, inside) => {
    passed.push(
      place.kind === 'host'
        ? ended(atHost(following, place.device, hopLimit))
        : passDevice(following, { place, ordinal, inside, tags, hopLimit }, arrival.tunnel !== undefined),
    );
  });
  if (passed.length === 1) return passed[0]!;
  if (passed.length > 1) return together(device, passed);
  const barriers: Barrier[] = [];
  into('explaining', (_place, _ordinal, _inside, barrier) => {
    if (barrier !== undefined) barriers.push(barrier);
  });
  return ended(refusal(following, arrival, barriers));
};

/** Several forwarders claim the frame: each takes a copy, and those that end are leaves of their own. */
const together = (device: Id, passed: readonly Passed[]): Passed => ({
  facts: passed.flatMap(({ facts }) => facts),
  onward: passed.flatMap(({ onward }) => onward),
  stopped: passed.flatMap(({ stopped, end }): readonly Hop[] =>
    end === undefined
      ? stopped
      : [...stopped, { elements: [ofDevice(device)], facts: [], end, onward: [], stopped: [] }],
  ),
});

/** Follows single crossings of one frame, each worked out once however many copies take it. */
export interface Follower {
  readonly hopOf: (crossing: Crossing) => Hop;
  /** A frame that comes from outside into a port. */
  readonly enter: (group: PortGroup, tags: Tags) => Passed;
}

export const followerOf = (following: Following): Follower => {
  const { network, frame } = following;
  const bytesOf = bytesOnWire(frame);
  const known = new Map<number, Hop>();
  const arrivalOf = ({ element, direction, tags, hopLimit }: Crossing): Arrival => {
    const bundle = network.bundles[element];
    if (bundle !== undefined) {
      const group = direction === 0 ? bundle.b : bundle.a;
      return { device: group.device, group, tags, hopLimit };
    }
    const tunnel = network.tunnelIds[element - network.firstTunnelElement]!;
    const entry = entryOf(network.design.tunnels, tunnel);
    const far = otherEnd(direction === 0 ? 'a' : 'b');
    return { device: deviceOfTunnelEnd(network, entry, far), tunnel, tags, hopLimit };
  };
  return {
    hopOf: (crossing) => {
      const key = crossingKey(crossing);
      const before = known.get(key);
      if (before !== undefined) return before;
      const crossed = crossWire(following, crossing, bytesOf);
      const { element, direction, tags } = crossing;
      const passed =
        crossed.end === undefined
          ? arrive(following, arrivalOf(crossing), (which, visit) =>
              decidersOf(network)[which].arrive(element, direction, tags, visit),
            )
          : nothing;
      const hop: Hop = { ...crossed, ...passed, crossing, facts: [...crossed.facts, ...passed.facts] };
      known.set(key, hop);
      return hop;
    },
    enter: (group, tags) =>
      arrive(following, { device: group.device, group, tags, hopLimit: frame.hopLimit }, (which, visit) =>
        decidersOf(network)[which].enter(group, tags, visit),
      ),
  };
};
