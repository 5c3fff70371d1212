import { defineRule } from './define-rule.ts';
import { segmentSubnetOf } from './endpoint-addresses.ts';
import { counted, listed, sentenceCase } from './wording.ts';

export const managementInsideSegment = defineRule({
  id: 'management-inside-segment',
  title: 'Devices are administered outside the stretched segments',
  severity: 'degrading',
  looksAt: ['devices', 'addressing'],
  why: 'Whoever is on the segment, at any of its sites, reaches the administration of these devices; and in a storm on the segment nobody does.',
  seen: 'In the storm that you want to stop, the devices that could stop it can’t be reached.',
  sources: ['common practice, no source'],
  messages: {
    inside: {
      words: 'managed in segment',
      sentence: (v: { readonly devices: string; readonly verb: string; readonly segment: string }) =>
        `${v.devices} ${v.verb} managed inside stretched segment ${v.segment}`,
    },
  },
  check: (network) => {
    const { design } = network;
    const bySegment = new Map<string, string[]>();
    for (const id of network.deviceIds) {
      const { managementAddress } = design.devices[id]!;
      const segment =
        managementAddress === undefined ? undefined : segmentSubnetOf(network, managementAddress)?.segment;
      if (segment === undefined || Object.keys(design.segments[segment]!.sites).length < 2) continue;
      bySegment.set(segment, [...(bySegment.get(segment) ?? []), id]);
    }
    return [...bySegment].map(([segment, ids]) => {
      const refs = ids.map((id) => ({ collection: 'devices' as const, id }));
      return {
        message: 'inside',
        values: {
          devices:
            ids.length > 2
              ? sentenceCase(counted(ids.length, 'device', 'devices'))
              : listed(ids.map((id) => design.devices[id]!.name)),
          verb: ids.length === 1 ? 'is' : 'are',
          segment: design.segments[segment]!.letter,
        },
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment],
        properties: refs.map((ref) => ({ ref, path: ['managementAddress'] })),
        basis: ids.map((id) => design.devices[id]!.managementAddress!),
      };
    });
  },
});
