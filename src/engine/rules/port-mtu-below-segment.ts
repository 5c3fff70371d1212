import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import { segmentReaches } from '../flood/segment-nodes.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { perFacts } from './facts.ts';
import { portLabel, portRef } from './port-label.ts';
import { needOf } from './segment-capacity.ts';
import { sentenceStart } from './sentence-start.ts';
import { countWord, counted, sentenceCase } from './wording.ts';

const messages = {
  one: {
    words: 'port MTU small',
    sentence: (v: {
      readonly port: string;
      readonly mtuBytes: number;
      readonly segment: string;
      readonly needBytes: number;
    }) => `${sentenceStart(v.port)} takes ${v.mtuBytes} bytes, segment ${v.segment} needs ${v.needBytes}`,
  },
  several: {
    words: 'port MTU small',
    sentence: (v: { readonly count: number; readonly segment: string; readonly needBytes: number }) =>
      `${sentenceCase(countWord(v.count))} ports of segment ${v.segment} take less than ${v.needBytes} bytes`,
  },
};

interface Narrow {
  readonly segment: Id;
  readonly needBytes: number;
  readonly ports: readonly { readonly device: Id; readonly port: Id; readonly mtuBytes: number }[];
}

/** By bundle: the least MTU that one of its ports states, hosts' own left out; Infinity where none does. */
const leastMtus = perFacts(['devices', 'cables'], ({ design, bundles }): readonly number[] =>
  bundles.map(({ a, b }) => {
    let least = Infinity;
    for (const { device, ports } of [a, b]) {
      const { kind, ports: all } = entryOf(design.devices, device);
      if (kind !== 'host') for (const port of ports) least = Math.min(least, all[port]?.mtu ?? Infinity);
    }
    return least;
  }),
);

/** Ports of switches and gateways that a segment's frames cross and that are smaller than its packets. A host's own port is its own affair. */
const narrowPorts = (network: Network): readonly Narrow[] => {
  const graph = floodGraph(network);
  const least = leastMtus(network);
  return segmentReaches(graph).flatMap(({ segment, nodes }): readonly Narrow[] => {
    const need = needOf(network, segment);
    if (need === undefined) return [];
    const ports = new Map<string, Narrow['ports'][number]>();
    for (const node of nodes) {
      const element = graph.element[node]!;
      if (!(least[element]! < need.needBytes)) continue;
      const bundle = network.bundles[element]!;
      for (const group of [bundle.a, bundle.b]) {
        const { kind, ports: all } = entryOf(network.design.devices, group.device);
        if (kind === 'host') continue;
        for (const port of group.ports) {
          const mtuBytes = all[port]?.mtu;
          if (mtuBytes !== undefined && mtuBytes < need.needBytes)
            ports.set(`${group.device}/${port}`, { device: group.device, port, mtuBytes });
        }
      }
    }
    if (ports.size === 0) return [];
    const list = [...ports].sort(([a], [b]) => (a < b ? -1 : 1)).map(([, port]) => port);
    return [{ segment, needBytes: need.needBytes, ports: list }];
  });
};

export const portMtuBelowSegment = defineRule({
  id: 'port-mtu-below-segment',
  title: 'Every port on the way takes the largest packet of its segments',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'A switch drops what is too long for its port, and as a bridge it has no way to tell the sender.',
  seen: 'Small packets pass, large ones don’t, between two hosts of the same site perhaps; the port counts oversize frames.',
  sources: [{ document: 'RFC 8899', clause: 'section 1.1' }],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    return narrowPorts(network).map(({ segment, needBytes, ports }): Fault<typeof messages> => {
      const refs = ports.map(({ device, port }): ElementRef => portRef(device, port));
      const [first] = ports;
      const { letter } = entryOf(design.segments, segment);
      const body = {
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment],
        properties: refs.map((ref) => ({ ref, path: ['mtu'] })),
        basis: [needBytes, ...ports.map(({ device, port, mtuBytes }) => `${device}/${port} ${mtuBytes}`)],
      };
      return ports.length === 1
        ? {
            message: 'one',
            values: {
              port: portLabel(design, first!.device, first!.port),
              mtuBytes: first!.mtuBytes,
              segment: letter,
              needBytes,
            },
            ...body,
          }
        : { message: 'several', values: { count: ports.length, segment: letter, needBytes }, ...body };
    });
  },
  fixes: (fault, network) => {
    const found = narrowPorts(network).find(({ segment }) => segment === fault.identity?.[0]);
    if (found === undefined) return [];
    const devices: { [device: Id]: { ports: { [port: Id]: MergePatch } } } = {};
    for (const { device, port } of found.ports)
      (devices[device] ??= { ports: {} }).ports[port] = { mtu: found.needBytes };
    const many = counted(found.ports.length, 'port', 'ports');
    return [
      {
        id: 'raise-ports',
        label:
          found.ports.length === 1 ? `Raise it to ${found.needBytes}` : `Raise ${many} to ${found.needBytes}`,
        sentence: `States an MTU of ${found.needBytes} bytes for ${many}; set it up there.`,
        patch: { devices },
      },
    ];
  },
});
