import { z } from 'zod';
import type { Collection, Design, ElementRef, Entry } from '../../engine/model/design.ts';
import { emptyDesign, entrySchemas } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch, diffPatch, patchAt } from '../../engine/model/merge-patch.ts';
import { danglingPatch, listReferences } from '../../engine/model/references.ts';
import { freeTunnelName } from '../../engine/numbering/free-numbers.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { noNumberingContext } from '../../engine/numbering/numbering-context.ts';
import { openedFor } from './collapse-sites.ts';
import { freeLoopback, freeName, freeVni } from './free-names.ts';
import type { Standing } from './move-parts.ts';
import type { NewId, Operation } from './operation.ts';
import { refused } from './operation.ts';

export const partsFormat = 'longpatch.parts/1';
const copied = [
  'sites',
  'devices',
  'links',
  'endpoints',
  'associations',
  'tunnels',
  'forwarders',
  'notes',
] as const satisfies readonly Collection[];
type Copied = (typeof copied)[number];
// How ids of each collection begin.
const prefixes: { readonly [C in Copied]: string } = {
  sites: 'site',
  devices: 'dev',
  links: 'ln',
  endpoints: 'lo',
  associations: 'as',
  tunnels: 'tn',
  forwarders: 'br',
  notes: 'note',
};

const at = z.strictObject({ x: z.number(), y: z.number() });
const rect = z.strictObject({ x: z.number(), y: z.number(), width: z.number(), height: z.number() });
/** What the clipboard holds: whole entries, so that it can be pasted into another design. */
const partsSchema = z.strictObject({
  format: z.literal(partsFormat),
  entries: z.strictObject(
    Object.fromEntries(
      copied.map((collection) => [collection, z.record(z.string(), entrySchemas[collection])]),
    ) as {
      [C in Copied]: z.ZodRecord<z.ZodString, (typeof entrySchemas)[C]>;
    },
  ),
  places: z.strictObject({
    devices: z.record(z.string(), at),
    sites: z.record(z.string(), rect),
    notes: z.record(z.string(), at),
  }),
});
export type Parts = z.infer<typeof partsSchema>;

type Bag<C extends Copied> = { [id: string]: Entry<C> };

/** What is copied with a selection: its sites' devices, and what joins only things that are copied. */
export const copyParts = (
  design: Design,
  standing: Standing,
  selection: readonly ElementRef[],
): Parts | undefined => {
  const chosen = (collection: Collection, id: string): boolean =>
    selection.some((ref) => ref.collection === collection && ref.id === id);
  const pick = <C extends Copied>(collection: C, keep: (id: string, entry: Entry<C>) => boolean): Bag<C> =>
    Object.fromEntries(
      Object.entries(design[collection] as unknown as Bag<C>).filter(([id, entry]) => keep(id, entry)),
    );
  const sites = pick('sites', (id) => chosen('sites', id));
  const devices = pick('devices', (id, device) => chosen('devices', id) || Object.hasOwn(sites, device.site));
  const has = (id: string): boolean => Object.hasOwn(devices, id);
  const endpoints = pick('endpoints', (_id, endpoint) => has(endpoint.device));
  const links = pick('links', (_id, link) =>
    link.kind === 'cable' ? has(link.a.device) && has(link.b.device) : has(link.device),
  );
  const associations = pick('associations', (_id, entry) => has(entry.a.device) && has(entry.b.device));
  const tunnels = pick(
    'tunnels',
    (_id, tunnel) =>
      Object.hasOwn(endpoints, tunnel.a.endpoint) && Object.hasOwn(endpoints, tunnel.b.endpoint),
  );
  const forwarders = pick('forwarders', (_id, forwarder) => has(forwarder.device));
  const notes = pick('notes', (id) => chosen('notes', id));
  if (Object.keys(devices).length + Object.keys(sites).length + Object.keys(notes).length === 0)
    return undefined;
  const places = <T>(ids: object, from: { readonly [id: string]: T }): { [id: string]: T } =>
    Object.fromEntries(Object.keys(ids).flatMap((id) => (from[id] === undefined ? [] : [[id, from[id]]])));
  return {
    format: partsFormat,
    entries: {
      sites,
      devices,
      links,
      endpoints,
      associations,
      tunnels,
      forwarders,
      notes,
    } as unknown as Parts['entries'],
    places: {
      devices: places(devices, standing.devices),
      sites: places(sites, standing.sites),
      notes: places(notes, standing.notes),
    },
  };
};

/** Reads parts from clipboard text; undefined when it is something else. */
export const readParts = (text: string): Parts | undefined => {
  try {
    const parsed = partsSchema.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : undefined;
  } catch {
    return undefined;
  }
};

/** The parts with new ids for all that is copied, wherever one entry names another. */
const withNewIds = (parts: Parts, ids: ReadonlyMap<string, string>): Design => {
  const mini: Design = { ...emptyDesign('Parts'), ...(parts.entries as unknown as Partial<Design>) };
  let renamed = mini;
  for (const reference of listReferences(mini)) {
    const id = ids.get(`${reference.target}/${reference.id}`);
    if (id === undefined) continue;
    renamed = applyPatch(
      renamed,
      patchAt(reference.within === undefined ? reference.path : [...reference.path, reference.within], id),
    );
  }
  const rekeyed = copied.map((collection) => [
    collection,
    Object.fromEntries(
      Object.entries(renamed[collection]).map(([id, entry]) => [ids.get(`${collection}/${id}`)!, entry]),
    ),
  ]);
  return { ...renamed, ...(Object.fromEntries(rekeyed) as Partial<Design>) };
};

/** What must differ from the original: names, loopback addresses, VNIs, outside addresses. */
const withOwnValues = (design: Design, parts: Design, context: NumberingContext): Design => {
  let after = design;
  const add = (collection: Copied, id: string, entry: object): void => {
    after = applyPatch(after, { [collection]: { [id]: entry } } as MergePatch);
  };
  for (const [id, site] of Object.entries(parts.sites))
    add('sites', id, { ...site, name: freeName(after.sites, site.name, false) });
  for (const [id, device] of Object.entries(parts.devices))
    add('devices', id, { ...device, name: freeName(after.devices, device.name, false) });
  for (const [id, link] of Object.entries(parts.links)) {
    const { ipv4: _ipv4, ipv6: _ipv6, ...landing } = link as Extract<typeof link, { kind: 'landing' }>;
    add('links', id, link.kind === 'landing' ? landing : link);
  }
  for (const [id, endpoint] of Object.entries(parts.endpoints)) {
    const { ipv4: _ipv4, ipv6: _ipv6, ...rest } = endpoint;
    add('endpoints', id, {
      ...rest,
      name: freeName(after.endpoints, endpoint.name, false),
      ipv4: freeLoopback(after, context),
    });
  }
  for (const [id, association] of Object.entries(parts.associations)) {
    const end = (side: 'a' | 'b') => {
      const { selectors: _old, ...rest } = association[side];
      return rest;
    };
    add('associations', id, {
      ...association,
      name: freeName(after.associations, association.name, false),
      a: end('a'),
      b: end('b'),
    });
  }
  for (const [id, tunnel] of Object.entries(parts.tunnels)) {
    const vni = freeVni(after, context);
    add('tunnels', id, {
      ...tunnel,
      name: freeTunnelName(after, tunnel.name, context),
      a: { ...tunnel.a, vni },
      b: { ...tunnel.b, vni },
    });
  }
  for (const [id, forwarder] of Object.entries(parts.forwarders)) add('forwarders', id, forwarder);
  for (const [id, note] of Object.entries(parts.notes)) add('notes', id, note);
  return after;
};

/**
 * Adds copied parts to a design beside the originals, with ids, names, loopback addresses and VNIs of their own. Devices
 * copied without their site go into `site`, or into their old one where this design has it. What the parts refer to and
 * the design lacks (a transport, a profile, a segment) is left out.
 */
export const pasteParts = (
  design: Design,
  parts: Parts,
  by: { readonly dx: number; readonly dy: number },
  site: string | undefined,
  newId: NewId,
  context: NumberingContext = noNumberingContext,
): Operation => {
  const ids = new Map<string, string>();
  for (const collection of copied)
    for (const id of Object.keys(parts.entries[collection]).sort())
      ids.set(`${collection}/${id}`, newId(prefixes[collection]));
  let fresh = withNewIds(parts, ids);
  if (site !== undefined)
    for (const [id, device] of Object.entries(fresh.devices))
      if (!Object.hasOwn(fresh.sites, device.site))
        fresh = applyPatch(fresh, { devices: { [id]: { site } } });
  let after = withOwnValues(design, fresh, context);
  const shift = <T extends { readonly x: number; readonly y: number }>(
    collection: Copied,
    places: { readonly [id: string]: T },
  ) =>
    Object.fromEntries(
      Object.entries(places).flatMap(([id, place]) => {
        const fresh = ids.get(`${collection}/${id}`);
        return fresh === undefined ? [] : [[fresh, { ...place, x: place.x + by.dx, y: place.y + by.dy }]];
      }),
    );
  const { devices, sites, notes } = parts.places;
  after = applyPatch(after, {
    layout: {
      devices: shift('devices', devices),
      sites: shift('sites', sites),
      notes: shift('notes', notes),
    },
  });
  if (site !== undefined && Object.keys(fresh.devices).length > 0)
    after = applyPatch(after, openedFor(after, site));
  after = applyPatch(after, danglingPatch(after));
  const created = (['sites', 'devices', 'notes'] as const).flatMap((collection) =>
    Object.keys(fresh[collection])
      .filter((id) => Object.hasOwn(after[collection], id))
      .map((id): ElementRef => ({ collection, id })),
  );
  if (created.length === 0)
    return refused('Nothing of what was copied fits here: select a site to paste devices into.');
  return { ok: true, label: 'Paste', patch: diffPatch(design, after), created };
};
