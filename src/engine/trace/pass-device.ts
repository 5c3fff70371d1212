import ipaddr from 'ipaddr.js';
import type { Barrier } from '../flood/barrier.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import { allClasses } from '../flood/frame-classes.ts';
import type { Forwarding } from '../flood/forwarding.ts';
import { forwardingOf } from '../flood/forwarding.ts';
import type { ForwarderPlace, Out, Place } from '../flood/places.ts';
import { blockedPorts } from '../flood/spanning-tree.ts';
import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { outerVlan, popTag, switchOut, untagged } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, perNetwork } from '../network/network.ts';
import type { Crossing, End, Following, Hop } from './follower.ts';
import { dropped, namesOf } from './follower.ts';
import { policyDecision } from './policy-decision.ts';
import type { DecisionFact, DropReason } from './trace.ts';

/** A frame inside a place: by which port or circuit it came, and the tags it has there. */
export interface Visited {
  readonly place: Place;
  readonly ordinal: number;
  readonly inside: Tags;
  /** On the wire before, to tell what became of them. */
  readonly tags: Tags;
  readonly hopLimit: number;
}
export type Passed = Pick<Hop, 'facts' | 'onward' | 'stopped' | 'end'>;

interface Deciders {
  /** What really goes on. */
  readonly real: Forwarding;
  /** The same, which also goes past what stops a frame, and names it. */
  readonly explaining: Forwarding;
}

/** How the devices of a design forward: what they do, and why they don't do more. */
export const decidersOf = perNetwork((network: Network): Deciders => ({
  real: floodGraph(network).forwarding,
  explaining: forwardingOf(network, {
    blocked: blockedPorts(network),
    pastBarriers: { vlanAt: () => undefined, classes: allClasses },
  }),
}));

/** What redundancy and separation want dropped. */
const isByDesign = ({ code }: Barrier): boolean =>
  code === 'standby' ||
  code === 'isolation' ||
  code === 'split-horizon' ||
  code === 'spanning-tree' ||
  code === 'port-shut';

/** A barrier as the reason of a drop; undefined where it only says that a port is in another VLAN, or is judged elsewhere. */
export const reasonOf = (barrier: Barrier): DropReason | undefined =>
  barrier.code === 'tunnel-down' ||
  barrier.code === 'filter' ||
  barrier.code === 'not-joined' ||
  barrier.code === 'other-access-vlan'
    ? undefined
    : barrier;
export const endOf = (barrier: Barrier): End | undefined => {
  const reason = reasonOf(barrier);
  return reason === undefined ? undefined : dropped(reason, isByDesign(barrier));
};

const hopOf = ({ network }: Following, crossing: Omit<Crossing, 'hopLimit'>, end: End): Hop => {
  const { step, from, to, ref } = namesOf(network, crossing);
  return { step, from, to, elements: [ref], facts: [], end, onward: [], stopped: [] };
};

const outsAt = (place: Place, ordinal: number): readonly Out[] => {
  if (place.kind === 'host') return [];
  const outlet = place.kind === 'switch' ? place.ports[ordinal] : place.circuits[ordinal];
  return outlet === undefined ? [] : [...outlet.outs, ...outlet.shutOuts];
};

const outletRef = (place: Place, ordinal: number): ElementRef => {
  if (place.kind === 'switch')
    return { collection: 'devices', id: place.device, port: place.ports[ordinal]!.group.port };
  const circuit = place.kind === 'forwarder' ? place.circuits[ordinal] : undefined;
  return circuit?.kind === 'tunnel'
    ? { collection: 'tunnels', id: circuit.tunnel }
    : {
        collection: 'devices',
        id: place.device,
        ...(circuit === undefined ? {} : { port: circuit.group.port }),
      };
};

const tagFacts = ({ place, tags, inside }: Visited, byTunnel: boolean): readonly DecisionFact[] => {
  const { device } = place;
  if (place.kind === 'switch' && tags === untagged)
    return [{ code: 'put-in-vlan', device, vlan: outerVlan(inside) }];
  if (place.kind !== 'forwarder' || tags === untagged || byTunnel) return [];
  const code = tags === inside ? 'tag-kept' : inside === popTag(tags) ? 'tag-removed' : 'tag-translated';
  return [{ code, device, vlan: outerVlan(tags), inside: outerVlan(inside) }];
};

/** The hop limit after a forwarder, which some equipment lowers for multicast even though it only bridges. */
// RFC 8014 section 3.1.2: a layer-2 service leaves it as it is.
const hopLimitAfter = (following: Following, place: ForwarderPlace, hopLimit: number): number => {
  const { network, frame, assume } = following;
  if (frame.ipVersion === undefined || frame.facts.cast !== 'multicast') return hopLimit;
  const { profile, settings, name } = entryOf(network.design.devices, place.device);
  const habit = profile === undefined ? undefined : entryOf(network.design.profiles, profile).multicastTtl;
  if (habit === 'lowered') return hopLimit - 1;
  if (habit === undefined && (hopLimit === 1 || frame.requiredHopLimit > 0))
    assume(
      'multicast-ttl',
      { collection: 'devices', id: place.device },
      `${name} is taken to leave the hop limit of bridged multicast as it is. Some equipment lowers it${settings?.multicastRouting === true ? ', above all with multicast routing on, as here' : ''}; routing protocols that send with 1 then die there.`,
    );
  return hopLimit;
};

const whyFlooded = (following: Following, place: Place): Extract<DecisionFact, { code: 'flooded' }> => {
  const { network, frame } = following;
  const { cast } = frame.facts;
  const forwarder = place.kind === 'forwarder' ? place.forwarder : undefined;
  const isOneToOne =
    forwarder !== undefined && entryOf(network.design.forwarders, forwarder).kind === 'cross-connect';
  return {
    code: 'flooded',
    device: place.device,
    ...(forwarder === undefined ? {} : { forwarder }),
    because: isOneToOne ? 'one-to-one' : cast === 'unicast' ? 'not-learned' : cast,
  };
};

// RFC 4541 section 2.1.2: 224.0.0.x goes to all ports whatever is snooped; section 3 says the like for ff02::1 alone, and
// common practice (no source) extends it to all of ff02::/16.
const isLocalGroup = (group: string): boolean => {
  const address = ipaddr.parse(group);
  return address.match(ipaddr.parseCIDR(address.kind() === 'ipv4' ? '224.0.0.0/24' : 'ff02::/16'));
};
const noteSnooping = ({ network, frame, assume }: Following, forwarder: Id): void => {
  const { multicast, name } = entryOf(network.design.forwarders, forwarder);
  if (
    multicast !== 'snoop' ||
    frame.destination.kind !== 'multicast' ||
    isLocalGroup(frame.destination.group)
  )
    return;
  assume(
    'snooping',
    { collection: 'forwarders', id: forwarder },
    `${name} sends a group only where somebody has asked for it. The design doesn’t say who has: everybody is taken to have. Without a querier on the segment nobody has.`,
  );
};

/** Whether a forwarder's filter lets the frame out on this crossing, and what it says. */
const filterAt = (
  following: Following,
  { place, ordinal }: Visited,
  isTunnel: boolean,
): { readonly end?: End; readonly fact?: DecisionFact } => {
  if (place.kind !== 'forwarder') return {};
  const { network, frame, assume } = following;
  const forwarder = entryOf(network.design.forwarders, place.forwarder);
  const direction =
    isTunnel || place.circuits[ordinal]?.kind === 'port' ? ('to-tunnel' as const) : ('from-tunnel' as const);
  const decision = policyDecision(forwarder, direction, frame.facts);
  const at = { device: place.device, forwarder: place.forwarder };
  if (decision.passes)
    return decision.rule === undefined
      ? {}
      : { fact: { code: 'permitted', forwarder: place.forwarder, rule: decision.rule } };
  if (decision.because !== 'rule') {
    const reason: DropReason =
      decision.because === 'multicast'
        ? { code: 'multicast-dropped', ...at }
        : { code: 'filter', ...at, direction };
    return { end: dropped(reason) };
  }
  if (!decision.isSure)
    assume(
      'address-unknown',
      { collection: 'forwarders', id: place.forwarder },
      `A rule of ${forwarder.name} may be about this frame: its addresses or ports aren’t all known, so the rule is taken to deny it.`,
    );
  return { end: dropped({ code: 'filter', ...at, direction, rule: decision.rule }, true) };
};

/** A shut port that only lies in another VLAN is no place where a frame got lost. */
const isWorthNaming = (place: Place, barrier: Barrier, inside: Tags): boolean => {
  if (barrier.code !== 'port-shut' || place.kind !== 'switch') return true;
  const shut = place.ports.find(({ group }) => group.port === barrier.port);
  return shut !== undefined && switchOut(shut.port, inside) !== undefined;
};

/** The sending end of a tunnel takes the frame's tag off. RFC 7348 section 6.1: it does unless it is set otherwise. */
const tagStripped = (
  { network, assume }: Following,
  element: number,
  direction: number,
  inside: Tags,
): DecisionFact => {
  const id = network.tunnelIds[element - network.firstTunnelElement]!;
  const tunnel = entryOf(network.design.tunnels, id);
  const end = direction === 0 ? 'a' : 'b';
  const { settings } = entryOf(network.design.devices, deviceOfTunnelEnd(network, tunnel, end));
  if (tunnel[end].innerTags === undefined && settings?.keepInnerTags === undefined)
    assume(
      'inner-tags',
      { collection: 'tunnels', id },
      `${tunnel.name} doesn’t say whether tags stay on the frames inside; they are taken off, as VXLAN has it unless set otherwise.`,
    );
  return { code: 'tag-stripped', tunnel: id, vlan: outerVlan(inside) };
};

/** What a switch or a forwarder does with a frame inside it: to where copies go, and what keeps others back. */
export const passDevice = (following: Following, visited: Visited, byTunnel: boolean): Passed => {
  const { network, frame } = following;
  const { place, ordinal, inside } = visited;
  const { real, explaining } = decidersOf(network);
  const facts: DecisionFact[] = [...tagFacts(visited, byTunnel)];
  let { hopLimit } = visited;
  if (place.kind === 'forwarder') {
    noteSnooping(following, place.forwarder);
    const lowered = hopLimitAfter(following, place, hopLimit);
    if (lowered < hopLimit) {
      if (lowered === 0)
        return {
          facts,
          onward: [],
          stopped: [],
          end: dropped({ code: 'hop-limit-zero', device: place.device, forwarder: place.forwarder }),
        };
      facts.push({ code: 'hop-limit-lowered', device: place.device, hopLimit: lowered });
      hopLimit = lowered;
    }
  }
  const learned = frame.facts.cast === 'unicast' ? following.learned(place, inside) : undefined;
  if (learned !== undefined) {
    if (learned.ordinal === ordinal)
      return { facts, onward: [], stopped: [], end: dropped({ code: 'same-port', device: place.device }) };
    const behind = outletRef(place, learned.ordinal);
    facts.push({ code: 'learned', device: place.device, behind, moving: learned.moving });
  } else facts.push(whyFlooded(following, place));

  const toward = learned === undefined ? undefined : outsAt(place, learned.ordinal);
  const isWanted = (element: number, direction: number): boolean =>
    toward === undefined || toward.some((out) => out.element === element && out.direction === direction);
  const onward: Crossing[] = [];
  const stopped: Hop[] = [];
  const permitted = new Set<Id>();
  real.leave(place, ordinal, inside, (element, direction, tags) => {
    if (!isWanted(element, direction)) return;
    const isTunnel = element >= network.firstTunnelElement;
    const filter = filterAt(following, visited, isTunnel);
    if (filter.end !== undefined) {
      stopped.push(hopOf(following, { element, direction, tags }, filter.end));
      return;
    }
    if (filter.fact?.code === 'permitted' && !permitted.has(filter.fact.rule)) {
      permitted.add(filter.fact.rule);
      facts.push(filter.fact);
    }
    if (isTunnel && tags !== inside) facts.push(tagStripped(following, element, direction, inside));
    onward.push({ element, direction, tags, hopLimit });
  });
  explaining.leave(place, ordinal, inside, (element, direction, tags, _classes, barrier) => {
    if (barrier === undefined || !isWanted(element, direction)) return;
    const end = isWorthNaming(place, barrier, inside) ? endOf(barrier) : undefined;
    if (end !== undefined) stopped.push(hopOf(following, { element, direction, tags }, end));
  });
  const isOver = onward.length === 0 && stopped.length === 0;
  return {
    facts,
    onward,
    stopped,
    ...(isOver ? { end: dropped({ code: 'nowhere', device: place.device }) } : {}),
  };
};
