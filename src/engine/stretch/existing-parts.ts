import { isGateway } from '../model/devices.ts';
import type { Entry } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { freeLoopbacks } from '../numbering/free-numbers.ts';
import type { Answer } from '../wire/problem.ts';
import type { Draft } from './draft.ts';
import type { Protection } from './overlay-parts.ts';
import { slugOf } from './site-codes.ts';
import { allowVlan } from './site-parts.ts';
import type { StretchContext } from './stretch.ts';

/** The part of a device's name after its kind, as in fw-gul: what tunnels at it are called by. */
export const codeOf = (draft: Draft, gateway: Id): string => {
  const { name } = draft.entries('devices')[gateway]!;
  const dash = name.indexOf('-');
  return slugOf(dash < 0 ? name : name.slice(dash + 1), 12);
};

/** How the design's associations prove who they are, for the next one to do likewise. */
export const habitsOf = (draft: Draft): Protection => {
  const ends = Object.values(draft.entries('associations')).flatMap(({ a, b }) => [a, b]);
  const domain = ends.flatMap(
    ({ identity }) => /^[a-z0-9-]+\.([a-z0-9.-]+)$/.exec(identity ?? '')?.[1] ?? [],
  );
  return {
    authentication:
      ends.find((end) => end.authentication !== undefined)?.authentication?.method ?? 'certificate',
    ...(domain[0] === undefined ? {} : { domain: domain[0] }),
  };
};

/** The gateway of a site that tunnels end at: one with a loopback before one without. */
export const gatewayAt = (draft: Draft, site: Id): Id | undefined => {
  const hasEndpoint = (id: Id): number =>
    Object.values(draft.entries('endpoints')).some(({ device }) => device === id) ? 0 : 1;
  return Object.entries(draft.entries('devices'))
    .filter(([, device]) => device.site === site && isGateway(device))
    .map(([id]) => id)
    .sort((a, b) => hasEndpoint(a) - hasEndpoint(b) || (a < b ? -1 : 1))[0];
};

type LandingAt = readonly [id: Id, transport: Id];

export const landingsOf = (draft: Draft, gateway: Id): readonly LandingAt[] =>
  Object.entries(draft.entries('links'))
    .flatMap(([id, link]): LandingAt[] =>
      link.kind === 'landing' && link.device === gateway ? [[id, link.transport]] : [],
    )
    .sort(([a], [b]) => (a < b ? -1 : 1));

/** Transports that both gateways land on, those in use by tunnels of the segment first. */
export const sharedBy = (draft: Draft, a: Id, b: Id, preferred: readonly Id[]): readonly Id[] => {
  const onB = new Set(landingsOf(draft, b).map(([, transport]) => transport));
  const shared = [...new Set(landingsOf(draft, a).map(([, transport]) => transport))].filter((t) =>
    onB.has(t),
  );
  const rank = (t: Id): number => (preferred.includes(t) ? preferred.indexOf(t) : preferred.length);
  return shared.sort((x, y) => rank(x) - rank(y) || (x < y ? -1 : 1));
};

/** The loopback of a gateway that tunnels to a peer should end on; made where there is none. */
export const endpointFor = (
  draft: Draft,
  gateway: Id,
  peer: Id | undefined,
  family: 4 | 6,
  context: StretchContext,
): Answer<{ readonly endpoint: Id }> => {
  const endpoints = draft.entries('endpoints');
  const known = Object.keys(endpoints)
    .filter((id) => {
      const { device, member, ipv4, ipv6 } = endpoints[id]!;
      return device === gateway && member === undefined && (family === 4 ? ipv4 : ipv6) !== undefined;
    })
    .sort();
  const uses = (id: Id): number =>
    Object.values(draft.entries('tunnels')).filter(({ a, b }) => {
      const far = a.endpoint === id ? b.endpoint : b.endpoint === id ? a.endpoint : undefined;
      return far !== undefined && (peer === undefined || endpoints[far]!.device === peer);
    }).length;
  const best = known.sort((a, b) => uses(b) - uses(a))[0];
  if (best !== undefined) return { ok: true, endpoint: best };
  const loopbacks = freeLoopbacks(draft.design(), family, 1, context.numbering);
  if (!loopbacks.ok) return loopbacks;
  const name = draft.freeName('endpoints', `lo-${codeOf(draft, gateway)}`);
  const address = loopbacks.loopbacks[0]!;
  return {
    ok: true,
    endpoint: draft.add('endpoints', name, {
      device: gateway,
      name,
      ...(family === 6 ? { ipv6: address } : { ipv4: address }),
    }),
  };
};

interface Plug {
  readonly device: Id;
  readonly port: Id;
}

/** The far plugs of the cables in a port. */
const farPlugs = (draft: Draft, device: Id, port: Id): readonly Plug[] =>
  Object.values(draft.entries('links')).flatMap((link) =>
    link.kind !== 'cable'
      ? []
      : link.a.device === device && link.a.port === port
        ? [link.b]
        : link.b.device === device && link.b.port === port
          ? [link.a]
          : [],
  );

export const switchBehind = (draft: Draft, gateway: Id, port: Id): Id | undefined =>
  farPlugs(draft, gateway, port).find(({ device }) => draft.entries('devices')[device]!.kind === 'switch')
    ?.device;

/** The trunk from a gateway to its switch; where there is no switch, its first LAN port. */
export const uplinkOf = (draft: Draft, gateway: Id): Id | undefined => {
  const { ports } = draft.entries('devices')[gateway]!;
  const lan = Object.entries(ports)
    .filter(([, { role, mode, shut }]) => role === 'lan' && mode !== 'access' && shut !== true)
    .sort(([, a], [, b]) => a.number - b.number)
    .map(([id]) => id);
  return lan.find((port) => switchBehind(draft, gateway, port) !== undefined) ?? lan[0];
};

/** Lets a VLAN through at both ends of a trunk. */
export const openTrunk = (draft: Draft, gateway: Id, port: Id, vlan: number): void => {
  allowVlan(draft, gateway, port, vlan);
  for (const plug of farPlugs(draft, gateway, port)) allowVlan(draft, plug.device, plug.port, vlan);
};

export const portOf = ({ circuits }: Entry<'forwarders'>): Id | undefined =>
  Object.values(circuits).flatMap((circuit) => (circuit.kind === 'port' ? [circuit.port] : []))[0];
