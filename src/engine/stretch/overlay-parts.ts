import type { DeepReadonly, Entry } from '../model/design.ts';
import type { AssociationEnd } from '../model/overlay.ts';
import { firstRanks, inRankOrder, rankAtEnd } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import { strongEspProposal, strongIkeProposal, usualLiveness } from '../rules/strong-suite.ts';
import type { Draft } from './draft.ts';

/** One end of what joins two gateways. */
export interface OverlayEnd {
  readonly gateway: Id;
  readonly code: string;
  readonly endpoint: Id;
  /** Landings in the order in which they are tried. */
  readonly via: readonly Id[];
}

const viaOf = (landings: readonly Id[]): AssociationEnd['via'] => {
  const ranks = firstRanks(landings.length);
  return Object.fromEntries(landings.map((landing, i) => [`via${i + 1}`, { rank: ranks[i]!, landing }]));
};

const landingOf = (draft: Draft, id: Id) => {
  const link = draft.entries('links')[id];
  return link?.kind === 'landing' ? link : undefined;
};

/** True where nobody outside can send the end a first packet over one of its landings. */
const isHidden = (draft: Draft, { via }: OverlayEnd): boolean =>
  via.some((id) => {
    const landing = landingOf(draft, id);
    return (
      (landing?.dynamic === true && landing.dynamicName === undefined) ||
      (landing?.nat !== undefined && landing.nat.forwarded !== true)
    );
  });

const addressOf = (draft: Draft, endpoint: Id): string => {
  const { ipv4, ipv6 } = draft.entries('endpoints')[endpoint]!;
  return (ipv4 ?? ipv6)!;
};

export interface Protection {
  readonly authentication: 'certificate' | 'pre-shared-key';
  readonly domain?: string;
}

/** What an end calls itself: the name it has already, else its gateway's name in the domain. */
const identityOf = (draft: Draft, gateway: Id, domain: string | undefined): string => {
  const known = Object.values(draft.entries('associations'))
    .flatMap(({ a, b }) => [a, b])
    .find(({ device, identity }) => device === gateway && identity !== undefined);
  if (known?.identity !== undefined) return known.identity;
  const device = draft.entries('devices')[gateway]!;
  const name = device.name.toLowerCase().replaceAll(/[^a-z0-9-]+/g, '-');
  return domain === undefined ? name : `${name}.${domain}`;
};

/** An IPsec association between two gateways for tunnels between their loopbacks, with common strong values. */
export const addAssociation = (
  draft: Draft,
  a: OverlayEnd,
  b: OverlayEnd,
  { authentication, domain }: Protection,
): Id => {
  const name = draft.freeName('associations', `as-${a.code}-${b.code}`);
  const hidden = { a: isHidden(draft, a), b: isHidden(draft, b) };
  // Whoever can't be reached from outside has to start; of two that can be, the second does.
  const starts = { a: hidden.a, b: hidden.b || !hidden.a };
  // RFC 3948 section 4: a NAT forgets a flow; only where there is one does anything have to be sent for that.
  const hasNat = [...a.via, ...b.via].some((id) => landingOf(draft, id)?.nat !== undefined);
  const [rank] = firstRanks(1);
  const end = (own: OverlayEnd, far: OverlayEnd, isStarting: boolean): DeepReadonly<AssociationEnd> => ({
    device: own.gateway,
    via: viaOf(own.via),
    ikeVersion: 2,
    identity: identityOf(draft, own.gateway, domain),
    authentication:
      authentication === 'certificate'
        ? { method: 'certificate' }
        : { method: 'pre-shared-key', vaultEntry: `ipsec ${name.slice(3)}` },
    ikeProposals: { first: strongIkeProposal },
    espProposals: { first: strongEspProposal },
    selectors: {
      loopbacks: {
        rank: rank!,
        local: addressOf(draft, own.endpoint),
        remote: addressOf(draft, far.endpoint),
      },
    },
    start: isStarting ? 'starts' : 'answers',
    liveness: usualLiveness,
    perfectForwardSecrecy: true,
    extendedSequence: true,
    // Common practice, no source: rekeyed after four hours and one hour; a window that a fast line doesn't outrun.
    ikeLifetimeSeconds: 14_400,
    childLifetimeSeconds: 3_600,
    replayWindow: 1024,
    mode: 'tunnel',
    outerDf: 'set',
    // RFC 3948 section 4: 20 seconds.
    ...(hasNat ? { natKeepaliveSeconds: 20 } : {}),
    ikeFragmentation: true,
    whenDown: 'drop',
  });
  return draft.add('associations', name, { name, a: end(a, b, starts.a), b: end(b, a, starts.b) });
};

/** A tunnel between two loopbacks, inside an association or, without one, bare. */
export const addTunnel = (
  draft: Draft,
  a: OverlayEnd,
  b: OverlayEnd,
  facts: { readonly vni: number; readonly name: string; readonly association?: Id },
): Id => {
  const { vni, name, association } = facts;
  const end = ({ endpoint, via }: OverlayEnd): Entry<'tunnels'>['a'] => ({
    endpoint,
    vni,
    // RFC 7348 section 5: the port that IANA assigned; stated, because older equipment has another default.
    udpPort: 4789,
    outerDf: 'set',
    innerTags: 'strip',
    ...(association === undefined ? { via: viaOf(via) } : {}),
  });
  return draft.add('tunnels', name, {
    name,
    a: end(a),
    b: end(b),
    ...(association === undefined ? {} : { association }),
    family: addressOf(draft, a.endpoint).includes(':') ? 6 : 4,
  });
};

/** Gives a tunnel to a forwarder, in the group of those that never exchange frames where there is one. */
export const joinTunnel = (draft: Draft, forwarder: Id, tunnel: Id, isolation?: string): void => {
  const before = draft.entries('forwarders')[forwarder]!;
  draft.set('forwarders', forwarder, {
    ...before,
    circuits: {
      ...before.circuits,
      [tunnel]: {
        kind: 'tunnel',
        rank: rankAtEnd(before.circuits),
        tunnel,
        ...(isolation === undefined ? {} : { isolation }),
      },
    },
  });
};

/** The isolation group that a forwarder's tunnels are in; undefined where they exchange frames. */
export const isolationOf = ({ circuits }: Entry<'forwarders'>): string | undefined =>
  inRankOrder(circuits).find(([, circuit]) => circuit.kind === 'tunnel')?.[1].isolation;

export interface ForwarderNeeds {
  readonly gateway: Id;
  readonly code: string;
  readonly letter: string;
  readonly kind: 'bridge' | 'cross-connect';
  /** Absent where the site has none of the segment's hosts and only passes it on. */
  readonly access?: { readonly port: Id; readonly vlan: number };
}

/** A bridge, or a cross-connect without its policy yet, for one segment on a gateway. */
export const addForwarder = (draft: Draft, needs: ForwarderNeeds): Id => {
  const { gateway, code, letter, kind, access } = needs;
  const stem = kind === 'bridge' ? 'br' : 'xc';
  const names = new Set(
    Object.values(draft.entries('forwarders'))
      .filter(({ device }) => device === gateway)
      .map(({ name }) => name),
  );
  const base = `${stem}-${access?.vlan ?? letter.toLowerCase()}`;
  let name = base;
  for (let n = 2; names.has(name); n += 1) name = `${base}-${n}`;
  const [rank] = firstRanks(1);
  return draft.add('forwarders', `${stem}-${code}-${letter.toLowerCase()}`, {
    device: gateway,
    kind,
    name,
    circuits:
      access === undefined
        ? {}
        : { access: { kind: 'port', rank: rank!, port: access.port, vlans: [access.vlan] } },
    // RFC 7348 section 4.2: what goes to groups is copied into the tunnels; said, since equipment differs.
    multicast: 'flood',
  });
};
