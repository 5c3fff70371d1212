import type { Id } from '../model/scalars.ts';
import { agreeApartFrom, changesBetween } from '../network/changes.ts';
import type { Network } from '../network/network.ts';
import type { FloodGraph } from './flood-graph.ts';
import type { Direction, Place } from './places.ts';
import { devicesArrivedAt, placesOf } from './places.ts';
import { touchedDevices } from './touched-devices.ts';

/** Whether the flood graphs of two versions are the same, and what they mean for segments, too. */
export const floodsTheSame = (before: Network, now: Network): boolean =>
  touchedDevices(before, now).size === 0 &&
  before.bundles === now.bundles &&
  before.tunnelIds === now.tunnelIds &&
  before.deviceIds === now.deviceIds &&
  changesBetween(before.design, now.design).segments.every((change) =>
    agreeApartFrom(change.before, change.now, 'name', 'mtu', 'hostsExpected', 'mustBeFiltered', 'notes'),
  );

/** Sites in which frames may start otherwise than in the earlier version: their VLANs or their devices are others. */
const stirredSites = (before: Network, now: Network): ReadonlySet<Id> => {
  const stirred = new Set<Id>();
  for (const { design } of [before, now])
    for (const id of touchedDevices(before, now)) {
      const site = design.devices[id]?.site;
      if (site !== undefined) stirred.add(site);
    }
  for (const change of changesBetween(before.design, now.design).segments)
    if (change.before?.sites !== change.now?.sites)
      for (const segment of [change.before, change.now])
        for (const site of Object.keys(segment?.sites ?? {})) stirred.add(site);
  return stirred;
};

/** Segments that have other hosts than in the earlier version, or the same ones elsewhere. */
const segmentsOfTouchedHosts = (before: Network, now: Network): ReadonlySet<Id> => {
  const segments = new Set<Id>();
  for (const { design } of [before, now])
    for (const id of touchedDevices(before, now)) {
      const device = design.devices[id];
      if (device?.kind === 'host' && device.segment !== undefined) segments.add(device.segment);
    }
  return segments;
};

/** What can be taken over from the flood graph of an earlier version: elements and places may have other numbers by now. */
export interface KeptRows {
  readonly stirredSites: ReadonlySet<Id>;
  readonly stirredSegments: ReadonlySet<Id>;
  /** By element of the earlier graph: its number now; -1 where it is gone. */
  readonly elementNow: Int32Array;
  /** By place of the earlier graph: its number now; -1 where its device may now do otherwise. */
  readonly placeNow: Int32Array;
  /** The place that this one was, if frames start in it as they did; -1 otherwise. */
  readonly startsLike: (place: Place) => number;
  /** The element that this one was, if what crosses it comes to a device that does what it did; -1 otherwise. */
  readonly arrivesLike: (element: number, direction: Direction) => number;
}

export const keptRows = ({ network: before }: FloodGraph, now: Network): KeptRows => {
  const touched = touchedDevices(before, now);
  const stirred = stirredSites(before, now);
  const elementBefore = new Int32Array(now.firstTunnelElement + now.tunnelIds.length).fill(-1);
  const elementNow = new Int32Array(before.firstTunnelElement + before.tunnelIds.length).fill(-1);
  const pair = (old: number | undefined, element: number): void => {
    if (old === undefined) return;
    elementBefore[element] = old;
    elementNow[old] = element;
  };
  for (const bundle of now.bundles) {
    const [cable] = bundle.cables;
    const old = before.bundles[bundle.index] === bundle ? bundle : before.bundleByCable.get(cable!);
    if (old?.cables[0] === cable) pair(old?.index, bundle.index);
  }
  const { tunnelIndex } = placesOf(before);
  now.tunnelIds.forEach((id, i) => {
    const old = now.tunnelIds === before.tunnelIds ? i : tunnelIndex.get(id);
    pair(old === undefined ? undefined : before.firstTunnelElement + old, now.firstTunnelElement + i);
  });
  const placeNow = new Int32Array(placesOf(before).all.length).fill(-1);
  const placeBefore = new Int32Array(placesOf(now).all.length).fill(-1);
  for (const [device, places] of placesOf(now).byDevice)
    if (!touched.has(device))
      placesOf(before)
        .byDevice.get(device)!
        .forEach(({ index }, i) => {
          placeNow[index] = places[i]!.index;
          placeBefore[places[i]!.index] = index;
        });
  const arrivedAt = devicesArrivedAt(now);
  const isTouched = new Uint8Array(arrivedAt.length);
  for (let at = 0; at < arrivedAt.length; at += 1) if (touched.has(arrivedAt[at]!)) isTouched[at] = 1;
  return {
    stirredSites: stirred,
    stirredSegments: segmentsOfTouchedHosts(before, now),
    elementNow,
    placeNow,
    startsLike: (place) =>
      stirred.has(now.design.devices[place.device]!.site) ? -1 : placeBefore[place.index]!,
    arrivesLike: (element, direction) =>
      isTouched[element * 2 + direction] === 1 ? -1 : elementBefore[element]!,
  };
};
