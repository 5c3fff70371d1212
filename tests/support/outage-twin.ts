import type { Design, ElementRef } from '#engine/model/design.ts';
import { bruteForceFlood } from './brute-force-flood.ts';

/**
 * The slow, obvious way to an outage: what failed is taken out of the document, pairs that lost their active member name the
 * other one, and hosts ask again who hears them. Nothing of it is shared with the engine's outage.
 */

type Draft = { -readonly [K in keyof Design]: Design[K] };

const without = <T>(entries: { readonly [id: string]: T }, isGone: (id: string, entry: T) => boolean) =>
  Object.fromEntries(Object.entries(entries).filter(([id, entry]) => !isGone(id, entry)));

const landingWithout = (
  link: Extract<Design['links'][string], { kind: 'landing' }>,
  member: 1 | 2,
): typeof link | undefined => {
  const other = member === 1 ? '2' : '1';
  if (link.members === undefined || link.members === 'both') return { ...link, members: other };
  return link.members === other ? link : undefined;
};

const dropLandings = (draft: Draft, isGone: (id: string, link: Design['links'][string]) => boolean): void => {
  const before = draft.links;
  draft.links = without(before, isGone);
  const emptied = (via: { readonly [id: string]: { readonly landing: string } } | undefined): boolean =>
    via !== undefined &&
    Object.values(via).some(({ landing }) => before[landing]?.kind === 'landing') &&
    Object.values(via).every(({ landing }) => draft.links[landing]?.kind !== 'landing');
  const dead = Object.keys(draft.associations).filter((id) => {
    const { a, b } = draft.associations[id]!;
    return emptied(a.via) || emptied(b.via);
  });
  dropTunnels(
    draft,
    (_id, tunnel) =>
      (tunnel.association === undefined && (emptied(tunnel.a.via) || emptied(tunnel.b.via))) ||
      (tunnel.association !== undefined && dead.includes(tunnel.association)),
  );
};

const dropTunnels = (
  draft: Draft,
  isGone: (id: string, tunnel: Design['tunnels'][string]) => boolean,
): void => {
  draft.tunnels = without(draft.tunnels, isGone);
  draft.forwarders = Object.fromEntries(
    Object.entries(draft.forwarders).map(([id, forwarder]) => [
      id,
      {
        ...forwarder,
        circuits: without(
          forwarder.circuits,
          (_circuit, one) => one.kind === 'tunnel' && draft.tunnels[one.tunnel] === undefined,
        ),
      },
    ]),
  );
};

const dropDevice = (draft: Draft, device: string): void => {
  const { endpoints } = draft;
  dropLandings(draft, (_id, link) => link.kind === 'landing' && link.device === device);
  draft.links = without(
    draft.links,
    (_id, link) => link.kind === 'cable' && (link.a.device === device || link.b.device === device),
  );
  dropTunnels(
    draft,
    (_id, { a, b, association }) =>
      endpoints[a.endpoint]!.device === device ||
      endpoints[b.endpoint]!.device === device ||
      (association !== undefined &&
        (draft.associations[association]!.a.device === device ||
          draft.associations[association]!.b.device === device)),
  );
  draft.associations = without(
    draft.associations,
    (_id, { a, b }) => a.device === device || b.device === device,
  );
  draft.endpoints = without(draft.endpoints, (_id, endpoint) => endpoint.device === device);
  draft.forwarders = without(draft.forwarders, (_id, forwarder) => forwarder.device === device);
  draft.devices = without(draft.devices, (id) => id === device);
};

const plugsInto = (
  design: Design,
  link: Design['links'][string],
  device: string,
  port: string | undefined,
  member: 1 | 2 | undefined,
): boolean =>
  link.kind === 'cable' &&
  [link.a, link.b].some(
    (plug) =>
      plug.device === device &&
      (port === undefined || plug.port === port) &&
      (member === undefined ||
        (design.devices[device]!.kind === 'ha-pair' ? (plug.member ?? 1) : 1) === member),
  );

const dropPlugs = (
  draft: Draft,
  device: string,
  port: string | undefined,
  member: 1 | 2 | undefined,
): void => {
  const design = { ...draft };
  draft.links = without(draft.links, (_id, link) => plugsInto(design, link, device, port, member));
  const concerns = (link: Design['links'][string]): boolean =>
    link.kind === 'landing' && link.device === device && (port === undefined || link.port === port);
  if (member === undefined) {
    dropLandings(draft, (_id, link) => concerns(link));
    return;
  }
  dropLandings(
    draft,
    (_id, link) => link.kind === 'landing' && concerns(link) && landingWithout(link, member) === undefined,
  );
  draft.links = Object.fromEntries(
    Object.entries(draft.links).map(([id, link]) => [
      id,
      link.kind === 'landing' && concerns(link) ? landingWithout(link, member)! : link,
    ]),
  );
};

/** The document without what failed. */
export const withoutFailed = (design: Design, failed: readonly ElementRef[]): Design => {
  const draft: Draft = { ...design };
  const lostMembers = new Map<string, Set<1 | 2>>();
  for (const { collection, id, port, member } of failed) {
    if (collection === 'sites') {
      for (const device of Object.keys(draft.devices))
        if (draft.devices[device]!.site === id) dropDevice(draft, device);
    } else if (collection === 'transports')
      dropLandings(draft, (_id, link) => link.kind === 'landing' && link.transport === id);
    else if (collection === 'tunnels') dropTunnels(draft, (tunnel) => tunnel === id);
    else if (collection === 'associations') dropTunnels(draft, (_id, tunnel) => tunnel.association === id);
    else if (collection === 'links') {
      if (design.links[id]!.kind === 'landing') dropLandings(draft, (link) => link === id);
      else draft.links = without(draft.links, (link) => link === id);
    } else if (draft.devices[id] === undefined) continue;
    else if (port !== undefined) dropPlugs(draft, id, port, member);
    else if (member === undefined) dropDevice(draft, id);
    else {
      const lost = lostMembers.get(id) ?? new Set();
      lostMembers.set(id, lost.add(member));
      dropPlugs(draft, id, undefined, member);
      if (lost.size === 2) dropDevice(draft, id);
      else {
        const active = member === 1 ? 2 : 1;
        const device = draft.devices[id]!;
        if (device.kind === 'ha-pair')
          draft.devices = { ...draft.devices, [id]: { ...device, mode: 'active-standby', active } };
      }
    }
  }
  return draft;
};

/** Which host hears which, as `segment from to`; `hears` says who hears a host of a design. */
const hearings = (design: Design, hears: (design: Design, host: string) => Iterable<string>): Set<string> => {
  const all = new Set<string>();
  for (const [from, device] of Object.entries(design.devices)) {
    if (device.kind !== 'host' || device.segment === undefined) continue;
    for (const to of hears(design, from)) {
      const other = design.devices[to]!;
      if (to !== from && other.kind === 'host' && other.segment === device.segment)
        all.add(`${device.segment} ${from} ${to}`);
    }
  }
  return all;
};

/** The ways between hosts in service that are lost, as `segment from to` in order. */
export const outageTwin = (
  design: Design,
  failed: readonly ElementRef[],
  hears: (design: Design, host: string) => Iterable<string> = (one, host) =>
    bruteForceFlood(one).fromHost(host).copies.keys(),
): readonly string[] => {
  const after = withoutFailed(design, failed);
  const left = hearings(after, hears);
  return [...hearings(design, hears)]
    .filter((way) => {
      const [, from, to] = way.split(' ');
      return after.devices[from!] !== undefined && after.devices[to!] !== undefined && !left.has(way);
    })
    .sort();
};
