import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Demand } from '../../engine/model/intent.ts';
import type { Plug } from '../../engine/model/underlay.ts';

const portOf = (design: Design, plug: Pick<Plug, 'device' | 'port' | 'member'>): string => {
  const device = design.devices[plug.device];
  const port = device?.ports[plug.port];
  const plate =
    device?.kind === 'ha-pair' && plug.member !== undefined ? device.memberNames[plug.member] : device?.name;
  return `${plate ?? plug.device} ${port?.name ?? port?.number ?? plug.port}`;
};

/** Where a demand begins or ends: one host, or all of a site. */
export const demandPlaceName = (design: Design, place: Demand['from']): string =>
  'site' in place
    ? `all of ${design.sites[place.site]?.name ?? place.site}`
    : (design.devices[place.host]?.name ?? place.host);

/** What a person calls an element: its own name, or what it joins. */
export const nameOf = (design: Design, ref: ElementRef): string => {
  if (ref.collection === 'links') {
    const link = design.links[ref.id];
    if (link === undefined) return ref.id;
    if (link.name !== undefined) return link.name;
    if (link.kind === 'landing')
      return `${portOf(design, link)} on ${design.transports[link.transport]?.name ?? link.transport}`;
    return `${portOf(design, link.a)} to ${portOf(design, link.b)}`;
  }
  if (ref.collection === 'notes') return design.notes[ref.id]?.text.split('\n')[0]?.slice(0, 40) ?? ref.id;
  if (ref.collection === 'demands') {
    const demand = design.demands[ref.id];
    if (demand === undefined) return ref.id;
    return demand.name ?? `${demandPlaceName(design, demand.from)} to ${demandPlaceName(design, demand.to)}`;
  }
  if (ref.port !== undefined) return portOf(design, { device: ref.id, port: ref.port, member: ref.member });
  return design[ref.collection][ref.id]?.name ?? ref.id;
};

const kinds = {
  sites: 'Site',
  transports: 'Transport',
  endpoints: 'Loopback endpoint',
  associations: 'IPsec association',
  tunnels: 'Tunnel',
  segments: 'Segment',
  demands: 'Demand',
  profiles: 'Equipment profile',
  notes: 'Note',
} as const;
export const deviceKindNames = {
  firewall: 'Firewall',
  'ha-pair': 'HA pair',
  switch: 'Switch',
  router: 'Router',
  host: 'Host',
} as const;

/** The trade's word for what an element is. */
export const kindOf = (design: Design, ref: ElementRef): string => {
  if (ref.collection === 'devices') {
    if (ref.port !== undefined) return 'Port';
    const device = design.devices[ref.id];
    return device === undefined ? 'Device' : deviceKindNames[device.kind];
  }
  if (ref.collection === 'links') return design.links[ref.id]?.kind === 'landing' ? 'Landing' : 'Cable';
  if (ref.collection === 'forwarders')
    return design.forwarders[ref.id]?.kind === 'cross-connect' ? 'Cross-connect' : 'Bridge';
  return kinds[ref.collection];
};
