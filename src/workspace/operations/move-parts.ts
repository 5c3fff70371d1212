import type { Design, ElementRef } from '../../engine/model/design.ts';
import { isGateway } from '../../engine/model/devices.ts';
import type { Side } from '../../engine/model/layout.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { joinPatches } from '../../engine/model/merge-patch.ts';
import { openedFor } from './collapse-sites.ts';
import { notesAlong } from './notes-along.ts';
import type { Operation } from './operation.ts';
import { refused } from './operation.ts';

/** Where something stands now, as the drawing has it (positions that nobody set are the drawing's choice). */
export interface Standing {
  readonly devices: { readonly [id: string]: { readonly x: number; readonly y: number } };
  readonly sites: {
    readonly [id: string]: {
      readonly x: number;
      readonly y: number;
      readonly width: number;
      readonly height: number;
    };
  };
  readonly notes: { readonly [id: string]: { readonly x: number; readonly y: number } };
}

const half = (value: number): number => Math.round(value * 2) / 2;

/** True when a person locked the element's place. */
export const isLocked = (design: Design, ref: ElementRef): boolean => {
  const { layout } = design;
  if (ref.collection === 'devices')
    return (
      layout.devices?.[ref.id]?.locked === true ||
      layout.sites?.[design.devices[ref.id]?.site ?? '']?.locked === true
    );
  if (ref.collection === 'sites') return layout.sites?.[ref.id]?.locked === true;
  if (ref.collection === 'transports') return layout.transports?.[ref.id]?.locked === true;
  if (ref.collection === 'notes') return layout.notes?.[ref.id]?.locked === true;
  return false;
};

/** Whether an element has a place of its own that can be locked. */
export const canLock = (design: Design, standing: Standing, { collection, id, port }: ElementRef): boolean =>
  port === undefined &&
  (collection === 'transports'
    ? design.layout.transports?.[id] !== undefined
    : (collection === 'devices' || collection === 'sites' || collection === 'notes') &&
      standing[collection][id] !== undefined);

const movedPoint = (at: { readonly x: number; readonly y: number }, dx: number, dy: number) => ({
  x: half(at.x + dx),
  y: half(at.y + dy),
});

const moveOne = (design: Design, standing: Standing, ref: ElementRef, dx: number, dy: number): MergePatch => {
  if (isLocked(design, ref)) return {};
  if (ref.collection === 'devices') {
    const at = standing.devices[ref.id];
    return at === undefined ? {} : { layout: { devices: { [ref.id]: movedPoint(at, dx, dy) } } };
  }
  if (ref.collection === 'notes') {
    const at = standing.notes[ref.id];
    return at === undefined ? {} : { layout: { notes: { [ref.id]: movedPoint(at, dx, dy) } } };
  }
  if (ref.collection === 'transports') {
    const bands = design.layout.transports?.[ref.id];
    if (bands === undefined) return {};
    // A band runs from frame to frame: it moves across only.
    const across = (rect: { x: number; y: number; width: number; height: number }) =>
      rect.height >= rect.width ? { ...rect, x: half(rect.x + dx) } : { ...rect, y: half(rect.y + dy) };
    return {
      layout: {
        transports: {
          [ref.id]: {
            limbs: bands.limbs.map(across),
            ...(bands.header === undefined ? {} : { header: across(bands.header) }),
          },
        },
      },
    };
  }
  if (ref.collection === 'sites') {
    const rect = standing.sites[ref.id];
    if (rect === undefined) return {};
    // What a collapsed site keeps back has a place to come out at, which goes along.
    const devices = Object.entries(design.devices).flatMap(([id, device]) => {
      const at = standing.devices[id] ?? design.layout.devices?.[id];
      const isHeld = design.layout.devices?.[id]?.locked === true;
      return device.site === ref.id && at !== undefined && !isHeld
        ? [[id, movedPoint(at, dx, dy)] as const]
        : [];
    });
    return {
      layout: {
        sites: { [ref.id]: { ...movedPoint(rect, dx, dy), width: rect.width, height: rect.height } },
        devices: Object.fromEntries(devices) as never,
      },
    };
  }
  return {};
};

/**
 * Moves elements by a distance; a site takes its devices along and everything the notes that are about it, what is
 * locked stays.
 */
export const moveElements = (
  design: Design,
  standing: Standing,
  refs: readonly ElementRef[],
  dx: number,
  dy: number,
): Operation => {
  const sites = new Set(refs.filter((ref) => ref.collection === 'sites').map((ref) => ref.id));
  const moved = refs.filter(
    (ref) => ref.collection !== 'devices' || !sites.has(design.devices[ref.id]?.site ?? ''),
  );
  const free = moved.filter((ref) => !isLocked(design, ref));
  const patch = joinPatches(
    design,
    [...free, ...notesAlong(design, standing, free)].map((ref) => moveOne(design, standing, ref, dx, dy)),
  );
  return { ok: true, label: refs.length === 1 ? 'Move' : `Move ${refs.length} things`, patch };
};

/** Puts devices that were dropped inside another site's frame into that site. */
export const rehome = (design: Design, device: string, site: string): MergePatch =>
  design.devices[device]?.site === site
    ? {}
    : joinPatches(design, [{ devices: { [device]: { site } } }, openedFor(design, site)]);

/** Docks a ring on a side of its device, or lets the drawing choose again. */
export const dockEndpoint = (design: Design, endpoint: string, side: Side | undefined): Operation => {
  if (!Object.hasOwn(design.endpoints, endpoint)) return refused('That endpoint is no longer there.');
  return {
    ok: true,
    label: 'Dock the ring',
    patch: { layout: { endpoints: { [endpoint]: { side: side ?? null } } } },
  };
};

/** Moves a ring to another gateway; its tunnels follow, their associations do not. */
export const moveEndpointTo = (design: Design, endpoint: string, device: string): Operation => {
  const target = design.devices[device];
  if (target === undefined || !isGateway(target))
    return refused('A ring docks on a firewall, an HA pair or a router.');
  if (design.endpoints[endpoint]?.device === device) return { ok: true, label: 'Dock the ring', patch: {} };
  return {
    ok: true,
    label: `Dock the ring on ${target.name}`,
    patch: { endpoints: { [endpoint]: { device, member: null } } },
  };
};

/** Locks or frees the places of elements. */
export const setLocked = (
  design: Design,
  standing: Standing,
  refs: readonly ElementRef[],
  locked: boolean,
): Operation => {
  const entries = refs.map((ref): MergePatch => {
    const flag = locked ? true : null;
    if (ref.collection === 'devices')
      return { layout: { devices: { [ref.id]: { ...standing.devices[ref.id]!, locked: flag } } } };
    if (ref.collection === 'sites')
      return { layout: { sites: { [ref.id]: { ...standing.sites[ref.id]!, locked: flag } } } };
    if (ref.collection === 'notes')
      return { layout: { notes: { [ref.id]: { ...standing.notes[ref.id]!, locked: flag } } } };
    if (ref.collection === 'transports' && design.layout.transports?.[ref.id] !== undefined)
      return { layout: { transports: { [ref.id]: { locked: flag } } } };
    return {};
  });
  return { ok: true, label: locked ? 'Lock' : 'Unlock', patch: joinPatches(design, entries) };
};
