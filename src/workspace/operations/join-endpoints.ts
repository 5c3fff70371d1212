import type { DeepReadonly, Design, Entry } from '../../engine/model/design.ts';
import { isGateway } from '../../engine/model/devices.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch, joinPatches } from '../../engine/model/merge-patch.ts';
import type { AssociationEnd, Endpoint, Forwarder } from '../../engine/model/overlay.ts';
import { firstRanks, inRankOrder, rankAtEnd } from '../../engine/model/rank.ts';
import type { Landing } from '../../engine/model/underlay.ts';
import { tunnelPath } from '../../engine/network/association-path.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { freeTunnelName } from '../../engine/numbering/free-numbers.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { noNumberingContext } from '../../engine/numbering/numbering-context.ts';
import { freeName } from './free-names.ts';
import { linksIn } from './connect-ports.ts';
import { landSegment, segmentBridge } from './segment-bridge.ts';
import type { NewId, Operation } from './operation.ts';
import { refused } from './operation.ts';

export interface JoinChoice {
  readonly a: string;
  readonly b: string;
  readonly vni: number;
  /** The association that is to protect the tunnel, `new` to make one, `none` for a bare tunnel. */
  readonly association: string | 'new' | 'none';
  /** The transport that a new association, or a bare tunnel, is to run over; every shared one where absent. */
  readonly transport?: string;
  /** The segment that the tunnel is to carry: it is joined to that segment's bridge at both ends. */
  readonly segment?: string;
}

type LandingEntry = readonly [id: string, landing: DeepReadonly<Landing>];
const landingsOf = (design: Design, device: string): readonly LandingEntry[] =>
  Object.entries(design.links)
    .filter(
      (entry): entry is [string, DeepReadonly<Landing>] =>
        entry[1].kind === 'landing' && entry[1].device === device,
    )
    .sort(([a], [b]) => (a < b ? -1 : 1));

/** Transports on which both devices have landed, in the order of their ids. */
export const sharedTransports = (design: Design, deviceA: string, deviceB: string): readonly string[] => {
  const onA = new Set(landingsOf(design, deviceA).map(([, landing]) => landing.transport));
  return [...new Set(landingsOf(design, deviceB).map(([, landing]) => landing.transport))]
    .filter((id) => onA.has(id))
    .sort();
};

/** Why two endpoints can't be joined; undefined when they can. */
export const whyNoTunnel = (design: Design, a: string, b: string): string | undefined => {
  const [endA, endB] = [design.endpoints[a], design.endpoints[b]];
  if (endA === undefined || endB === undefined) return 'That endpoint is no longer there.';
  if (a === b) return 'A tunnel needs two different loopback endpoints.';
  if (endA.device === endB.device)
    return `Both endpoints are on ${design.devices[endA.device]!.name}: a tunnel joins two devices.`;
  const families = (end: DeepReadonly<Endpoint>): readonly number[] => [
    ...(end.ipv4 === undefined ? [] : [4]),
    ...(end.ipv6 === undefined ? [] : [6]),
  ];
  if (!families(endA).some((family) => families(endB).includes(family)))
    return `${endA.name} and ${endB.name} have no address of the same family: give one of them an address of the other's.`;
  return undefined;
};

/** Associations between the devices of two endpoints. */
export const associationsBetween = (design: Design, a: string, b: string): readonly string[] => {
  const [deviceA, deviceB] = [design.endpoints[a]?.device, design.endpoints[b]?.device];
  return Object.entries(design.associations)
    .filter(
      ([, entry]) =>
        (entry.a.device === deviceA && entry.b.device === deviceB) ||
        (entry.a.device === deviceB && entry.b.device === deviceA),
    )
    .map(([id]) => id)
    .sort();
};

/**
 * The transport that a further tunnel between two endpoints most likely runs over: the one that a tunnel of theirs uses
 * already, else the first that their devices share.
 */
export const likelyTransport = (design: Design, a: string, b: string): string | undefined => {
  const [endA, endB] = [design.endpoints[a], design.endpoints[b]];
  if (endA === undefined || endB === undefined) return undefined;
  const shared = sharedTransports(design, endA.device, endB.device);
  const network = indexNetwork(design);
  const used = Object.entries(design.tunnels)
    .filter(([, tunnel]) =>
      [tunnel.a.endpoint, tunnel.b.endpoint].some((endpoint) => endpoint === a || endpoint === b),
    )
    .map(([id]) => tunnelPath(network, id))
    .flatMap((path) => (path.ok ? [path.transport] : []));
  return used.find((transport) => shared.includes(transport)) ?? shared[0];
};

/** True when a tunnel over the transport needs no protection of its own. */
export const mayGoBare = (design: Design, transport: string | undefined): boolean =>
  transport !== undefined && design.transports[transport]?.trusted === true;

const sameFamily = (a: DeepReadonly<Endpoint>, b: DeepReadonly<Endpoint>): 4 | 6 =>
  a.ipv4 !== undefined && b.ipv4 !== undefined ? 4 : 6;
const addressOf = (endpoint: DeepReadonly<Endpoint>, family: 4 | 6): string =>
  family === 4 ? endpoint.ipv4! : endpoint.ipv6!;

/** `via` over the transports that both devices share, or over all of one's own where they share none yet. */
const viaOf = (design: Design, device: string, shared: readonly string[]): AssociationEnd['via'] => {
  const own = landingsOf(design, device).filter(
    ([, landing]) => shared.length === 0 || shared.includes(landing.transport),
  );
  const ranks = firstRanks(own.length);
  return Object.fromEntries(own.map(([id], i) => [`via${i + 1}`, { rank: ranks[i]!, landing: id }]));
};

const waitsBehindNat = (design: Design, device: string): boolean =>
  landingsOf(design, device).some(
    ([, landing]) =>
      landing.dynamic === true || (landing.nat !== undefined && landing.nat.forwarded !== true),
  );

// A strong default by RFC 8221 section 5 and RFC 8247 section 2.4: AES-GCM with a 16-octet ICV, group 19.
const usualEnd = (start: 'starts' | 'answers'): Omit<AssociationEnd, 'device'> => {
  const rank = firstRanks(1)[0]!;
  return {
    ikeVersion: 2,
    authentication: { method: 'certificate' },
    ikeProposals: {
      first: { rank, encryption: 'aes-gcm-16', keyBits: 256, prf: 'hmac-sha2-256', group: 19 },
    },
    espProposals: { first: { rank, encryption: 'aes-gcm-16', keyBits: 256, group: 19 } },
    start,
    liveness: { intervalSeconds: 10, tries: 3 },
    perfectForwardSecrecy: true,
    extendedSequence: true,
    mode: 'tunnel',
    outerDf: 'set',
    whenDown: 'drop',
  };
};

type Ends = readonly [a: DeepReadonly<Endpoint>, b: DeepReadonly<Endpoint>];

/** A new association between two devices; with endpoints its selectors cover just these. */
const newAssociation = (
  design: Design,
  deviceA: string,
  deviceB: string,
  over: readonly string[],
  endpoints?: Ends,
): Entry<'associations'> => {
  const rank = firstRanks(1)[0]!;
  const family = endpoints === undefined ? undefined : sameFamily(...endpoints);
  const selectorsOf = (own: 0 | 1): Pick<AssociationEnd, 'selectors'> =>
    endpoints === undefined || family === undefined
      ? {}
      : {
          selectors: {
            loopbacks: {
              rank,
              local: addressOf(endpoints[own], family),
              remote: addressOf(endpoints[own === 0 ? 1 : 0], family),
            },
          },
        };
  // Whoever cannot be reached from outside has to start; with both reachable one is enough.
  const bStarts = waitsBehindNat(design, deviceB);
  const aStarts = waitsBehindNat(design, deviceA) || !bStarts;
  return {
    name: freeName(
      design.associations,
      `as-${design.devices[deviceA]!.name}-${design.devices[deviceB]!.name}`,
      false,
    ),
    a: {
      device: deviceA,
      via: viaOf(design, deviceA, over),
      ...usualEnd(aStarts ? 'starts' : 'answers'),
      ...selectorsOf(0),
    },
    b: {
      device: deviceB,
      via: viaOf(design, deviceB, over),
      ...usualEnd(bStarts ? 'starts' : 'answers'),
      ...selectorsOf(1),
    },
  };
};

/** An IPsec association between two gateways that carries no tunnel yet. */
export const associateGateways = (design: Design, a: string, b: string, newId: NewId): Operation => {
  const [deviceA, deviceB] = [design.devices[a], design.devices[b]];
  if (deviceA === undefined || deviceB === undefined) return refused('That device is no longer there.');
  if (a === b) return refused('An association needs two different gateways.');
  for (const device of [deviceA, deviceB])
    if (!isGateway(device))
      return refused(
        `${device.name} is a ${device.kind}: an association joins firewalls, HA pairs or routers.`,
      );
  const id = newId('as');
  const association = newAssociation(design, a, b, sharedTransports(design, a, b));
  return {
    ok: true,
    label: `Associate ${deviceA.name} with ${deviceB.name}`,
    patch: { associations: { [id]: association } } as unknown as MergePatch,
    created: [{ collection: 'associations', id }],
  };
};

/** The bridge on a device that takes a segment's VLAN at the device's site, or what has to be made for it. */
const bridgeFor = (
  design: Design,
  device: string,
  segment: string,
  newId: NewId,
): { readonly id: string; readonly fresh?: DeepReadonly<Forwarder> } => {
  const site = design.devices[device]!.site;
  const plan = design.segments[segment]!;
  const vlan = plan.sites[site]?.vlan;
  const found = segmentBridge(design, device, segment);
  if (found !== undefined) return { id: found };
  const ports = Object.entries(design.devices[device]!.ports)
    .filter(([, port]) => port.role === 'lan')
    .sort(
      ([idA, a], [idB, b]) =>
        cabledFirst(design, device, idA) - cabledFirst(design, device, idB) || a.number - b.number,
    );
  const port = ports[0]?.[0];
  const rank = firstRanks(1)[0]!;
  return {
    id: newId('br'),
    fresh: {
      device,
      kind: 'bridge',
      name: freeName(
        Object.fromEntries(
          Object.entries(design.forwarders).filter(([, forwarder]) => forwarder.device === device),
        ),
        `br-${vlan ?? plan.letter.toLowerCase()}`,
        false,
      ),
      circuits:
        port === undefined
          ? {}
          : { access: { kind: 'port', rank, port, vlans: vlan === undefined ? 'untagged' : [vlan] } },
    },
  };
};
const cabledFirst = (design: Design, device: string, port: string): number =>
  linksIn(design, device, port, undefined).length > 0 ? 0 : 1;

const joinBridge = (
  design: Design,
  device: string,
  choice: JoinChoice,
  tunnel: string,
  newId: NewId,
): MergePatch => {
  const bridge = bridgeFor(design, device, choice.segment!, newId);
  const circuits = bridge.fresh?.circuits ?? design.forwarders[bridge.id]!.circuits;
  // A tunnel that joins others which never exchange frames keeps to their group, or the new leg would close a loop.
  const isolation = inRankOrder(circuits).find(([, circuit]) => circuit.kind === 'tunnel')?.[1].isolation;
  const circuit = {
    kind: 'tunnel',
    rank: rankAtEnd(circuits),
    tunnel,
    ...(isolation === undefined ? {} : { isolation }),
  };
  return {
    forwarders: {
      [bridge.id]: { ...bridge.fresh, circuits: { ...bridge.fresh?.circuits, [tunnel]: circuit } },
    },
  } as MergePatch;
};

/** A tunnel from ring to ring, with its association and its place in both bridges, as one step. */
export const joinEndpoints = (
  design: Design,
  choice: JoinChoice,
  newId: NewId,
  context: NumberingContext = noNumberingContext,
): Operation => {
  const why = whyNoTunnel(design, choice.a, choice.b);
  if (why !== undefined) return refused(why);
  const [endA, endB] = [design.endpoints[choice.a]!, design.endpoints[choice.b]!];
  const family = sameFamily(endA, endB);
  const over =
    choice.transport === undefined ? sharedTransports(design, endA.device, endB.device) : [choice.transport];
  const patches: MergePatch[] = [];
  let association: string | undefined;
  if (choice.association === 'new') {
    association = newId('as');
    patches.push({
      associations: { [association]: newAssociation(design, endA.device, endB.device, over, [endA, endB]) },
    } as unknown as MergePatch);
  } else if (choice.association !== 'none') {
    if (!associationsBetween(design, choice.a, choice.b).includes(choice.association))
      return refused('That association does not join these two devices.');
    association = choice.association;
  }
  const id = newId('tn');
  const end = (endpoint: string, device: string) => ({
    endpoint,
    vni: choice.vni,
    // RFC 7348 section 5: the port that IANA assigned; stated, because older equipment has another default.
    udpPort: 4789,
    outerDf: 'set',
    innerTags: 'strip',
    ...(association === undefined ? { via: viaOf(design, device, over) } : {}),
  });
  const letter =
    choice.segment === undefined ? undefined : design.segments[choice.segment]?.letter.toLowerCase();
  const base = `tn-${design.devices[endA.device]!.name}-${design.devices[endB.device]!.name}${letter === undefined ? '' : `-${letter}`}`;
  const name = freeTunnelName(design, base, context);
  patches.push({
    tunnels: {
      [id]: {
        name,
        a: end(choice.a, endA.device),
        b: end(choice.b, endB.device),
        ...(association === undefined ? {} : { association }),
        family,
      },
    },
  } as unknown as MergePatch);
  if (choice.segment !== undefined) {
    let landed = design;
    for (const device of [endA.device, endB.device]) {
      const landing = landSegment(landed, choice.segment, design.devices[device]!.site, context);
      landed = applyPatch(landed, landing);
      patches.push(landing);
    }
    for (const device of [endA.device, endB.device])
      patches.push(joinBridge(landed, device, choice, id, newId));
  }
  return {
    ok: true,
    label: `Pull ${name}`,
    patch: joinPatches(design, patches),
    created: [{ collection: 'tunnels', id }],
  };
};
