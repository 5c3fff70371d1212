import type { MergePatch } from '../model/merge-patch.ts';
import type { Device, Network } from '../network/network.ts';
import { perObject, segmentsAt } from '../network/network.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { countWord, sentenceCase } from './wording.ts';

// Common practice, no source: a few hundred frames a second for each access port, then measured.
const usualStormLimitPps = 500;

interface AccessPort {
  readonly device: string;
  readonly port: string;
}

/** Access ports of a switch or gateway where nothing bounds broadcast, with their VLANs. */
const unlimitedIn = perObject(
  ({ kind, ports }: Device): readonly { readonly port: string; readonly vlan: number }[] =>
    kind === 'host'
      ? []
      : Object.keys(ports)
          .sort()
          .flatMap((port) => {
            const { role, mode, vlan, shut, stormLimitPps } = ports[port]!;
            const isUnlimited = mode === 'access' && shut !== true && stormLimitPps === undefined;
            return role === 'lan' && isUnlimited && vlan !== undefined ? [{ port, vlan }] : [];
          }),
);

/** Access ports of each segment that tunnels carry, where nothing bounds broadcast. */
const unlimitedPorts = (network: Network): ReadonlyMap<string, readonly AccessPort[]> => {
  const stretched = new Set([...tunnelSegments(network).values()].flat());
  const bySegment = new Map<string, AccessPort[]>();
  for (const device of network.deviceIds) {
    const entry = network.design.devices[device]!;
    for (const { port, vlan } of unlimitedIn(entry))
      for (const segment of segmentsAt(network, entry.site, vlan))
        if (stretched.has(segment))
          bySegment.set(segment, [...(bySegment.get(segment) ?? []), { device, port }]);
  }
  return bySegment;
};

export const accessPortWithoutStormLimit = defineRule({
  id: 'access-port-without-storm-limit',
  title: 'Every access port of a stretched segment limits broadcast',
  severity: 'advisory',
  looksAt: segmentPathFacts,
  why: 'A loop made by one wrong cable at one site fills the tunnels and reaches every other site of the segment.',
  seen: 'Somebody plugs a cable back into the same switch, and all sites are down together.',
  sources: [{ document: 'RFC 4762', clause: 'section 14' }, 'common practice, no source'],
  messages: {
    unlimited: {
      words: 'no storm limit',
      sentence: (v: { readonly count: number; readonly segment: string }) =>
        `${sentenceCase(countWord(v.count))} access ${v.count === 1 ? 'port' : 'ports'} of ${v.segment} ${v.count === 1 ? 'has' : 'have'} no storm limit`,
    },
  },
  check: (network) =>
    [...unlimitedPorts(network)].map(([segment, ports]) => {
      const refs = ports.map(({ device, port }) => ({ collection: 'devices' as const, id: device, port }));
      return {
        message: 'unlimited',
        values: { count: ports.length, segment: network.design.segments[segment]!.name },
        elements: [{ collection: 'segments' as const, id: segment }, ...refs],
        identity: [segment],
        properties: refs.map((ref) => ({ ref, path: ['stormLimitPps'] })),
        basis: ports.map(({ device, port }) => `${device}/${port}`),
      };
    }),
  fixes: (fault, network) => {
    const ports = unlimitedPorts(network).get(fault.elements[0]!.id) ?? [];
    const devices: { [device: string]: { ports: { [port: string]: MergePatch } } } = {};
    for (const { device, port } of ports) {
      devices[device] ??= { ports: {} };
      devices[device].ports[port] = { stormLimitPps: usualStormLimitPps };
    }
    const { count } = fault.values;
    return [
      {
        id: 'limit-all',
        label: count === 1 ? 'Add a limit' : count === 2 ? 'Add to both' : `Add to all ${countWord(count)}`,
        sentence: `Limits broadcast to ${usualStormLimitPps} frames per second at ${count === 1 ? 'the port' : `all ${countWord(count)} ports`}; measure and adjust.`,
        patch: { devices },
      },
    ];
  },
});
