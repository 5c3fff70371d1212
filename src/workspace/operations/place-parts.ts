import type { Collection, DeepReadonly, Design, ElementRef, Entry } from '../../engine/model/design.ts';
import type { Device, DeviceKind, Port } from '../../engine/model/devices.ts';
import { isGateway } from '../../engine/model/devices.ts';
import { noteSchema } from '../../engine/model/intent.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { noNumberingContext } from '../../engine/numbering/numbering-context.ts';
import { openedFor } from './collapse-sites.ts';
import { freeLetter, freeLoopback, freeName, freeVlan } from './free-names.ts';
import { nameOf } from './name-of.ts';
import type { NewId, Operation } from './operation.ts';
import { refused } from './operation.ts';

export interface Place {
  readonly x: number;
  readonly y: number;
}

const gigabit = 1_000_000_000;
const wan = (number: number): DeepReadonly<Port> => ({
  number,
  name: `wan${number}`,
  role: 'wan',
  speedBps: gigabit,
  mtu: 1500,
});
const trunk = (number: number, name?: string): DeepReadonly<Port> => ({
  number,
  ...(name === undefined ? {} : { name }),
  role: 'lan',
  mode: 'trunk',
  speedBps: gigabit,
  mtu: 1500,
});
const access = (number: number): DeepReadonly<Port> => ({
  number,
  role: 'lan',
  mode: 'access',
  speedBps: gigabit,
  mtu: 1500,
});
const memberLink = (number: number, name: string): DeepReadonly<Port> => ({
  number,
  name,
  role: 'member-link',
  speedBps: gigabit,
});

/** The ports that a new device of each kind starts with. */
export const startingPorts = (kind: DeviceKind): { readonly [id: string]: DeepReadonly<Port> } => {
  switch (kind) {
    case 'firewall':
    case 'router':
      return { wan1: wan(1), lan2: trunk(2, 'lan2'), lan3: trunk(3, 'lan3') };
    case 'ha-pair':
      return {
        wan1: wan(1),
        lan2: trunk(2, 'lan2'),
        lan3: trunk(3, 'lan3'),
        sync4: memberLink(4, 'sync4'),
        sync5: memberLink(5, 'sync5'),
      };
    case 'switch':
      return { p1: trunk(1), p2: trunk(2), p3: access(3), p4: access(4), p5: access(5), p6: access(6) };
    case 'host':
      return { p1: access(1) };
  }
};

const baseNames: { readonly [K in DeviceKind]: string } = {
  firewall: 'fw',
  'ha-pair': 'fw',
  switch: 'sw',
  router: 'rt',
  host: 'host',
};

const newDevice = (design: Design, kind: DeviceKind, site: string): DeepReadonly<Device> => {
  const name = freeName(design.devices, baseNames[kind]);
  const common = { site, name, ports: startingPorts(kind) };
  if (kind === 'ha-pair')
    return {
      kind,
      ...common,
      memberNames: { 1: `${name}-1`, 2: `${name}-2` },
      mode: 'active-standby',
      active: 1,
      stateSync: true,
    };
  return { kind, ...common };
};

/**
 * A new device at a place on the sheet, in the site whose frame is there; outside every frame a site is made for it.
 * The members of a pair come with their two member links cabled.
 */
export const placeDevice = (
  design: Design,
  kind: DeviceKind,
  at: Place,
  site: string | undefined,
  newId: NewId,
): Operation => {
  const siteId = site ?? newId('site');
  const id = newId(baseNames[kind]);
  const device = newDevice(design, kind, siteId);
  const links: { [id: string]: Entry<'links'> } = {};
  if (kind === 'ha-pair')
    for (const port of ['sync4', 'sync5'])
      links[newId('cb')] = {
        kind: 'cable',
        a: { device: id, port, member: 1 },
        b: { device: id, port, member: 2 },
      };
  const patch = {
    ...(site === undefined ? { sites: { [siteId]: { name: freeName(design.sites, 'Site') } } } : {}),
    devices: { [id]: device },
    ...(Object.keys(links).length > 0 ? { links } : {}),
    layout: {
      devices: { [id]: { x: at.x, y: at.y } },
      ...(site === undefined ? {} : (openedFor(design, site)['layout'] as object | undefined)),
    },
  };
  return {
    ok: true,
    label: `Place ${device.name}`,
    patch: patch as MergePatch,
    created: [{ collection: 'devices', id }],
  };
};

/** The frame that an empty site starts with. */
export const newSiteSize = { width: 360, height: 250 } as const;

/** An empty site whose frame begins at `at`. */
export const placeSite = (design: Design, at: Place, newId: NewId): Operation => {
  const id = newId('site');
  const name = freeName(design.sites, 'Site');
  return {
    ok: true,
    label: `Place ${name}`,
    patch: {
      sites: { [id]: { name } },
      layout: { sites: { [id]: { x: at.x, y: at.y, ...newSiteSize } } },
    },
    created: [{ collection: 'sites', id }],
  };
};

/** A new transport as an upright band whose middle is at `at.x`, over the height that the sheet's frame leaves. */
export const placeTransport = (
  design: Design,
  at: Place,
  span: { readonly top: number; readonly bottom: number },
  newId: NewId,
): Operation => {
  const id = newId('tp');
  const name = freeName(design.transports, 'Transport');
  const width = 122;
  return {
    ok: true,
    label: `Place ${name}`,
    patch: {
      transports: { [id]: { name, kind: 'internet', trusted: false, mtu: 1500, families: [4] } },
      layout: {
        transports: {
          [id]: { limbs: [{ x: at.x - width / 2, y: span.top, width, height: span.bottom - span.top }] },
        },
      },
    },
    created: [{ collection: 'transports', id }],
  };
};

/** A new loopback endpoint on a gateway, with the lowest free address. */
export const placeEndpoint = (
  design: Design,
  device: string,
  newId: NewId,
  context: NumberingContext = noNumberingContext,
): Operation => {
  const target = design.devices[device];
  if (target === undefined || !isGateway(target))
    return refused('A loopback endpoint belongs on a firewall, an HA pair or a router: drop it on one.');
  const id = newId('lo');
  const name = freeName(design.endpoints, `lo-${target.name}`, false);
  return {
    ok: true,
    label: `Place ${name}`,
    patch: { endpoints: { [id]: { device, name, ipv4: freeLoopback(design, context) } } },
    created: [{ collection: 'endpoints', id }],
  };
};

/** A new segment that lands at every site of the design, on the lowest free VLAN. */
export const placeSegment = (
  design: Design,
  newId: NewId,
  context: NumberingContext = noNumberingContext,
): Operation => {
  const id = newId('seg');
  const letter = freeLetter(design);
  const vlan = freeVlan(design, context);
  const sites = Object.fromEntries(Object.keys(design.sites).map((site) => [site, { vlan }]));
  return {
    ok: true,
    label: `Add segment ${letter}`,
    patch: { segments: { [id]: { letter, name: `Segment ${letter}`, protocols: ['ipv4'], sites } } },
    created: [{ collection: 'segments', id }],
  };
};

/** Traffic between the first two sites of a segment, to be said more of. */
export const placeDemand = (design: Design, segment: string, newId: NewId): Operation => {
  const id = newId('dm');
  const [from, to] = Object.keys(design.segments[segment]?.sites ?? {});
  if (from === undefined || to === undefined)
    return refused('A demand needs a segment that lands at two sites.');
  return {
    ok: true,
    label: 'Add a demand',
    patch: { demands: { [id]: { segment, from: { site: from }, to: { site: to } } } },
    created: [{ collection: 'demands', id }],
  };
};

export const placeNote = (at: Place, newId: NewId): Operation => {
  const id = newId('note');
  return {
    ok: true,
    label: 'Add a note',
    patch: { notes: { [id]: { text: 'Note' } }, layout: { notes: { [id]: { x: at.x, y: at.y } } } },
    created: [{ collection: 'notes', id }],
  };
};

/** The kinds of element that a note can be pinned to. */
export const notable: readonly Collection[] = noteSchema.shape.target.unwrap().shape.collection.options;
export const isNotable = ({ collection }: ElementRef): boolean => notable.includes(collection);

/** A note pinned to an element (a port's to its device), that the drawing places beside it until somebody moves it. */
export const pinNote = (design: Design, about: ElementRef, newId: NewId): Operation => {
  const { collection, id } = about;
  if (!isNotable(about) || !Object.hasOwn(design[collection], id))
    return refused(`No note can be pinned to ${nameOf(design, about)}: put one down on the sheet.`);
  const note = newId('note');
  return {
    ok: true,
    label: `Pin a note to ${nameOf(design, { collection, id })}`,
    patch: { notes: { [note]: { text: 'Note', target: { collection, id } } } } as MergePatch,
    created: [{ collection: 'notes', id: note }],
  };
};
