import type { ElementRef } from '../model/design.ts';
import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import { associationPath } from '../network/association-path.ts';
import { associationStates } from '../network/can-come-up.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { DesignFacts, Device, End, Network } from '../network/network.ts';
import { entryOf, forwardingMembers, otherEnd } from '../network/network.ts';
import type { Missing } from '../wire/tunnel-stack.ts';
import { casualtiesOf } from './casualties.ts';
import type { Outage } from './outage.ts';
import { outageOf } from './outage.ts';
import { standingAfter } from './standing.ts';

/** A stretch of time between the failure of a member and frames that pass again. */
export interface FailoverPart {
  /** The other member takes over; the far end notices that its peer is gone; both make new keys. */
  readonly what: 'takeover' | 'detection' | 'key-exchange';
  /** Absent where the design doesn't say. */
  readonly us?: number;
  readonly missing: readonly Missing[];
}
export interface AssociationRecovery {
  readonly association: Id;
  /** `kept` with its keys; `renewed`; `lost` for as long as the member is; `unknown` where nobody has said whether state is kept. */
  readonly fate: 'kept' | 'renewed' | 'lost' | 'unknown';
  /** In order of time. Takeover and detection run side by side, keys are made after both. */
  readonly parts: readonly FailoverPart[];
  /** Absent where a part isn't known, or it is lost. */
  readonly totalUs?: number;
}
export interface LeftBehind {
  readonly ref: ElementRef;
  readonly because: 'endpoint-of-member' | 'landing-of-member' | 'cabled-to-member';
}
export interface Failover {
  readonly device: Id;
  readonly lost: Member;
  readonly active: Member;
  /** Endpoints that both members share and landings that both are plugged into, which the other member carries on. */
  readonly moves: readonly ElementRef[];
  readonly leftBehind: readonly LeftBehind[];
  /** Of each association that ends at the pair and carries a tunnel, in order of id. */
  readonly recoveries: readonly AssociationRecovery[];
  /** The longest of them, or the takeover alone without any; absent where one isn't known. Lost ones are not in it. */
  readonly totalUs?: number;
  readonly outage: Outage;
}

type Pair = Extract<Device, { kind: 'ha-pair' }>;

// RFC 7296 section 1.2: IKE_SA_INIT and IKE_AUTH are two messages each. RFC 2409 sections 5 and 5.5: main mode six, quick mode three.
const messagesOfIke = { 1: 9, 2: 4 } as const;

const takeoverOf = (id: Id, { failoverUs }: Pair): FailoverPart => ({
  what: 'takeover',
  ...(failoverUs === undefined
    ? { missing: [{ ref: { collection: 'devices', id }, path: ['failoverUs'] }] }
    : { us: failoverUs, missing: [] }),
});

/** How long until the far end asks in vain: its interval as often as it tries. */
const detectionOf = (network: Network, association: Id, end: End): FailoverPart => {
  const { liveness } = entryOf(network.design.associations, association)[end];
  return {
    what: 'detection',
    ...(liveness === undefined || liveness === 'off'
      ? { missing: [{ ref: { collection: 'associations', id: association }, path: [end, 'liveness'] }] }
      : { us: liveness.intervalSeconds * liveness.tries * 1_000_000, missing: [] }),
  };
};

/** The messages of a fresh start on their way; what either end computes is not in it. */
const keyExchangeOf = (network: Network, after: Network, association: Id): FailoverPart => {
  const path = associationPath(after, association);
  const what = 'key-exchange';
  if (!path.ok) return { what, missing: [] };
  const { latencyUs } = entryOf(network.design.transports, path.transport);
  const { a, b } = entryOf(network.design.associations, association);
  return {
    what,
    ...(latencyUs === undefined
      ? { missing: [{ ref: { collection: 'transports', id: path.transport }, path: ['latencyUs'] }] }
      : { us: messagesOfIke[a.ikeVersion ?? b.ikeVersion ?? 2] * latencyUs, missing: [] }),
  };
};

const recoveryOf = (
  network: Network,
  after: Network,
  id: Id,
  pair: Pair,
  association: Id,
): AssociationRecovery => {
  const entry = entryOf(network.design.associations, association);
  const end: End = entry.a.device === id ? 'a' : 'b';
  const takeover = takeoverOf(id, pair);
  if (associationStates(after).get(association)?.up !== true) return { association, fate: 'lost', parts: [] };
  if (pair.stateSync === true)
    return {
      association,
      fate: 'kept',
      parts: [takeover],
      ...(takeover.us === undefined ? {} : { totalUs: takeover.us }),
    };
  const keys = keyExchangeOf(network, after, association);
  // RFC 7296 section 2.4: an end that starts afresh says so with INITIAL_CONTACT, and the far end drops what it still has.
  const waits = entry[end].start === 'answers' ? [detectionOf(network, association, otherEnd(end))] : [];
  const parts = [takeover, ...waits, keys];
  if (pair.stateSync === undefined) {
    const missing: Missing = { ref: { collection: 'devices', id }, path: ['stateSync'] };
    return {
      association,
      fate: 'unknown',
      parts: [{ ...takeover, missing: [...takeover.missing, missing] }],
    };
  }
  const isKnown = parts.every(({ us }) => us !== undefined);
  const before = Math.max(takeover.us ?? 0, ...waits.map(({ us }) => us ?? 0));
  return { association, fate: 'renewed', parts, ...(isKnown ? { totalUs: before + keys.us! } : {}) };
};

const byKey = (x: ElementRef, y: ElementRef): number =>
  `${x.collection} ${x.id}` < `${y.collection} ${y.id}` ? -1 : 1;

const whatMoves = (network: Network, device: Id, lost: Member) => {
  const { design } = network;
  const moves: ElementRef[] = [];
  const leftBehind: LeftBehind[] = [];
  for (const id of network.endpointsByDevice.get(device) ?? []) {
    const { member } = entryOf(design.endpoints, id);
    const ref: ElementRef = { collection: 'endpoints', id };
    if (member === undefined) moves.push(ref);
    else if (member === lost) leftBehind.push({ ref, because: 'endpoint-of-member' });
  }
  for (const id of network.landingsByDevice.get(device) ?? []) {
    const landing = entryOf(design.links, id);
    const members = landing.kind === 'landing' ? (landing.members ?? 'both') : 'both';
    const ref: ElementRef = { collection: 'links', id };
    if (members === 'both') moves.push(ref);
    else if (Number(members) === lost) leftBehind.push({ ref, because: 'landing-of-member' });
  }
  const reached = { [1]: new Set<Id>(), [2]: new Set<Id>() };
  for (const { cable, member, end } of network.cablesByDevice.get(device) ?? []) {
    const link = entryOf(design.links, cable);
    if (link.kind === 'cable' && link[otherEnd(end)].device !== device)
      reached[member].add(link[otherEnd(end)].device);
  }
  for (const id of [...reached[lost]].sort())
    if (!reached[lost === 1 ? 2 : 1].has(id))
      leftBehind.push({ ref: { collection: 'devices', id }, because: 'cabled-to-member' });
  return { moves: moves.sort(byKey), leftBehind };
};

const failoverOf = (network: Network, id: Id, pair: Pair, lost: Member): Failover => {
  const failed: readonly ElementRef[] = [{ collection: 'devices', id, member: lost }];
  const answer = casualtiesOf(network, failed);
  if (!answer.ok) throw new Error(`a member of a pair can fail: ${JSON.stringify(answer.problems)}`);
  const { after } = standingAfter(network, answer.casualties);
  const associations = new Set(
    (network.tunnelsByDevice.get(id) ?? [])
      .map(({ tunnel }) => entryOf(network.design.tunnels, tunnel).association)
      .filter((association) => association !== undefined)
      .filter((association) => {
        const { a, b } = entryOf(network.design.associations, association);
        return a.device === id || b.device === id;
      }),
  );
  const recoveries =
    after === undefined
      ? []
      : [...associations]
          .filter((association) => associationStates(network).get(association)!.up)
          .sort()
          .map((association) => recoveryOf(network, after, id, pair, association));
  const totals = recoveries
    .filter(({ fate }) => fate !== 'lost')
    .map(({ totalUs }) => totalUs)
    .concat(pair.failoverUs);
  return {
    device: id,
    lost,
    active: lost === 1 ? 2 : 1,
    ...whatMoves(network, id, lost),
    recoveries,
    ...(totals.some((total) => total === undefined)
      ? {}
      : { totalUs: Math.max(...totals.map((total) => total!)) }),
    outage: outageOf(network, failed, answer.casualties),
  };
};

/**
 * For every HA pair, what happens when a member that forwards is lost: what the other one carries on, what stays behind with
 * the lost one, which hosts part, and how long associations take, from the timers in the design. Pairs in order of id.
 */
export const failovers = (design: DesignFacts): readonly Failover[] => {
  const network = indexNetwork(design);
  return network.deviceIds.flatMap((id) => {
    const device = entryOf(design.devices, id);
    return device.kind === 'ha-pair'
      ? forwardingMembers(device).map((member) => failoverOf(network, id, device, member))
      : [];
  });
};
