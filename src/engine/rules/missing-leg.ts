import type { Entry } from '../model/design.ts';
import type { Json, MergePatch } from '../model/merge-patch.ts';
import { firstRanks, rankAtEnd } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf } from '../network/network.ts';
import { associationEndOf, endpointAddress, tunnelFamily } from '../network/selectors-cover.ts';
import type { CheckContext } from './check-context.ts';
import type { Fix } from './finding.ts';
import { placesOf } from './places.ts';
import { unusedId } from './unused-id.ts';
import { freeVnis } from './vni-use.ts';

/** Where a tunnel that both sites have already, each with the site in between, ends at one of them. */
export interface Leg {
  readonly tunnel: Id;
  readonly end: End;
}

type AssociationEnd = Entry<'associations'>['a'];

const hostPrefix = (address: string): string => `${address}/${address.includes(':') ? 128 : 32}`;

const deviceOf = (network: Network, { tunnel, end }: Leg): Id =>
  deviceOfTunnelEnd(network, entryOf(network.design.tunnels, tunnel), end);

/** How the site's end of its association with the site in between would look towards the new one. */
const endLike = (network: Network, leg: Leg): AssociationEnd | undefined => {
  const tunnel = entryOf(network.design.tunnels, leg.tunnel);
  if (tunnel.association === undefined) return undefined;
  const association = entryOf(network.design.associations, tunnel.association);
  const side = associationEndOf(network, tunnel, association, leg.end);
  return side === undefined ? undefined : association[side];
};

/** An association that both devices have with each other already. */
const associationBetween = (network: Network, a: Id, b: Id): Id | undefined =>
  (network.associationsByDevice.get(a) ?? [])
    .map(({ association }) => association)
    .find((id) => {
      const entry = entryOf(network.design.associations, id);
      return ends.every((end) => [a, b].includes(entry[end].device)) && entry.a.device !== entry.b.device;
    });

const asJson = (entry: unknown): Json => JSON.parse(JSON.stringify(entry)) as Json;

const newAssociation = (network: Network, a: Leg, b: Leg, name: string): Json | undefined => {
  const { design } = network;
  const [likeA, likeB] = [endLike(network, a), endLike(network, b)];
  if (likeA === undefined || likeB === undefined) return undefined;
  const family = tunnelFamily(network, entryOf(design.tunnels, a.tunnel)) ?? 4;
  const addressOf = ({ tunnel, end }: Leg): string | undefined =>
    endpointAddress(network, entryOf(design.tunnels, tunnel)[end].endpoint, family);
  const [local, remote] = [addressOf(a), addressOf(b)];
  const [rank] = firstRanks(1);
  const towards = (
    like: AssociationEnd,
    from: string | undefined,
    to: string | undefined,
    start: 'starts' | 'answers',
  ): AssociationEnd => ({
    ...like,
    start,
    ...(like.selectors === undefined || from === undefined || to === undefined
      ? {}
      : { selectors: { endpoints: { rank: rank!, local: hostPrefix(from), remote: hostPrefix(to) } } }),
    ...(like.authentication?.method === 'pre-shared-key'
      ? { authentication: { method: 'pre-shared-key', vaultEntry: name } }
      : {}),
  });
  return asJson({
    name,
    a: towards(likeA, local, remote, 'starts'),
    b: towards(likeB, remote, local, 'answers'),
  });
};

const tunnelEndLike = (network: Network, { tunnel, end }: Leg, vni: number) => {
  const { via: _via, ...like } = entryOf(network.design.tunnels, tunnel)[end];
  return { ...like, vni };
};

/**
 * The direct tunnel between two sites that so far meet at a third, made like those that they have with it: in the same
 * forwarders and isolation groups, protected where they are. A proposal to be tried: nothing says that the two sites share a
 * transport.
 */
export const missingLegFix = (network: Network, a: Leg, b: Leg, context: CheckContext): Fix | undefined => {
  const { design } = network;
  const [deviceA, deviceB] = [deviceOf(network, a), deviceOf(network, b)];
  const [vni] = freeVnis(design, context, 1);
  const like = entryOf(design.tunnels, a.tunnel);
  const [circuitA, circuitB] = [
    { leg: a, device: deviceA },
    { leg: b, device: deviceB },
  ].map(({ leg, device }) =>
    (network.circuitsByTunnel.get(leg.tunnel) ?? []).find((at) => at.device === device),
  );
  if (vni === undefined || circuitA === undefined || circuitB === undefined) return undefined;
  const places = placesOf(design, deviceA, deviceB);
  const pair = `${entryOf(design.devices, deviceA).name} ${entryOf(design.devices, deviceB).name}`;
  const isProtected = like.association !== undefined;
  const existing = isProtected ? associationBetween(network, deviceA, deviceB) : undefined;
  const associationId = existing ?? unusedId(design.associations, `as-${deviceA}-${deviceB}`);
  const association = isProtected && existing === undefined ? newAssociation(network, a, b, pair) : undefined;
  if (isProtected && existing === undefined && association === undefined) return undefined;
  const id = unusedId(design.tunnels, `tn-${deviceA}-${deviceB}`);
  const forwarders: { [id: string]: MergePatch } = {};
  for (const at of [circuitA, circuitB]) {
    const { circuits } = entryOf(design.forwarders, at.forwarder);
    const { isolation } = at.circuit;
    forwarders[at.forwarder] = {
      circuits: {
        [unusedId(circuits, id)]: {
          kind: 'tunnel',
          rank: rankAtEnd(circuits),
          tunnel: id,
          ...(isolation === undefined ? {} : { isolation }),
        },
      },
    };
  }
  return {
    id: 'add-leg',
    label: `Join ${places.a} and ${places.b}`,
    sentence: `Adds a tunnel with VNI ${vni} between ${places.a} and ${places.b}, set up like those that both have with the site between${association === undefined ? '' : ', and an association for it'}.`,
    patch: {
      ...(association === undefined ? {} : { associations: { [associationId]: association } }),
      tunnels: {
        [id]: asJson({
          name: id,
          a: tunnelEndLike(network, a, vni),
          b: tunnelEndLike(network, b, vni),
          ...(isProtected ? { association: associationId } : {}),
          ...(like.family === undefined ? {} : { family: like.family }),
        }),
      },
      forwarders,
    },
  };
};
