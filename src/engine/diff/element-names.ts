import type { Collection, Design, Entry } from '../model/design.ts';
import { inRankOrder } from '../model/rank.ts';

interface PlugAt {
  readonly device: string;
  readonly port: string;
  readonly member?: 1 | 2 | undefined;
}

/** A port by the name on its device: 'lan1', or 'port 3' where it has none. */
export const portNameOf = (design: Design, device: string, port: string): string => {
  const entry = design.devices[device]?.ports[port];
  return entry === undefined ? 'a port' : (entry.name ?? `port ${entry.number}`);
};

/** A port as a sentence names it: 'port lan1 of fw-gul'. */
export const portWords = (design: Design, device: string, port: string): string => {
  const entry = design.devices[device];
  const { name, number } = entry!.ports[port]!;
  return `port ${name ?? number} of ${entry!.name}`;
};

/** 'lan1 of fw-gul'; of a pair's member where one is meant. */
export const plugName = (design: Design, { device, port, member }: PlugAt): string => {
  const entry = design.devices[device];
  const owner = member !== undefined && entry?.kind === 'ha-pair' ? entry.memberNames[member] : entry?.name;
  return `${portNameOf(design, device, port)} of ${owner ?? 'a device'}`;
};

const noteWords = 40;
const placeName = (design: Design, place: Entry<'demands'>['from']): string =>
  'site' in place ? (design.sites[place.site]?.name ?? '') : (design.devices[place.host]?.name ?? '');

const names: {
  readonly [C in Collection]: (entry: Entry<C>, design: Design) => string;
} = {
  sites: ({ name }) => name,
  devices: ({ name }) => name,
  transports: ({ name }) => name,
  endpoints: ({ name }) => name,
  associations: ({ name }) => name,
  tunnels: ({ name }) => name,
  profiles: ({ name }) => name,
  segments: ({ letter, name }) => `${letter} (${name})`,
  links: (link, design) =>
    link.name ??
    (link.kind === 'cable'
      ? `from ${plugName(design, link.a)} to ${plugName(design, link.b)}`
      : `${plugName(design, link)} on ${design.transports[link.transport]?.name ?? ''}`),
  forwarders: ({ name, device }, design) => name ?? `on ${design.devices[device]?.name ?? ''}`,
  demands: ({ name, from, to, segment }, design) =>
    name ??
    `from ${placeName(design, from)} to ${placeName(design, to)} on segment ${design.segments[segment]?.letter ?? ''}`,
  notes: ({ text }) => {
    const line = text.replace(/\s+/g, ' ').trim();
    return `“${line.length > noteWords ? `${line.slice(0, noteWords - 1).trimEnd()}…` : line}”`;
  },
};

/** An element by its name, or by what it joins where it has none. */
export const elementName = (design: Design, collection: Collection, id: string): string => {
  const entry = (design[collection] as { readonly [id: string]: Entry<typeof collection> })[id];
  return entry === undefined
    ? ''
    : (names[collection] as (entry: unknown, design: Design) => string)(entry, design);
};

const kinds = {
  sites: 'site',
  transports: 'transport',
  endpoints: 'loopback endpoint',
  associations: 'association',
  tunnels: 'tunnel',
  segments: 'segment',
  demands: 'demand',
  profiles: 'equipment profile',
  notes: 'note',
} as const;
const deviceKinds = {
  firewall: 'firewall',
  'ha-pair': 'HA pair',
  switch: 'switch',
  router: 'router',
  host: 'host',
} as const;

const kindOf = (design: Design, collection: Collection, id: string): string => {
  if (collection === 'devices') return deviceKinds[design.devices[id]?.kind ?? 'host'];
  if (collection === 'links') return design.links[id]?.kind === 'landing' ? 'landing' : 'cable';
  if (collection === 'forwarders') return design.forwarders[id]?.kind ?? 'bridge';
  return kinds[collection];
};

/** An element as a sentence names it: 'tunnel Head office–Skerry', 'segment A (Ticketing)'. */
export const elementWords = (design: Design, collection: Collection, id: string): string =>
  `${kindOf(design, collection, id)} ${elementName(design, collection, id)}`;

/** A circuit of a forwarder: 'circuit of lan1', 'circuit of tunnel Head office–Skerry'. */
export const circuitWords = (design: Design, forwarder: string, circuit: string): string => {
  const { device, circuits } = design.forwarders[forwarder]!;
  const entry = circuits[circuit]!;
  return entry.kind === 'port'
    ? `circuit of ${portNameOf(design, device, entry.port)}`
    : `circuit of tunnel ${design.tunnels[entry.tunnel]?.name ?? ''}`;
};

/** A rule of a forwarder by its name, or by its place in the order. */
export const ruleWords = (design: Design, forwarder: string, rule: string): string => {
  const policy = design.forwarders[forwarder]?.policy ?? {};
  const place = inRankOrder(policy).findIndex(([id]) => id === rule) + 1;
  const { name } = policy[rule]!;
  return name === undefined ? `rule ${place}` : `rule ${place} “${name}”`;
};

/** Where one end of a tunnel or an association is: its site, or its device where both ends are at one site. */
export const endPlace = (
  design: Design,
  devices: { readonly a: string; readonly b: string },
  end: 'a' | 'b',
): string => {
  const at = (device: string) => design.devices[device];
  const [a, b] = [at(devices.a), at(devices.b)];
  const here = end === 'a' ? a : b;
  return a?.site === b?.site ? (here?.name ?? '') : (design.sites[here?.site ?? '']?.name ?? '');
};
