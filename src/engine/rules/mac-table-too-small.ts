import type { Id } from '../model/scalars.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import { segmentReaches } from '../flood/segment-nodes.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';

// Common practice, no source: tables spread addresses by a hash, so that some are refused before the table is full.
const usableShare = 0.8;

interface Full {
  readonly device: Id;
  readonly hosts: number;
  readonly table: number;
  readonly segments: readonly Id[];
}

const hostsOf = (network: Network, segment: Id): number =>
  Math.max(
    entryOf(network.design.segments, segment).hostsExpected ?? 0,
    network.hostsBySegment.get(segment)?.length ?? 0,
  );

/** Devices that must learn more addresses than their tables safely hold: flooded frames teach every talker to all. */
const fullTables = (network: Network): readonly Full[] => {
  const { design } = network;
  const tables = new Map<Id, number>();
  for (const device of network.deviceIds) {
    const { kind, profile } = entryOf(design.devices, device);
    const table = profile === undefined ? undefined : entryOf(design.profiles, profile).macTable;
    if (kind !== 'host' && table !== undefined) tables.set(device, table);
  }
  if (tables.size === 0) return [];
  const graph = floodGraph(network);
  const segmentsOf = new Map<Id, Set<Id>>();
  for (const { segment, nodes } of segmentReaches(graph))
    for (const node of nodes) {
      const place = graph.forwarding.places.all[graph.into[node]!];
      if (place === undefined || !tables.has(place.device)) continue;
      // A cross-connect learns nothing.
      if (place.kind === 'forwarder' && entryOf(design.forwarders, place.forwarder).kind === 'cross-connect')
        continue;
      const known = segmentsOf.get(place.device);
      if (known === undefined) segmentsOf.set(place.device, new Set([segment]));
      else known.add(segment);
    }
  return [...tables].flatMap(([device, table]): readonly Full[] => {
    const segments = [...(segmentsOf.get(device) ?? [])].sort();
    const hosts = segments.reduce((sum, segment) => sum + hostsOf(network, segment), 0);
    return hosts > table * usableShare ? [{ device, hosts, table, segments }] : [];
  });
};

export const macTableTooSmall = defineRule({
  id: 'mac-table-too-small',
  title: 'Every device has room for the addresses of all hosts of its segments',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'Each bridge of a stretched segment learns the hosts of all sites. What no longer fits into its table is flooded to every port and into every tunnel.',
  seen: 'Traffic between two hosts shows up at ports and sites that have nothing to do with it; tunnels fill up.',
  sources: [
    { document: 'RFC 6820', clause: 'section 7.3' },
    { document: 'RFC 7348', clause: 'section 3.3' },
  ],
  messages: {
    full: {
      words: 'address table small',
      sentence: (v: { readonly device: string; readonly hosts: number; readonly table: number }) =>
        `${v.device} learns ${v.hosts} addresses, its table holds ${v.table}`,
    },
  },
  check: (network) =>
    fullTables(network).map(({ device, hosts, table, segments }) => ({
      message: 'full',
      values: { device: entryOf(network.design.devices, device).name, hosts, table },
      elements: [
        { collection: 'devices' as const, id: device },
        ...segments.map((id) => ({ collection: 'segments' as const, id })),
      ],
      identity: [device],
      properties: [
        { ref: { collection: 'devices' as const, id: device }, path: ['profile'] },
        ...segments.map((id) => ({ ref: { collection: 'segments' as const, id }, path: ['hostsExpected'] })),
      ],
      basis: [hosts, table],
    })),
});
