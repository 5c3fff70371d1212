import type { Collection, Design, Entry } from './design.ts';
import { collections } from './design.ts';
import type { MergePatch } from './merge-patch.ts';
import { applyPatch, diffPatch } from './merge-patch.ts';

/** Something an entry names elsewhere in the design. */
export interface Reference {
  /** Keys from the document's root to the value that names the target. */
  readonly path: readonly string[];
  /** The key that holds the target's id, where the value at `path` is an object. */
  readonly within?: 'device' | 'id';
  readonly target: Collection;
  readonly id: string;
  /** With a device as target: the port that must be there too. */
  readonly port?: string;
  /** What goes when the target is gone: the whole entry for a required reference, a part of it otherwise. */
  readonly removes: readonly string[];
}

type Via = Entry<'tunnels'>['a']['via'];
const viaReferences = (path: readonly string[], via: Via): Reference[] =>
  Object.entries(via ?? {}).map(([id, step]) => ({
    path: [...path, 'via', id, 'landing'],
    target: 'links',
    id: step.landing,
    removes: [...path, 'via', id],
  }));

type Lister<C extends Collection> = (
  entry: Entry<C>,
  at: readonly string[],
  design: Design,
) => readonly Reference[];
const ends = ['a', 'b'] as const;

const listers: { readonly [C in Collection]: Lister<C> } = {
  sites: () => [],
  transports: () => [],
  profiles: () => [],
  devices: (device, at) => {
    const list: Reference[] = [{ path: [...at, 'site'], target: 'sites', id: device.site, removes: at }];
    if (device.profile !== undefined)
      list.push({
        path: [...at, 'profile'],
        target: 'profiles',
        id: device.profile,
        removes: [...at, 'profile'],
      });
    if (device.kind === 'host' && device.segment !== undefined)
      list.push({
        path: [...at, 'segment'],
        target: 'segments',
        id: device.segment,
        removes: [...at, 'segment'],
      });
    return list;
  },
  links: (link, at) =>
    link.kind === 'cable'
      ? ends.map((end) => ({
          path: [...at, end],
          within: 'device' as const,
          target: 'devices' as const,
          id: link[end].device,
          port: link[end].port,
          removes: at,
        }))
      : [
          { path: [...at, 'device'], target: 'devices', id: link.device, port: link.port, removes: at },
          { path: [...at, 'transport'], target: 'transports', id: link.transport, removes: at },
        ],
  endpoints: (endpoint, at) => [
    { path: [...at, 'device'], target: 'devices', id: endpoint.device, removes: at },
  ],
  associations: (association, at) =>
    ends.flatMap((end) => [
      { path: [...at, end, 'device'], target: 'devices' as const, id: association[end].device, removes: at },
      ...viaReferences([...at, end], association[end].via),
    ]),
  tunnels: (tunnel, at) => [
    ...ends.flatMap((end) => [
      { path: [...at, end, 'endpoint'], target: 'endpoints' as const, id: tunnel[end].endpoint, removes: at },
      ...viaReferences([...at, end], tunnel[end].via),
    ]),
    ...(tunnel.association === undefined
      ? []
      : [
          {
            path: [...at, 'association'],
            target: 'associations' as const,
            id: tunnel.association,
            removes: [...at, 'association'],
          },
        ]),
  ],
  forwarders: (forwarder, at) => [
    { path: [...at, 'device'], target: 'devices', id: forwarder.device, removes: at },
    ...Object.entries(forwarder.circuits).map(([id, circuit]): Reference => {
      const path = [...at, 'circuits', id];
      return circuit.kind === 'tunnel'
        ? { path: [...path, 'tunnel'], target: 'tunnels', id: circuit.tunnel, removes: path }
        : {
            path: [...path, 'port'],
            target: 'devices',
            id: forwarder.device,
            port: circuit.port,
            removes: path,
          };
    }),
  ],
  segments: (segment, at) =>
    Object.keys(segment.sites).map((id) => ({
      path: [...at, 'sites', id],
      target: 'sites',
      id,
      removes: [...at, 'sites', id],
    })),
  demands: (demand, at) => [
    { path: [...at, 'segment'], target: 'segments', id: demand.segment, removes: at },
    ...(['from', 'to'] as const).map((side): Reference => {
      const place = demand[side];
      return 'site' in place
        ? { path: [...at, side, 'site'], target: 'sites', id: place.site, removes: at }
        : { path: [...at, side, 'host'], target: 'devices', id: place.host, removes: at };
    }),
  ],
  notes: (note, at) =>
    note.target === undefined
      ? []
      : [
          {
            path: [...at, 'target'],
            within: 'id',
            target: note.target.collection,
            id: note.target.id,
            removes: [...at, 'target'],
          },
        ],
};

const referencesOf = <C extends Collection>(
  collection: C,
  id: string,
  design: Design,
): readonly Reference[] =>
  (listers[collection] as Lister<C>)(
    (design[collection] as { [id: string]: Entry<C> })[id]!,
    [collection, id],
    design,
  );

const layoutReferences = (layout: Design['layout']): readonly Reference[] => {
  const list: Reference[] = [];
  for (const collection of ['sites', 'devices', 'transports', 'endpoints', 'notes'] as const)
    for (const id of Object.keys(layout[collection] ?? {})) {
      const path = ['layout', collection, id];
      list.push({ path, target: collection, id, removes: path });
    }
  for (const [sheet, { transports }] of Object.entries(layout.furtherSheets ?? {}))
    for (const id of Object.keys(transports ?? {})) {
      const path = ['layout', 'furtherSheets', sheet, 'transports', id];
      list.push({ path, target: 'transports', id, removes: path });
    }
  return list;
};

/** Everything that the design's entries name elsewhere in it. */
export const listReferences = (design: Design): readonly Reference[] => [
  ...collections.flatMap((collection) =>
    Object.keys(design[collection]).flatMap((id) => referencesOf(collection, id, design)),
  ),
  ...layoutReferences(design.layout),
];

/** True when the reference leads to something that exists. */
export const resolves = (design: Design, reference: Reference): boolean => {
  const target = design[reference.target];
  if (!Object.hasOwn(target, reference.id)) return false;
  if (reference.port === undefined) return true;
  return Object.hasOwn(design.devices[reference.id]!.ports, reference.port);
};

/**
 * The patch that removes what the design names but no longer holds, as after two people's patches met: the whole entry
 * where the reference is required, the reference alone where it is not. {} when nothing dangles. The same design gives
 * the same patch, whoever computes it.
 */
export const danglingPatch = (design: Design): MergePatch => {
  let current = design;
  for (;;) {
    const dangling = listReferences(current).filter((reference) => !resolves(current, reference));
    if (dangling.length === 0) return diffPatch(design, current);
    const step: Removals = {};
    for (const { removes } of dangling) markRemoved(step, removes);
    current = applyPatch(current, step);
  }
};

type Removals = { [key: string]: Removals | null };

/** Written in place: where a site goes, thousands of entries may go with it. What lies in a removed place is gone already. */
const markRemoved = (patch: Removals, path: readonly string[]): void => {
  let at = patch;
  for (const key of path.slice(0, -1)) {
    const inner = at[key] === undefined ? (at[key] = {}) : at[key];
    if (inner === null) return;
    at = inner;
  }
  at[path.at(-1)!] = null;
};
