import { defineRule } from './define-rule.ts';
import { plainAddress } from './endpoint-addresses.ts';
import { counted, listed, sentenceCase } from './wording.ts';

export const hostAddressDuplicate = defineRule({
  id: 'host-address-duplicate',
  title: 'No two hosts of a segment have one address',
  severity: 'blocking',
  looksAt: ['devices', 'segments'],
  why: 'As long as the sites were apart both could have it. Once the segment is stretched, both answer for the address and each neighbour believes whoever answered last.',
  seen: 'Both hosts report that their address is in use; connections to either break off at random. Make an inventory and renumber before stretching.',
  sources: [{ document: 'RFC 5227', clause: 'section 2.4' }],
  messages: {
    twice: {
      words: 'address used twice',
      sentence: (v: { readonly hosts: string; readonly address: string; readonly segment: string }) =>
        `${v.hosts} have ${v.address} in segment ${v.segment}`,
    },
  },
  check: ({ design, hostsBySegment }) =>
    [...hostsBySegment].flatMap(([segment, hosts]) => {
      const owners = new Map<string, string[]>();
      for (const id of hosts) {
        const device = design.devices[id]!;
        if (device.kind !== 'host') continue;
        for (const address of new Set((device.addresses ?? []).map(plainAddress)))
          owners.set(address, [...(owners.get(address) ?? []), id]);
      }
      return [...owners].flatMap(([address, ids]) => {
        if (ids.length < 2) return [];
        const refs = ids.map((id) => ({ collection: 'devices' as const, id }));
        return [
          {
            message: 'twice',
            values: {
              hosts:
                ids.length > 2
                  ? sentenceCase(counted(ids.length, 'host', 'hosts'))
                  : listed(ids.map((id) => design.devices[id]!.name)),
              address,
              segment: design.segments[segment]!.letter,
            },
            elements: refs,
            identity: [segment, address],
            properties: refs.map((ref) => ({ ref, path: ['addresses'] })),
            basis: ids,
          },
        ];
      });
    }),
});
