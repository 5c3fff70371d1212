import { agreeApartFrom, changesBetween } from '../network/changes.ts';
import type { Tags } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import type { FloodGraph } from './flood-graph.ts';
import type { Emit } from './forwarding.ts';
import type { Direction } from './places.ts';
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

export interface KeptRows {
  /**
   * Emits the edges that a crossing had in the earlier graph, and gives the place it leads into (-1: none). Undefined, and
   * nothing emitted, where it wasn't there or ends at a device that may now do otherwise.
   */
  readonly take: (element: number, direction: Direction, tags: Tags, emit: Emit) => number | undefined;
}

/** What can be taken over from the flood graph of an earlier version: elements and places may have other numbers by now. */
export const keptRows = (graph: FloodGraph, now: Network): KeptRows => {
  const before = graph.network;
  const touched = touchedDevices(before, now);
  const elementBefore = new Int32Array(now.bundles.length + now.tunnelIds.length).fill(-1);
  const elementNow = new Int32Array(before.bundles.length + before.tunnelIds.length).fill(-1);
  const pair = (old: number | undefined, element: number): void => {
    if (old === undefined) return;
    elementBefore[element] = old;
    elementNow[old] = element;
  };
  for (const { index, cables } of now.bundles) {
    const old = before.bundleByCable.get(cables[0]!);
    if (old?.cables[0] === cables[0]) pair(old?.index, index);
  }
  const { tunnelIndex } = placesOf(before);
  now.tunnelIds.forEach((id, i) => {
    const old = tunnelIndex.get(id);
    pair(old === undefined ? undefined : before.bundles.length + old, now.bundles.length + i);
  });
  const placeNow = new Int32Array(placesOf(before).all.length).fill(-1);
  for (const [device, places] of placesOf(now).byDevice)
    if (!touched.has(device))
      placesOf(before)
        .byDevice.get(device)!
        .forEach(({ index }, i) => (placeNow[index] = places[i]!.index));
  const isTouched = Uint8Array.from(devicesArrivedAt(now), (device) => (touched.has(device) ? 1 : 0));
  return {
    take: (element, direction, tags, emit) => {
      const old = isTouched[element * 2 + direction] === 1 ? -1 : elementBefore[element]!;
      const node = old < 0 ? -1 : graph.nodeOf(old, direction, tags);
      if (node < 0) return undefined;
      for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1) {
        const target = graph.edgeTo[edge]!;
        const out = elementNow[graph.element[target]!]!;
        emit(out, graph.direction[target] as Direction, graph.tags[target]!, graph.edgeClasses[edge]!);
      }
      const place = graph.into[node]!;
      return place < 0 ? -1 : placeNow[place]!;
    },
  };
};
