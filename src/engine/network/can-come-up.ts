import type { Entry } from '../model/design.ts';
import type { Member } from '../model/devices.ts';
import { sameJson } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { NoPath, Path } from './association-path.ts';
import { associationPath, bareTunnelPath, landingOf, landingsStay } from './association-path.ts';
import { changesBetween } from './changes.ts';
import type { ProposalPart } from './negotiate.ts';
import { negotiate } from './negotiate.ts';
import type { Association, End, Network } from './network.ts';
import { deviceOfTunnelEnd, ends, entryOf, forwardingMembers, otherEnd, perNetwork } from './network.ts';
import type { SelectorGap } from './selectors-cover.ts';
import { associationEndOf, assignedVxlanPort, selectorsCover } from './selectors-cover.ts';

type TransportFilter = NonNullable<Entry<'transports'>['filters']>[number];
type Method = NonNullable<Association['a']['authentication']>['method'];

export type AssociationReason =
  | { readonly code: 'no-path'; readonly detail: NoPath }
  | { readonly code: 'ike-versions-differ'; readonly a: 1 | 2; readonly b: 1 | 2 }
  | { readonly code: 'authentication-differs'; readonly a: Method; readonly b: Method }
  | {
      readonly code: 'proposals-differ';
      readonly layer: 'ike' | 'esp';
      readonly parts: readonly ProposalPart[];
    }
  | { readonly code: 'nobody-starts' }
  | { readonly code: 'both-dynamic' }
  | { readonly code: 'both-behind-nat' }
  /** One end can't be found, the other can't be entered: neither can be reached by a first packet. */
  | { readonly code: 'neither-reachable'; readonly dynamic: End; readonly behindNat: End }
  /** Only `end` could be first, since the other can be reached and it can't; but it only answers. */
  | { readonly code: 'wrong-initiator'; readonly end: End; readonly because: 'dynamic' | 'behind-nat' }
  | { readonly code: 'transport-filters'; readonly transport: Id; readonly filter: TransportFilter };

export type TunnelReason =
  | { readonly code: 'no-path'; readonly detail: NoPath }
  | { readonly code: 'transport-filters'; readonly transport: Id; readonly filter: TransportFilter }
  | {
      readonly code: 'association-down';
      readonly association: Id;
      readonly reasons: readonly AssociationReason[];
    }
  | { readonly code: 'ends-off-association'; readonly association: Id; readonly ends: readonly End[] }
  | { readonly code: 'ends-on-one-device'; readonly device: Id }
  | { readonly code: 'families-differ' }
  | { readonly code: 'vni-mismatch'; readonly a: number; readonly b: number }
  | { readonly code: 'udp-port-mismatch'; readonly a: number; readonly b: number }
  | { readonly code: 'selectors-miss'; readonly gaps: readonly SelectorGap[] }
  /** The endpoint belongs to a member of the pair that doesn't forward. */
  | { readonly code: 'endpoint-on-standby'; readonly end: End; readonly device: Id; readonly member: Member };

export type Reason = AssociationReason | TunnelReason;
export interface ComeUp<R> {
  readonly up: boolean;
  /** Empty when it comes up. */
  readonly reasons: readonly R[];
}

const verdict = <R>(reasons: readonly R[]): ComeUp<R> => ({ up: reasons.length === 0, reasons });

// RFC 7296 section 2.23: behind NAT both IKE and ESP move to UDP port 4500; RFC 4303 section 2: without it ESP is IP protocol 50.
const filteredOn = (network: Network, path: Path): readonly AssociationReason[] => {
  if (!path.ok) return [];
  const hasNat = [path.landingA, path.landingB].some((id) => landingOf(network, id).nat !== undefined);
  const needed: readonly TransportFilter[] = hasNat ? ['udp-500', 'udp-4500'] : ['udp-500', 'esp'];
  const filters = entryOf(network.design.transports, path.transport).filters ?? [];
  return needed
    .filter((filter) => filters.includes(filter))
    .map((filter) => ({ code: 'transport-filters', transport: path.transport, filter }));
};

/** Who may send the first packet, and whether the other end can be reached by it. */
const meeting = (network: Network, association: Association, path: Path): readonly AssociationReason[] => {
  const mayStart = (end: End): boolean => association[end].start !== 'answers';
  if (!ends.some(mayStart)) return [{ code: 'nobody-starts' }];
  if (!path.ok) return [];
  const hiddenBy = (end: End): 'dynamic' | 'behind-nat' | undefined => {
    const landing = landingOf(network, end === 'a' ? path.landingA : path.landingB);
    if (landing.dynamic === true && landing.dynamicName === undefined) return 'dynamic';
    return landing.nat !== undefined && landing.nat.forwarded !== true ? 'behind-nat' : undefined;
  };
  const hidden = { a: hiddenBy('a'), b: hiddenBy('b') };
  if (hidden.a !== undefined && hidden.b !== undefined) {
    if (hidden.a === hidden.b) return [{ code: hidden.a === 'dynamic' ? 'both-dynamic' : 'both-behind-nat' }];
    const dynamic: End = hidden.a === 'dynamic' ? 'a' : 'b';
    return [{ code: 'neither-reachable', dynamic, behindNat: otherEnd(dynamic) }];
  }
  for (const end of ends) {
    const because = hidden[end];
    if (because !== undefined && !mayStart(end)) return [{ code: 'wrong-initiator', end, because }];
  }
  return [];
};

const authenticationReasons = ({ a, b }: Association): readonly AssociationReason[] => {
  const [mine, other] = [a.authentication, b.authentication];
  return mine === undefined || other === undefined || mine.method === other.method
    ? []
    : [{ code: 'authentication-differs', a: mine.method, b: other.method }];
};

const associationReasons = (network: Network, id: Id): readonly AssociationReason[] => {
  const association = entryOf(network.design.associations, id);
  const { a, b } = association;
  const path = associationPath(network, id);
  const { ike, esp } = negotiate(association);
  const reasons: AssociationReason[] = [];
  if (!path.ok) reasons.push({ code: 'no-path', detail: path.reason });
  if (a.ikeVersion !== undefined && b.ikeVersion !== undefined && a.ikeVersion !== b.ikeVersion)
    reasons.push({ code: 'ike-versions-differ', a: a.ikeVersion, b: b.ikeVersion });
  reasons.push(...authenticationReasons(association));
  if (ike.state === 'differ') reasons.push({ code: 'proposals-differ', layer: 'ike', parts: ike.parts });
  if (esp.state === 'differ') reasons.push({ code: 'proposals-differ', layer: 'esp', parts: esp.parts });
  reasons.push(...meeting(network, association, path), ...filteredOn(network, path));
  return reasons;
};

const bareReasons = (network: Network, id: Id): readonly TunnelReason[] => {
  const path = bareTunnelPath(network, id);
  if (!path.ok) return [{ code: 'no-path', detail: path.reason }];
  const tunnel = entryOf(network.design.tunnels, id);
  const filters = entryOf(network.design.transports, path.transport).filters ?? [];
  const usesAssigned = ends.some((end) => (tunnel[end].udpPort ?? assignedVxlanPort) === assignedVxlanPort);
  return usesAssigned && filters.includes('udp-4789')
    ? [{ code: 'transport-filters', transport: path.transport, filter: 'udp-4789' }]
    : [];
};

const protectedReasons = (network: Network, id: Id, association: Id): readonly TunnelReason[] => {
  const tunnel = entryOf(network.design.tunnels, id);
  const entry = entryOf(network.design.associations, association);
  const sides = ends.map((end) => associationEndOf(network, tunnel, entry, end));
  const off = ends.filter((_end, i) => sides[i] === undefined || (i === 1 && sides[0] === sides[1]));
  if (off.length > 0) return [{ code: 'ends-off-association', association, ends: off }];
  const reasons: TunnelReason[] = [];
  const state = associationStates(network).get(association)!;
  if (!state.up) reasons.push({ code: 'association-down', association, reasons: state.reasons });
  const cover = selectorsCover(network, id);
  if (cover.state === 'misses') reasons.push({ code: 'selectors-miss', gaps: cover.gaps });
  return reasons;
};

/** A family that the tunnel may use and that both endpoints have; an endpoint without any address is unknown. */
const familiesMeet = (network: Network, id: Id): boolean => {
  const tunnel = entryOf(network.design.tunnels, id);
  const families = ends.map((end) => {
    const { ipv4, ipv6 } = entryOf(network.design.endpoints, tunnel[end].endpoint);
    if (ipv4 === undefined && ipv6 === undefined) return [4, 6];
    return [...(ipv4 === undefined ? [] : [4]), ...(ipv6 === undefined ? [] : [6])];
  });
  return [4, 6].some(
    (family) =>
      (tunnel.family === undefined || tunnel.family === family) &&
      families.every((list) => list.includes(family)),
  );
};

const tunnelReasons = (network: Network, id: Id): readonly TunnelReason[] => {
  const tunnel = entryOf(network.design.tunnels, id);
  const { a, b } = tunnel;
  const [deviceA, deviceB] = [
    deviceOfTunnelEnd(network, tunnel, 'a'),
    deviceOfTunnelEnd(network, tunnel, 'b'),
  ];
  const reasons: TunnelReason[] = [];
  if (deviceA === deviceB) reasons.push({ code: 'ends-on-one-device', device: deviceA });
  if (a.vni !== undefined && b.vni !== undefined && a.vni !== b.vni)
    reasons.push({ code: 'vni-mismatch', a: a.vni, b: b.vni });
  if (a.udpPort !== undefined && b.udpPort !== undefined && a.udpPort !== b.udpPort)
    reasons.push({ code: 'udp-port-mismatch', a: a.udpPort, b: b.udpPort });
  if (!familiesMeet(network, id)) reasons.push({ code: 'families-differ' });
  for (const [end, device] of [
    ['a', deviceA],
    ['b', deviceB],
  ] as const) {
    const { member } = entryOf(network.design.endpoints, tunnel[end].endpoint);
    const entry = entryOf(network.design.devices, device);
    if (member !== undefined && entry.kind === 'ha-pair' && !forwardingMembers(entry).includes(member))
      reasons.push({ code: 'endpoint-on-standby', end, device, member });
  }
  if (deviceA === deviceB) return reasons;
  reasons.push(
    ...(tunnel.association === undefined
      ? bareReasons(network, id)
      : protectedReasons(network, id, tunnel.association)),
  );
  return reasons;
};

/** States by id, those that stay or come out alike as they were; where all do, the same map. */
const renewedStates = <R>(
  ids: readonly Id[],
  earlier: ReadonlyMap<Id, ComeUp<R>> | undefined,
  stays: (id: Id) => boolean,
  reasonsOf: (id: Id) => readonly R[],
): ReadonlyMap<Id, ComeUp<R>> => {
  let isSame = earlier?.size === ids.length;
  const states = new Map<Id, ComeUp<R>>();
  for (const id of ids) {
    const old = earlier?.get(id);
    let state = old;
    if (old === undefined || !stays(id)) {
      const fresh = verdict(reasonsOf(id));
      if (old === undefined || !sameJson(old, fresh)) {
        state = fresh;
        isSame = false;
      }
    }
    states.set(id, state!);
  }
  return isSame ? earlier! : states;
};

/** Of every association, whether it can come up as designed. Unknown values are taken to fit. */
export const associationStates = perNetwork<ReadonlyMap<Id, ComeUp<AssociationReason>>>(
  (network, earlier) => {
    const { associations } = network.design;
    const before = earlier?.network.design;
    const areWaysKept = before !== undefined && landingsStay(changesBetween(before, network.design));
    return renewedStates(
      Object.keys(associations).sort(),
      earlier?.value,
      (id) => areWaysKept && before.associations[id] === associations[id],
      (id) => associationReasons(network, id),
    );
  },
);

/** Of every tunnel, whether frames can cross it. Unknown values are taken to fit. */
export const tunnelStates = perNetwork<ReadonlyMap<Id, ComeUp<TunnelReason>>>((network, earlier) => {
  const { tunnels, associations, endpoints } = network.design;
  const before = earlier?.network.design;
  const areWaysKept = before !== undefined && landingsStay(changesBetween(before, network.design));
  const stays = (id: Id): boolean => {
    const tunnel = tunnels[id]!;
    return (
      areWaysKept &&
      before.tunnels[id] === tunnel &&
      ends.every((end) => before.endpoints[tunnel[end].endpoint] === endpoints[tunnel[end].endpoint]) &&
      (tunnel.association === undefined ||
        before.associations[tunnel.association] === associations[tunnel.association])
    );
  };
  return renewedStates(network.tunnelIds, earlier?.value, stays, (id) => tunnelReasons(network, id));
});

/** Whether an association or a tunnel can come up as designed, or all that stands against it. */
export function canComeUp(
  network: Network,
  ref: { readonly collection: 'associations'; readonly id: Id },
): ComeUp<AssociationReason>;
export function canComeUp(
  network: Network,
  ref: { readonly collection: 'tunnels'; readonly id: Id },
): ComeUp<TunnelReason>;
export function canComeUp(
  network: Network,
  ref: { readonly collection: 'associations' | 'tunnels'; readonly id: Id },
): ComeUp<Reason> {
  const states: ReadonlyMap<Id, ComeUp<Reason>> = ref.collection === 'associations'
    ? associationStates(network)
    : tunnelStates(network);
  const state = states.get(ref.id);
  if (state === undefined) throw new Error(`the design has no ${ref.id} in ${ref.collection}`);
  return state;
}
